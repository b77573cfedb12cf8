/** Reads an export that is an Excel workbook. It is read whole: a sheet holds a million rows at most. */
import { createHash } from 'node:crypto';
import { readFileSync, statSync } from 'node:fs';
import { UnreadableInput } from '../../errors';
import { readSpreadsheet } from '../../record/spreadsheet';
import type { ExportReader } from './export-reader';

/** A packed sheet takes some twenty times its size in memory (own choice, for a machine with a few GB). */
const largest = 64_000_000;

/** @throws UnreadableInput when it is no workbook, too large, or has no header and rows */
export function openWorkbook(path: string, what: string): ExportReader {
  const { size } = statSync(path);
  if (size > largest) {
    throw new UnreadableInput(
      `${what} has ${Math.round(size / 1e6)} MB. A workbook has to be held in memory whole, up to ${largest / 1e6} MB. Export it as .csv or Parquet, which may be of any size.`,
    );
  }
  const bytes = readFileSync(path);
  const table = readSpreadsheet(bytes, what);
  return {
    first: table,
    read: async ({ columns }, take, onProgress) => {
      take({ columns, rows: table.rows, cells: table.cells, rowNumber: table.rowNumber });
      onProgress(1);
      return { sha256: createHash('sha256').update(bytes).digest('hex'), notes: [] };
    },
  };
}
