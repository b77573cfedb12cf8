/** Reads the first sheet with cells in it of an Excel workbook. */
import { UnreadableInput } from '../errors';
import { tableOf } from './header';
import type { Cell, Table } from './table';

/**
 * Dates come out as clock time without a zone, as a sheet holds them.
 *
 * @param what how the source is called in messages
 * @throws UnreadableInput when the bytes are no workbook, or no sheet has a header and rows
 */
export function readSpreadsheet(bytes: Uint8Array, what: string): Table {
  // Loaded where it is needed: it takes a fifth of a second.
  const xlsx = require('@e965/xlsx') as typeof import('@e965/xlsx');
  let book: ReturnType<typeof xlsx.read>;
  try {
    book = xlsx.read(bytes, { type: 'array', dense: true, cellNF: true, cellText: false });
  } catch (error) {
    throw new UnreadableInput(
      `${what} cannot be opened as an Excel workbook (${(error as Error).message}). Save it again as .xlsx without a password, or export it as .csv.`,
    );
  }
  const inUse = book.SheetNames.filter((name) => book.Sheets[name]!['!ref'] !== undefined);
  const name = inUse[0];
  if (name === undefined) throw new UnreadableInput(`${what} has no sheet with cells in it.`);
  const sheet = book.Sheets[name]!;
  const since1904 = book.Workbook?.WBProps?.date1904 === true;
  const rows = Array.from(sheet['!data'] ?? [], (row) =>
    Array.from(row ?? [], (cell): Cell => {
      if (cell === undefined || cell.v === undefined) return '';
      if (cell.t === 'e') return '#N/A';
      if (cell.t !== 'n') return String(cell.v);
      const number = cell.v as number;
      return xlsx.SSF.is_date(String(cell.z ?? 'General')) ? clockTime(number, since1904) : number;
    }),
  );
  const table = tableOf(rows, what);
  if (inUse.length === 1) return table;
  const others = inUse.slice(1).map((sheetName) => `"${sheetName}"`);
  const note = {
    code: 'first-sheet',
    text: `The sheet "${name}" was read; ${others.join(', ')} ${others.length > 1 ? 'were' : 'was'} left out.`,
  };
  return { ...table, notes: [...table.notes, note] };
}

/** ISO 8601 clock time of a day number, to the millisecond. */
function clockTime(day: number, since1904: boolean): string {
  const daysTo1970 = since1904 ? 24107 : 25569;
  return new Date(Math.round((day - daysTo1970) * 86_400_000)).toISOString().slice(0, -1);
}
