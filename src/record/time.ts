/** Reads a column of time stamps: ISO 8601, numbers of seconds or milliseconds, or a stated format. */
import { UnreadableInput } from '../errors';
import type { Note } from './loop-record';
import type { Cell, CellColumn } from './table';
import { clockOf, type Stamp, type StampReader, stampReader } from './time-format';
import { type WallClock, wallClock } from './wall-clock';

export interface TimeOptions {
  /** Luxon's tokens, e.g. `dd.MM.yyyy HH:mm:ss`. */
  readonly timeFormat?: string;
  /** Zone of stamps that carry none: an IANA name, UTC, or a distance such as UTC+2. */
  readonly zone?: string;
}

export interface TimeColumn {
  /** Time since 1970 in ms, one a row; to the microsecond. */
  readonly ms: Float64Array;
  /** Whether stamps are clock time in no stated zone, so that a change of daylight saving may hide in them. */
  readonly unplaced: boolean;
  readonly notes: readonly Note[];
}

const iso =
  /^(\d{4})[-/](\d{1,2})[-/](\d{1,2})(?:[T ]+(\d{1,2}):(\d{2})(?::(\d{2})(?:[.,](\d{1,9}))?)?)?\s*(Z|UTC|[+-]\d{2}(?::?\d{2})?)?$/i;

/** Numbers are seconds or milliseconds since 1970 when that falls between 1990 and 2100. */
const epoch = { from: 631_152_000, to: 4_102_444_800 };
/** Day numbers of a spreadsheet for the same years. */
const dayNumbers = { from: 32_874, to: 73_051 };

/**
 * @param cells one stamp a row; rows of data only
 * @param column name of the column, for messages
 * @param rowNumber number of a row as the reader sees it
 * @throws UnreadableInput for a stamp that cannot be read, that is missing, or that the zone's clock skips
 * @throws WrongUse for a zone or format that is not known
 */
export function readTimes(
  cells: CellColumn,
  column: string,
  rowNumber: (row: number) => number,
  options: TimeOptions,
): TimeColumn {
  const clock = wallClock(options.zone ?? 'UTC');
  const first = cells.at(0)!;
  if (options.timeFormat === undefined && isNumber(first)) return readCounts(cells, column, rowNumber);
  const format = options.timeFormat;
  const read = format === undefined ? isoStamp : stampReader(format);
  return readStamps(cells, column, rowNumber, read, clock, options);
}

function isNumber(cell: Cell): boolean {
  return typeof cell === 'number' || /^\s*[+-]?\d+([.,]\d+)?(e[+-]?\d+)?\s*$/i.test(cell);
}

function readStamps(
  cells: CellColumn,
  column: string,
  rowNumber: (row: number) => number,
  read: StampReader,
  clock: WallClock,
  { timeFormat, zone }: TimeOptions,
): TimeColumn {
  const ms = new Float64Array(cells.length);
  let unplaced = false;
  for (let i = 0; i < cells.length; i++) {
    const text = String(cells.at(i)).trim();
    const stamp = read(text);
    if (stamp === null) {
      throw new UnreadableInput(
        text === ''
          ? `Row ${rowNumber(i)} has no time stamp in the column "${column}".`
          : `Row ${rowNumber(i)} has the time stamp "${text.slice(0, 40)}" in the column "${column}", which ${timeFormat === undefined ? 'is neither ISO 8601 nor a number of seconds or milliseconds since 1970. State its format with --time-format (option "timeFormat"), e.g. dd.MM.yyyy HH:mm:ss, and its zone with --zone' : `does not fit the format ${timeFormat}`}.`,
      );
    }
    if (stamp.placed) {
      ms[i] = stamp.ms;
      continue;
    }
    unplaced = true;
    const time = clock.toEpoch(stamp.ms, i > 0 ? ms[i - 1]! : null);
    if (time === null) {
      throw new UnreadableInput(
        `Row ${rowNumber(i)} has the time stamp "${text}", which the clock of ${zone} skips as daylight saving begins. State the zone in which the stamps were written with --zone (option "zone"): UTC when the clock was not changed.`,
      );
    }
    ms[i] = time;
  }
  const unstated = unplaced && zone === undefined;
  const notes = unstated
    ? [
        {
          code: 'time-zone',
          text: 'The time stamps carry no zone and none was stated: they are read as UTC. This moves the clock times that are shown and nothing else.',
        },
      ]
    : [];
  return { ms, unplaced: unstated, notes };
}

/** ISO 8601 with blank or T, also with slashes in the date; digits beyond the millisecond are kept. */
function isoStamp(text: string): Stamp | null {
  const found = iso.exec(text);
  if (found === null) return null;
  const fraction = found[7] === undefined ? 0 : Number(`0.${found[7]}`) * 1000;
  const clock = clockOf(
    Number(found[1]),
    Number(found[2]),
    Number(found[3]),
    Number(found[4] ?? 0),
    Number(found[5] ?? 0),
    Number(found[6] ?? 0),
    0,
  );
  if (clock === null) return null;
  const ms = Math.round((clock + fraction) * 1000) / 1000;
  const zone = found[8];
  if (zone === undefined) return { ms, placed: false };
  const distance = /^([+-])(\d{2}):?(\d{2})?$/.exec(zone);
  if (distance === null) return { ms, placed: true };
  const minutes = Number(distance[2]) * 60 + Number(distance[3] ?? 0);
  return { ms: ms - (distance[1] === '-' ? -1 : 1) * minutes * 60_000, placed: true };
}

function readCounts(cells: CellColumn, column: string, rowNumber: (row: number) => number): TimeColumn {
  const counts = new Float64Array(cells.length);
  for (let i = 0; i < counts.length; i++) {
    const cell = cells.at(i)!;
    if (!isNumber(cell)) {
      throw new UnreadableInput(
        `Row ${rowNumber(i)} has "${String(cell).slice(0, 40)}" in the time column "${column}", where the rows above have numbers.`,
      );
    }
    counts[i] = Number(String(cell).trim().replace(',', '.'));
  }
  const start = counts[0]!;
  const among = ({ from, to }: { from: number; to: number }, value: number): boolean =>
    value >= from && value <= to;
  if (among(epoch, start) || among(epoch, start / 1000)) {
    const perUnit = among(epoch, start) ? 1000 : 1;
    const unit = perUnit === 1000 ? 'seconds' : 'milliseconds';
    return {
      ms: counts.map((value) => Math.round(value * perUnit * 1000) / 1000),
      unplaced: false,
      notes: [
        { code: 'time-epoch', text: `The time stamps are numbers, read as ${unit} since 1970-01-01 UTC.` },
      ],
    };
  }
  const last = counts[counts.length - 1]!;
  if (among(dayNumbers, start) && last - start < counts.length / 24) {
    throw new UnreadableInput(
      `The time column "${column}" has numbers such as ${start}, which look like day numbers of a spreadsheet. Format the column as date and time before exporting, or export as .xlsx.`,
    );
  }
  if (Math.abs(start) > epoch.from) {
    throw new UnreadableInput(
      `The time column "${column}" has numbers such as ${start}, which are neither seconds nor milliseconds since 1970. Export ISO 8601 stamps, or state the format with --time-format (option "timeFormat").`,
    );
  }
  return {
    ms: counts.map((value) => Math.round(value * 1e6) / 1000),
    unplaced: false,
    notes: [
      {
        code: 'time-count',
        text: 'The time column has plain numbers, read as seconds from a start that is not known: it is shown as 1970-01-01.',
      },
    ],
  };
}
