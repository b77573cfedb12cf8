/** Reads the chosen series as signals: stamps that move forward, numbers, bad samples told, mode as automatic or not. */
import { UnreadableInput } from '../errors';
import type { ChosenColumns } from './columns';
import type { Note } from './loop-record';
import { readModes } from './modes';
import { readNumbers } from './numbers';
import { isGoodQuality } from './quality';
import type { Cells, Series } from './series';
import type { CellColumn } from './table';
import { readTimes, type TimeOptions } from './time';

/** Values at their own stamps. Signals logged together share one `ms`. */
export interface Signal {
  /** Time since 1970, ms, always increasing. */
  readonly ms: Float64Array;
  /** NaN where the sample is bad or missing. As long as `ms`. */
  readonly values: Float64Array;
}

export interface Signals {
  readonly pv: Signal;
  readonly op: Signal;
  readonly sp: Signal | null;
  readonly travel: Signal | null;
  /** 1 where the controller is in automatic, 0 where not. */
  readonly mode: Signal | null;
  /** Rows with a stamp that was there before, over all series read. */
  readonly duplicates: number;
  /** Whether clock time without a zone was read. */
  readonly unplaced: boolean;
  readonly notes: readonly Note[];
}

/** More empty cells than this in a column are the way it was logged, not missing samples (own choice). */
const emptyByDesign = 0.3;

/** Reads series one by one; what they have in common (stamps, notes) is read and told once. */
export interface SignalReader {
  /** A set point is often stored only when it moves, and its quality is not asked for. */
  read(series: Series, isSetPoint?: boolean): Signal;
  /** null, with a note, where the modes are not understood. */
  readMode(series: Series): Signal | null;
  /** What reading so far came to. */
  done(): Pick<Signals, 'duplicates' | 'unplaced' | 'notes'>;
}

/**
 * @param what how the source is called in messages
 * @throws UnreadableInput from its methods, as {@link readSignals}
 */
export function createSignalReader(options: TimeOptions, what: string): SignalReader {
  const notes: Note[] = [];
  const seen = new Map<Cells, ReadStamps>();
  const stampsOf = ({ stamps }: Series): ReadStamps => {
    let known = seen.get(stamps);
    if (known === undefined) {
      const cells = stamps.cells();
      const column = readTimes(cells, stamps.name, stamps.rowNumber, options);
      known = { ...forward(column.ms, cells, stamps, column.unplaced), unplaced: column.unplaced };
      for (const note of column.notes) {
        if (!notes.some(({ code }) => code === note.code)) notes.push(note);
      }
      seen.set(stamps, known);
    }
    return known;
  };

  const read = (series: Series, isSetPoint = false): Signal => {
    const stamps = stampsOf(series);
    const column = readNumbers(series.cells(), series.name, series.rowNumber);
    const values = stamps.pick(column.values);
    const count = column.values.length;
    if (column.decimalComma) {
      notes.push({
        code: 'decimal-comma',
        text: `Numbers in "${series.name}" were read with a decimal comma.`,
      });
    }
    if (column.bad > 0) {
      notes.push({
        code: 'bad-samples',
        text: `"${series.name}" has ${column.bad} of ${count} samples without a value (${column.words.slice(0, 5).join(', ') || 'not finite'}).`,
      });
    }
    if (series.quality !== null && !isSetPoint) {
      const cells = series.quality.cells();
      const good = isGoodQuality(cells);
      if (good === null) {
        notes.push({
          code: 'quality-not-understood',
          text: `The quality column "${series.quality.name}" was left out: its values are not understood.`,
        });
      } else {
        const flags = stamps.pick(good);
        let dropped = 0;
        for (let i = 0; i < values.length; i++) {
          if (flags[i]! > 0) continue;
          values[i] = Number.NaN;
          dropped++;
        }
        if (dropped > 0) {
          notes.push({
            code: 'bad-quality',
            text: `${dropped} of ${values.length} samples of "${series.name}" have bad quality in "${series.quality.name}".`,
          });
        }
      }
    }
    if (column.empty + column.bad === count) {
      throw new UnreadableInput(`The column "${series.name}" of ${what} has no number in it.`);
    }
    // A set point is often stored only when it moves; other columns may each have their own rows.
    const ownRows = column.empty > 0 && (isSetPoint || column.empty > emptyByDesign * count);
    if (!ownRows) {
      if (column.empty > 0) {
        notes.push({
          code: 'empty-cells',
          text: `"${series.name}" has ${column.empty} empty cells in ${count} rows, counted as bad samples.`,
        });
      }
      return { ms: stamps.ms, values };
    }
    notes.push({
      code: 'own-rows',
      text: `"${series.name}" has values in ${count - column.empty} of ${count} rows, read as its own stamps.`,
    });
    const rows: number[] = [];
    const cells = series.cells();
    const isEmpty = stamps.pick(
      new Float64Array(count).map((_, row) => (String(cells.at(row)).trim() === '' ? 1 : 0)),
    );
    for (let i = 0; i < isEmpty.length; i++) if (isEmpty[i] === 0) rows.push(i);
    return {
      ms: Float64Array.from(rows, (i) => stamps.ms[i]!),
      values: Float64Array.from(rows, (i) => values[i]!),
    };
  };

  const done = (): Pick<Signals, 'duplicates' | 'unplaced' | 'notes'> => {
    const stamps = [...seen.values()];
    const duplicates = stamps.reduce((sum, one) => sum + one.duplicates, 0);
    const told: Note[] =
      duplicates === 0
        ? []
        : [
            {
              code: 'duplicates',
              text: `${duplicates} row${duplicates > 1 ? 's' : ''} whose time stamp was there before ${duplicates > 1 ? 'were' : 'was'} left out.`,
            },
          ];
    return { duplicates, unplaced: stamps.some(({ unplaced }) => unplaced), notes: [...notes, ...told] };
  };
  return { read, readMode: (series) => readMode(series, stampsOf(series), notes), done };
}

/**
 * @param what how the source is called in messages
 * @throws UnreadableInput for stamps and cells that cannot be read, for time that goes backwards, and for a column
 *   without any number
 */
export function readSignals(chosen: ChosenColumns, options: TimeOptions, what: string): Signals {
  const { read, readMode, done } = createSignalReader(options, what);
  const pv = read(chosen.pv);
  const op = read(chosen.op);
  const sp = chosen.sp && read(chosen.sp, true);
  const travel = chosen.travel && read(chosen.travel);
  const mode = chosen.mode && readMode(chosen.mode);
  return { pv, op, sp, travel, mode, ...done() };
}

function readMode(series: Series, stamps: ReadStamps, notes: Note[]): Signal | null {
  const modes = readModes(series.cells());
  notes.push({
    code: modes.automatic === null ? 'mode-not-understood' : 'mode',
    text: `"${series.name}": ${modes.text}`,
  });
  if (modes.automatic === null) return null;
  return { ms: stamps.ms, values: stamps.pick(modes.automatic) };
}

interface ReadStamps {
  readonly ms: Float64Array;
  /** Values of the rows that were kept. */
  readonly pick: (values: Float64Array) => Float64Array;
  readonly duplicates: number;
  readonly unplaced: boolean;
}

/**
 * Leaves out rows whose stamp repeats the one before, and a single row that repeats the one before that (a clock set
 * back by one sample). Anything else that goes backwards is refused: the order of the rows is then not known.
 */
function forward(
  ms: Float64Array,
  cells: CellColumn,
  stamps: Cells,
  unplaced: boolean,
): Omit<ReadStamps, 'unplaced'> {
  const kept: number[] = [0];
  for (let i = 1; i < ms.length; i++) {
    const last = kept[kept.length - 1]!;
    const time = ms[i]!;
    if (time > ms[last]!) {
      kept.push(i);
      continue;
    }
    const before = kept[kept.length - 2];
    const isRepeat =
      time === ms[last]! ||
      (before !== undefined && time === ms[before]! && (ms[i + 1] ?? Infinity) >= ms[last]!);
    if (isRepeat) continue;
    throw new UnreadableInput(backwards(ms, cells, stamps, i, last, unplaced));
  }
  const all = kept.length === ms.length;
  return {
    ms: all ? ms : Float64Array.from(kept, (i) => ms[i]!),
    pick: (values) => (all ? Float64Array.from(values) : Float64Array.from(kept, (i) => values[i]!)),
    duplicates: ms.length - kept.length,
  };
}

function backwards(
  ms: Float64Array,
  cells: CellColumn,
  stamps: Cells,
  i: number,
  last: number,
  unplaced: boolean,
): string {
  const start = `Time goes backwards in the column "${stamps.name}": row ${stamps.rowNumber(i)} is stamped ${cells.at(i)}, after ${cells.at(last)} in row ${stamps.rowNumber(last)}.`;
  const back = ms[last]! - ms[i]!;
  const step = ms[1]! - ms[0]!;
  if (unplaced && Math.abs(back + Math.abs(step) - 3_600_000) <= 2 * Math.abs(step)) {
    return `${start} That is one hour, as at the end of daylight saving: state the zone of the stamps with --zone (option "zone").`;
  }
  if (ms[ms.length - 1]! < ms[0]!) {
    return `${start} The rows seem to run from new to old: sort them by time and read again.`;
  }
  return `${start} Sort the rows by time, or export the loop again.`;
}
