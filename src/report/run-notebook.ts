/** Runs a notebook through Jupyter and the TypeScript kernel, and gives it back with its outputs. */
import { spawn } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { type Jupyter, kernelEnvironment } from './jupyter';
import { joined, type Notebook } from './notebook-file';

export interface NotebookRun {
  readonly jupyter: Jupyter;
  /** Folder in which the kernel works; files named in the notebook and the import of `stickband` start here. */
  readonly workingFolder: string;
  /** Called when a cell starts, with the share of cells done, 0..1. */
  readonly onProgress?: (share: number) => void;
}

/**
 * Runs all cells in order and resolves to the executed notebook. Equal runs give equal notebooks: no times are
 * recorded. Rejects with the number, the code and the message of the first cell that fails, or with what Python
 * printed when the run itself breaks down.
 */
export async function runNotebook(notebook: Notebook, run: NotebookRun): Promise<Notebook> {
  const scratch = mkdtempSync(join(tmpdir(), 'stickband-'));
  try {
    const result = await runPython(notebook, run, kernelEnvironment(scratch));
    if (result.failed) throw new Error(describeFailure(result.notebook, result.failed));
    return result.notebook;
  } finally {
    rmSync(scratch, { recursive: true, force: true });
  }
}

interface RunResult {
  readonly notebook: Notebook;
  readonly failed: { readonly cell: number; readonly text: string } | null;
}

function runPython(notebook: Notebook, run: NotebookRun, env: NodeJS.ProcessEnv): Promise<RunResult> {
  return new Promise((resolve, reject) => {
    const child = spawn(run.jupyter.python, [join(__dirname, 'run-notebook.py')], {
      cwd: run.workingFolder,
      env,
      stdio: ['pipe', 'pipe', 'pipe'],
    });
    const printed: Buffer[] = [];
    const complaints: string[] = [];
    child.stdout.on('data', (piece: Buffer) => printed.push(piece));
    createInterface({ input: child.stderr }).on('line', (line) => {
      const started = /^cell (\d+)$/.exec(line);
      if (started) run.onProgress?.(Number(started[1]) / notebook.cells.length);
      else complaints.push(line);
    });
    child.on('error', reject);
    child.on('close', (code) => {
      if (code === 0) resolve(JSON.parse(Buffer.concat(printed).toString('utf8')) as RunResult);
      else reject(new Error(`Jupyter could not run the notebook:\n${complaints.slice(-15).join('\n')}`));
    });
    child.stdin.on('error', () => {}); // A child that died early is reported by `close`.
    child.stdin.end(JSON.stringify(notebook));
  });
}

/** tslab prints errors, of the compiler too, to the stderr of the cell and raises an empty exception. */
function describeFailure(notebook: Notebook, failed: { cell: number; text: string }): string {
  const cell = notebook.cells[failed.cell]!;
  const printed = (cell.outputs ?? [])
    .filter((output) => output.name === 'stderr')
    .map((output) => joined(output.text))
    .join('');
  const message = printed.trim() || failed.text || 'no message';
  return `Cell ${failed.cell + 1} of the notebook failed: ${message}\nIts code:\n${joined(cell.source)}`;
}
