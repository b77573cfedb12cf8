/** What every guided notebook owes: kept without outputs, and run whole without a word on stderr. */
import { readFileSync } from 'node:fs';
import { expect } from 'vitest';
import type { Notebook } from '../../src/report/notebook-file';

export function expectKeptWithoutOutputs(path: string): void {
  const kept: Notebook = JSON.parse(readFileSync(path, 'utf8'));
  for (const cell of kept.cells)
    expect([cell.outputs ?? [], cell.execution_count ?? null]).toEqual([[], null]);
}

/** Every code cell ran, in order, and gave nothing but what it displays. */
export function expectRanWhole(notebook: Notebook): void {
  const code = notebook.cells.filter((cell) => cell.cell_type === 'code');
  expect(code.map((cell) => cell.execution_count)).toEqual(code.map((_, place) => place + 1));
  const printed = code
    .flatMap((cell) => cell.outputs ?? [])
    .filter(({ output_type }) => output_type !== 'display_data');
  expect(printed).toEqual([]);
}
