/** Finds the line of column names in rows of cells that may have other lines above it and units below it. */
import { UnreadableInput } from '../errors';
import type { Note } from './loop-record';
import { roleOf } from './names';
import type { Cell, Table } from './table';

/** Rows looked at for the header. */
const lookedAt = 60;

/** A number, a date or a clock time: what a row of data has and a line of names has not. */
const valueLike =
  /^[+-]?(\d+([.,]\d+)*|[.,]\d+)(e[+-]?\d+)?$|\d:\d\d|^\d{1,4}[-/.]\d{1,2}[-/.]\d{1,4}(\D|$)|^\d{1,2}[- ][a-z]{3}[- ]\d{2,4}/i;

const isEmpty = (cell: Cell | undefined): boolean => cell === undefined || String(cell).trim() === '';
const isValue = (cell: Cell): boolean => typeof cell === 'number' || valueLike.test(cell.trim());
const filled = (row: readonly Cell[]): Cell[] => row.filter((cell) => !isEmpty(cell));

/**
 * Makes a table of rows of cells: names from the header, then the rows of data below it.
 *
 * @param rows all rows, blank ones too
 * @param what how the source is called in messages
 * @throws UnreadableInput when there is no header, no row below it, or a row that is wider than the header
 */
export function tableOf(rows: readonly (readonly Cell[])[], what: string): Table {
  const first = rows.findIndex((row, i) => i < lookedAt && filled(row).length > 1 && row.some(isValueCell));
  const textRows = (first < 0 ? rows.slice(0, lookedAt) : rows.slice(0, first))
    .map((row, at) => ({ row, at }))
    .filter(({ row }) => filled(row).length > 1);
  if (textRows.length === 0) {
    throw new UnreadableInput(
      first < 0
        ? `${what} has no line of column names: no line with two cells or more was found, separated by comma, semicolon or tab.`
        : `${what} starts with values on line ${first + 1}. A line of column names is needed above them, such as time, SP, PV, OP.`,
    );
  }
  // The names stand right above the data, or above a line of units.
  const last = textRows[textRows.length - 1]!;
  const before = textRows[textRows.length - 2];
  const hasUnits =
    before !== undefined && before.at === last.at - 1 && knownNames(before.row) > knownNames(last.row);
  const header = hasUnits ? before : last;
  const dataFrom = first < 0 ? rows.length : first;
  let width = header.row.length;
  while (width > 0 && isEmpty(header.row[width - 1])) width--;
  const names = Array.from({ length: width }, (_, c) => String(header.row[c]).trim());

  const notes: Note[] = [];
  if (header.at > 0 && filled(rows.slice(0, header.at).flat()).length > 0) {
    notes.push({
      code: 'lines-above-header',
      text: `The column names stand on line ${header.at + 1}; what stands above them was left out.`,
    });
  }
  if (hasUnits) {
    notes.push({ code: 'line-of-units', text: `Line ${last.at + 1} was read as units of the columns.` });
  }
  const kept: number[] = [];
  for (let i = dataFrom; i < rows.length; i++) {
    const row = rows[i]!;
    if (row.every(isEmpty)) continue;
    if (row.length > width && !row.slice(width).every(isEmpty)) {
      throw new UnreadableInput(
        `${what} has ${row.length} cells on line ${i + 1} but ${width} column names. If numbers are written with a decimal comma, separate the columns by semicolons or put the numbers in quotes.`,
      );
    }
    kept.push(i);
  }
  // A last line without a value in it, or cut off in the middle, is no row of data.
  const end = kept[kept.length - 1];
  if (end !== undefined && kept.length > 1) {
    const usual = filled(rows[kept[kept.length - 2]!]!).length;
    const cut = rows[end]!.length < rows[kept[kept.length - 2]!]!.length && filled(rows[end]!).length < usual;
    if (cut || !rows[end]!.some(isValueCell)) {
      kept.pop();
      notes.push({
        code: 'last-line',
        text: `The last line (${end + 1}) is not a whole row and was left out.`,
      });
    }
  }
  if (kept.length === 0) {
    throw new UnreadableInput(
      `${what} has column names but no rows below them. Columns found: ${names.join(', ')}.`,
    );
  }
  return {
    names,
    units: names.map((_, c) => (hasUnits ? String(last.row[c] ?? '').trim() : '')),
    rows: kept.length,
    cells: (column) => kept.map((i) => rows[i]![column] ?? ''),
    rowNumber: (row) => kept[row]! + 1,
    notes,
  };
}

function isValueCell(cell: Cell): boolean {
  return !isEmpty(cell) && isValue(cell);
}

function knownNames(row: readonly Cell[]): number {
  return row.filter((cell) => roleOf(String(cell)).role !== null).length;
}
