/** Renders a notebook: runs it with parameters and writes it, and the page made from it, into a folder. */
import { readFileSync, realpathSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join, relative, resolve, sep } from 'node:path';
import type { Jupyter } from './jupyter';
import { type Notebook, withParameters } from './notebook-file';
import { pageOf } from './page';
import { packageFolder } from './places';
import { runNotebook } from './run-notebook';
import { prepareFolder, writeWhole } from './write-whole';

export interface Rendering {
  readonly jupyter: Jupyter;
  /** Folder for the results; made when missing. */
  readonly folder: string;
  /** Name of the results, without ending. */
  readonly name: string;
  /** Title of the page. */
  readonly title: string;
  /** Files and folders that the notebook needs; each reaches it as a parameter, relative to the folder it works in. */
  readonly files: Readonly<Record<string, string | readonly string[]>>;
  /** Further parameters of the notebook. */
  readonly parameters: Readonly<Record<string, unknown>>;
  readonly onProgress?: (share: number) => void;
}

export interface Rendered {
  /** Paths of the executed notebook and of the page. */
  readonly notebook: string;
  readonly page: string;
}

/** Throws UnwritableOutput when the folder cannot be written to; both files are written, or none. */
export async function renderNotebook(template: string, rendering: Rendering): Promise<Rendered> {
  prepareFolder(rendering.folder);
  const source: Notebook = JSON.parse(readFileSync(template, 'utf8'));
  const workingFolder = importsThisPackage(rendering.folder) ? rendering.folder : dirname(template);
  const from = realpathSync(workingFolder);
  const fromThere = (path: string): string => relative(from, realpathSync(path)).split(sep).join('/') || '.';
  const files = Object.fromEntries(
    Object.entries(rendering.files).map(([name, paths]) => [
      name,
      typeof paths === 'string' ? fromThere(paths) : paths.map(fromThere),
    ]),
  );
  const executed = await runNotebook(withParameters(source, { ...files, ...rendering.parameters }), {
    jupyter: rendering.jupyter,
    workingFolder,
    onProgress: rendering.onProgress,
  });
  const base = join(resolve(rendering.folder), rendering.name);
  const rendered = { notebook: `${base}.ipynb`, page: `${base}.html` };
  writeWhole({
    [rendered.notebook]: `${JSON.stringify(executed, null, 1)}\n`,
    [rendered.page]: pageOf(executed, rendering.title),
  });
  return rendered;
}

/** Whether a notebook in `folder` that imports `stickband` gets this very package, so that it can be run again there. */
function importsThisPackage(folder: string): boolean {
  try {
    const found = createRequire(join(resolve(folder), 'notebook.js')).resolve('stickband/package.json');
    return realpathSync(found) === realpathSync(join(packageFolder, 'package.json'));
  } catch {
    return false;
  }
}
