/** Renders a finished audit: the guided notebook and its page, and before them the pages of single loops that they link to. */
import { join } from 'node:path';
import type { AuditFindings, RankedFindings } from '../audit/audit-findings';
import type { RunOptions } from '../audit/audit-loops';
import type { ListedLoop } from '../audit/loop-job';
import type { Jupyter } from '../report/jupyter';
import { bundledNotebook } from '../report/places';
import { type Rendered, type Rendering, renderNotebook } from '../report/render-notebook';
import { stated } from './arguments';
import { fileName } from './file-name';

export interface AuditPages {
  readonly jupyter: Jupyter;
  /** Has the journal of the audit, and takes notebook and page. */
  readonly folder: string;
  readonly name: string;
  readonly source: string;
  readonly options: RunOptions;
  readonly findings: AuditFindings;
  /** All loops of the audit, in its order. */
  readonly listed: readonly ListedLoop[];
  /** So many loops of the ranking, from the first on, get a page of their own. */
  readonly pages: number;
  readonly onProgress: (step: string, share: number) => void;
}

/** Folder of the pages of single loops, beside the page of the audit. */
const pagesFolder = 'loops';

/** Throws UnwritableOutput. */
export async function renderAudit(audit: AuditPages): Promise<Rendered> {
  const { jupyter, folder, name, source, options, findings, onProgress } = audit;
  const chosen = findings.ranked.slice(0, audit.pages);
  const pages: Record<string, string> = {};
  const steps = chosen.length + 1;
  for (const [i, loop] of chosen.entries()) {
    const tag = loop.assessment.loop;
    onProgress(`rendering the page of ${tag}`, i / steps);
    pages[tag] = await renderLoop(loop, audit);
  }
  const { map, reading, seed } = options;
  return renderAuditNotebook({
    jupyter,
    folder,
    name,
    files: { source, folder, ...(map === undefined ? {} : { map }) },
    parameters: { auditing: stated({ reading, seed, retry: false }), pages },
    onProgress: (done) => onProgress('rendering the notebook', (chosen.length + done) / steps),
  });
}

/** The guided notebook of a whole audit and its page, `audit.ipynb` and `audit.html`. Throws UnwritableOutput. */
export function renderAuditNotebook({
  name,
  parameters,
  ...rendering
}: Omit<Rendering, 'title'>): Promise<Rendered> {
  return renderNotebook(bundledNotebook('audit-a-unit.ipynb'), {
    ...rendering,
    parameters: { unit: name, ...parameters },
    name: 'audit',
    title: `Audit of ${name}`,
  });
}

export interface MadeFiles {
  readonly rendered: Rendered | null;
  readonly sheet: string | null;
  readonly numbers: readonly string[];
}

/** Lines that say where the files of an audit are, after an empty one; none when there are none. */
export function madeFiles({ rendered, sheet, numbers }: MadeFiles): string[] {
  const made = [
    ...(rendered ? [`Page to share:  ${rendered.page}`, `Notebook:       ${rendered.notebook}`] : []),
    ...(sheet ? [`Table (CSV):    ${sheet}`] : []),
    ...numbers.map((path) => `Numbers (JSON): ${path}`),
  ];
  return made.length > 0 ? ['', ...made] : [];
}

/** Path of the page of one loop, relative to that of the audit. */
async function renderLoop(
  { place, assessment, order }: RankedFindings,
  { jupyter, folder, options, listed }: AuditPages,
): Promise<string> {
  const { path, reading } = listed[order]!;
  // The place keeps apart what tags cannot.
  const name = `${place}-${fileName(assessment.loop)}`;
  await renderNotebook(bundledNotebook('assess-one-loop.ipynb'), {
    jupyter,
    folder: join(folder, pagesFolder),
    name,
    title: `${assessment.loop}: what makes this loop cycle?`,
    files: { file: path },
    parameters: { reading, assessing: stated({ seed: options.seed }) },
  });
  return `${pagesFolder}/${name}.html`;
}
