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

/** What stands above the data. */
export interface Header {
  readonly names: readonly string[];
  /** Units from a line of their own; '' where there is none. */
  readonly units: readonly string[];
  /** Row of the first data, counted from 0. */
  readonly dataFrom: number;
  readonly notes: readonly Note[];
}

/**
 * @param rows all rows or the first ones, blank ones too; no more than the first 60 are looked at
 * @param what how the source is called in messages
 * @throws UnreadableInput when there is no header
 */
export function headerOf(rows: readonly (readonly Cell[])[], what: string): Header {
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
  return {
    names,
    units: names.map((_, c) => (hasUnits ? String(last.row[c] ?? '').trim() : '')),
    dataFrom: first < 0 ? rows.length : first,
    notes,
  };
}

/**
 * Tells which rows below the header are rows of data. Rows come one by one, so that a file of any length can go by; a row
 * is handed on when the next one has come, as the last may be cut off.
 */
export class DataRows {
  private held: { readonly row: readonly Cell[]; readonly at: number } | null = null;
  private before: readonly Cell[] | null = null;

  /** @param take receives each row of data and its position among all rows */
  constructor(
    private readonly header: Header,
    private readonly what: string,
    private readonly take: (row: readonly Cell[], at: number) => void,
  ) {}

  /**
   * @param at position among all rows, from 0
   * @throws UnreadableInput for a row that is wider than the header
   */
  add(row: readonly Cell[], at: number): void {
    if (at < this.header.dataFrom || row.every(isEmpty)) return;
    const width = this.header.names.length;
    if (row.length > width && !row.slice(width).every(isEmpty)) {
      throw new UnreadableInput(
        `${this.what} has ${row.length} cells on line ${at + 1} but ${width} column names. If numbers are written with a decimal comma, separate the columns by semicolons or put the numbers in quotes.`,
      );
    }
    this.letGo();
    this.held = { row, at };
  }

  /**
   * Ends the table: a last line without a value in it, or cut off in the middle, is no row of data.
   *
   * @throws UnreadableInput when there was no row of data
   */
  end(): Note[] {
    const { held, before } = this;
    if (held === null) {
      throw new UnreadableInput(
        `${this.what} has column names but no rows below them. Columns found: ${this.header.names.join(', ')}.`,
      );
    }
    const cut =
      before !== null && held.row.length < before.length && filled(held.row).length < filled(before).length;
    if (before !== null && (cut || !held.row.some(isValueCell))) {
      return [
        { code: 'last-line', text: `The last line (${held.at + 1}) is not a whole row and was left out.` },
      ];
    }
    this.letGo();
    return [];
  }

  private letGo(): void {
    if (this.held === null) return;
    this.take(this.held.row, this.held.at);
    this.before = this.held.row;
  }
}

/**
 * Makes a table of rows of cells: names from the header, then the rows of data below it.
 *
 * @param rows all rows, blank ones too
 * @param what how the source is called in messages
 * @throws UnreadableInput when there is no header, no row below it, or a row that is wider than the header
 */
export function tableOf(rows: readonly (readonly Cell[])[], what: string): Table {
  const header = headerOf(rows, what);
  const kept: number[] = [];
  const data = new DataRows(header, what, (_, at) => kept.push(at));
  for (let i = header.dataFrom; i < rows.length; i++) data.add(rows[i]!, i);
  const notes = [...header.notes, ...data.end()];
  return {
    names: header.names,
    units: header.units,
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
