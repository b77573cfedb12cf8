/** Turns a table into series: one a column in a wide export, one a tag in a long one (tag, time, value). */
import { UnreadableInput } from '../errors';
import type { Note } from './loop-record';
import { type ParsedName, roleOf } from './names';
import { type Cell, listed, type Table } from './table';

/** Cells of some rows, with the numbers of these rows as their reader sees them. */
export interface Cells {
  readonly name: string;
  readonly cells: () => readonly Cell[];
  readonly rowNumber: (row: number) => number;
}

/** One logged signal, not yet read as numbers. */
export interface Series extends Cells {
  readonly parsed: ParsedName;
  /** Unit from brackets in the name or from a line of units; '' unknown. */
  readonly unit: string;
  /** Stamps of its rows. Series with the same stamps share one object. */
  readonly stamps: Cells;
  /** Quality of its rows; null when none is logged. */
  readonly quality: Cells | null;
}

export interface SeriesSet {
  readonly series: readonly Series[];
  readonly notes: readonly Note[];
}

/**
 * @param time name of the time column as stated by the user
 * @param what how the source is called in messages
 * @throws UnreadableInput when there is no time column
 */
export function seriesOf(table: Table, time: string | undefined, what: string): SeriesSet {
  const parsed = table.names.map(roleOf);
  const stated = time === undefined ? -1 : findName(table.names, time);
  if (time !== undefined && stated < 0) {
    throw new UnreadableInput(
      `${what} has no column "${time}" for the time. Columns found: ${listed(table.names)}.`,
    );
  }
  const timeColumns = stated >= 0 ? [stated] : columnsWith(parsed, 'time');
  if (timeColumns.length === 0) {
    throw new UnreadableInput(
      `${what} has no column for the time. Columns found: ${listed(table.names)}. Name it with --time (option "time").`,
    );
  }
  const bare = (role: ParsedName['role']): number =>
    parsed.findIndex((name) => name.role === role && name.loop === '' && name.of === null);
  const tag = bare('tag');
  const value = bare('value');
  if (tag >= 0 && value >= 0) return long(table, tag, value, timeColumns[0]!, bare('quality'));
  return wide(table, parsed, timeColumns);
}

/** Position of the name that a user states: as written, else in any case. -1 when there is none. */
export function findName(names: readonly string[], wanted: string): number {
  const exact = names.indexOf(wanted.trim());
  if (exact >= 0) return exact;
  return names.findIndex((name) => name.toLowerCase() === wanted.trim().toLowerCase());
}

function columnsWith(parsed: readonly ParsedName[], role: ParsedName['role']): number[] {
  return parsed.flatMap((name, column) => (name.role === role ? [column] : []));
}

/** A column of the table, or what stands in some of its rows. */
function cellsOf(table: Table, column: number, rows: readonly number[] | null): Cells {
  return {
    name: table.names[column]!,
    cells: () => {
      const all = table.cells(column);
      return rows === null ? all : rows.map((row) => all[row]!);
    },
    rowNumber: (row) => table.rowNumber(rows === null ? row : rows[row]!),
  };
}

function long(table: Table, tag: number, value: number, time: number, quality: number): SeriesSet {
  const rowsOf = new Map<string, number[]>();
  for (const [row, cell] of table.cells(tag).entries()) {
    const name = String(cell).trim();
    const rows = rowsOf.get(name);
    if (rows === undefined) rowsOf.set(name, [row]);
    else rows.push(row);
  }
  const series = [...rowsOf].map(([name, rows]): Series => {
    const parsed = roleOf(name);
    return {
      ...cellsOf(table, value, rows),
      name,
      parsed,
      unit: parsed.unit,
      stamps: cellsOf(table, time, rows),
      quality: quality < 0 ? null : cellsOf(table, quality, rows),
    };
  });
  const text = `Read as a long export: tags in "${table.names[tag]}", values in "${table.names[value]}".`;
  return { series, notes: [{ code: 'long-export', text }] };
}

interface Stamps extends Cells {
  /** Rows of the table that have a stamp; null for all. */
  readonly rows: readonly number[] | null;
}

function wide(table: Table, parsed: readonly ParsedName[], timeColumns: readonly number[]): SeriesSet {
  const joined = joinedStamps(table, timeColumns);
  const stamps = new Map(
    timeColumns.map((column): [number, Stamps] => [
      column,
      joined ?? stampsIn(table, column, timeColumns.length > 1),
    ]),
  );
  const qualityColumns = columnsWith(parsed, 'quality');
  const bareQuality = qualityColumns.filter((column) => parsed[column]!.of === null);
  const series: Series[] = [];
  for (const [column, name] of table.names.entries()) {
    const { role, loop, unit } = parsed[column]!;
    if (timeColumns.includes(column) || role === 'quality' || role === 'time') continue;
    // A time or quality column belongs to the signal that it names; a time column without a name to those right of it.
    const isOwn = (other: number): boolean => parsed[other]!.of === role && parsed[other]!.loop === loop;
    const time =
      timeColumns.find(isOwn) ??
      timeColumns.filter((other) => other < column && parsed[other]!.of === null).pop() ??
      timeColumns[0]!;
    const quality =
      qualityColumns.find(isOwn) ??
      (bareQuality.length === 1 ? bareQuality[0] : bareQuality.find((other) => other === column + 1));
    const own = stamps.get(time)!;
    series.push({
      ...cellsOf(table, column, own.rows),
      name,
      parsed: parsed[column]!,
      unit: unit || table.units[column]!,
      stamps: own,
      quality: quality === undefined ? null : cellsOf(table, quality, own.rows),
    });
  }
  const text = `Date and clock time were joined from the columns "${joined?.name}".`;
  return { series, notes: joined === null ? [] : [{ code: 'date-and-time', text }] };
}

/** Stamps of one time column. Of several, each may be shorter than the table. */
function stampsIn(table: Table, column: number, several: boolean): Stamps {
  const all = table.cells(column);
  const rows = several ? all.flatMap((cell, row) => (String(cell).trim() === '' ? [] : [row])) : null;
  return { ...cellsOf(table, column, rows), rows };
}

/** A column of dates with a column of clock times beside it, as one; null when it is not so. */
function joinedStamps(table: Table, timeColumns: readonly number[]): Stamps | null {
  const [date, time] = timeColumns;
  if (timeColumns.length !== 2 || date === undefined || time !== date + 1) return null;
  const dates = table.cells(date);
  const times = table.cells(time);
  const isDate = !String(dates[0]).includes(':') && /\D/.test(String(dates[0]).trim());
  if (!isDate || !/^\s*\d{1,2}:\d\d/.test(String(times[0]))) return null;
  return {
    name: `${table.names[date]}" and "${table.names[time]}`,
    cells: () => dates.map((cell, row) => `${String(cell).trim()} ${String(times[row]).trim()}`),
    rowNumber: (row) => table.rowNumber(row),
    rows: null,
  };
}
