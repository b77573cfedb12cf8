/** Turns a table into series: one a column in a wide export, one a tag in a long one (tag, time, value). */
import { UnreadableInput } from '../errors';
import type { Note } from './loop-record';
import { type ParsedName, roleOf } from './names';
import { type CellColumn, listed, type Table } from './table';

/** Cells of some rows, with the numbers of these rows as their reader sees them. */
export interface Cells {
  readonly name: string;
  readonly cells: () => CellColumn;
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
  const columns = longColumns(table.names);
  return columns === null ? wide(table, parsed, timeColumns) : long(table, columns, timeColumns[0]!);
}

/** Columns of a long export; quality is -1 where none is logged. */
export interface LongColumns {
  readonly tag: number;
  readonly value: number;
  readonly quality: number;
}

/** Where the names say that the export has one value a row: tag, time, value. null for a wide export. */
export function longColumns(names: readonly string[]): LongColumns | null {
  const parsed = names.map(roleOf);
  const bare = (role: ParsedName['role']): number =>
    parsed.findIndex((name) => name.role === role && name.loop === '' && name.of === null);
  const [tag, value] = [bare('tag'), bare('value')];
  return tag >= 0 && value >= 0 ? { tag, value, quality: bare('quality') } : null;
}

/** The note that goes with a long export. */
export function longNote(names: readonly string[], { tag, value }: LongColumns): Note {
  const text = `Read as a long export: tags in "${names[tag]}", values in "${names[value]}".`;
  return { code: 'long-export', text };
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

/** Some rows of a table; null for all. */
type Rows = () => readonly number[] | null;

/** A column of the table, or what stands in some of its rows. */
function cellsOf(table: Table, column: number, rowsOf: Rows): Cells {
  return {
    name: table.names[column]!,
    cells: () => {
      const all = table.cells(column);
      const rows = rowsOf();
      return rows === null ? all : { length: rows.length, at: (row) => all.at(rows[row]!) };
    },
    rowNumber: (row) => {
      const rows = rowsOf();
      return table.rowNumber(rows === null ? row : rows[row]!);
    },
  };
}

function long(table: Table, columns: LongColumns, time: number): SeriesSet {
  const { tag, value, quality } = columns;
  const rowsOf = new Map<string, number[]>();
  const tags = table.cells(tag);
  for (let row = 0; row < tags.length; row++) {
    const name = String(tags.at(row)).trim();
    const rows = rowsOf.get(name);
    if (rows === undefined) rowsOf.set(name, [row]);
    else rows.push(row);
  }
  const series = [...rowsOf].map(([name, own]): Series => {
    const parsed = roleOf(name);
    const rows: Rows = () => own;
    return {
      ...cellsOf(table, value, rows),
      name,
      parsed,
      unit: parsed.unit,
      stamps: cellsOf(table, time, rows),
      quality: quality < 0 ? null : cellsOf(table, quality, rows),
    };
  });
  return { series, notes: [longNote(table.names, columns)] };
}

interface Stamps extends Cells {
  /** Rows of the table that have a stamp. */
  readonly rows: Rows;
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
  let found: readonly number[] | null = null;
  const rows: Rows = () => {
    if (several) found ??= stampedRows(table.cells(column));
    return found;
  };
  return { ...cellsOf(table, column, rows), rows };
}

function stampedRows(cells: CellColumn): number[] {
  const rows: number[] = [];
  for (let row = 0; row < cells.length; row++) if (String(cells.at(row)).trim() !== '') rows.push(row);
  return rows;
}

/** A column of dates with a column of clock times beside it, as one; null when it is not so. */
function joinedStamps(table: Table, timeColumns: readonly number[]): Stamps | null {
  const [date, time] = timeColumns;
  if (timeColumns.length !== 2 || date === undefined || time !== date + 1) return null;
  const dates = table.cells(date);
  const times = table.cells(time);
  const [firstDate, firstTime] = [String(dates.at(0)), String(times.at(0))];
  const isDate = !firstDate.includes(':') && /\D/.test(firstDate.trim());
  if (!isDate || !/^\s*\d{1,2}:\d\d/.test(firstTime)) return null;
  return {
    name: `${table.names[date]}" and "${table.names[time]}`,
    cells: () => ({
      length: dates.length,
      at: (row) => `${String(dates.at(row)).trim()} ${String(times.at(row)).trim()}`,
    }),
    rowNumber: (row) => table.rowNumber(row),
    rows: () => null,
  };
}
