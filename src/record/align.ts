/**
 * Brings signals with stamps of their own to one time grid by last value, and keeps the longest stretch that can be
 * used. Nothing is interpolated: a straight line between two samples would be a movement that nobody measured.
 */
import { UnreadableInput } from '../errors';
import { median } from '../signal/statistics';
import { type Grid, isRegular, layGrid, longestFill, usualStep } from './grid';
import type { LoggingFacts, Note } from './loop-record';
import type { Signal, Signals } from './signals';

export interface Aligned {
  /** ms since 1970 of the first sample. */
  readonly start: number;
  /** s */
  readonly samplePeriod: number;
  readonly pv: Float64Array;
  readonly op: Float64Array;
  readonly sp: Float64Array | null;
  readonly travel: Float64Array | null;
  readonly logging: LoggingFacts;
  readonly notes: readonly Note[];
}

/** A value older than this many sample periods counts as carried forward: a quarter more than stamps off beat have. */
const carried = 1.25;

/**
 * @param rows rows of the export
 * @param what how the source is called in messages
 * @throws UnreadableInput when there are not two samples in a row with PV and OP
 */
export function align(signals: Signals, rows: number, what: string): Aligned {
  if (signals.pv.ms.length < 2) {
    throw new UnreadableInput(
      `${what} has one row of PV. At least two are needed, and some hundreds to say anything.`,
    );
  }
  const grid = layGrid(signals.pv.ms);
  const n = grid.time.length;
  const pv = onGrid(grid, signals.pv, signals.pv.ms);
  const op = onGrid(grid, signals.op, signals.pv.ms);
  const sp = signals.sp && backFilled(onGrid(grid, signals.sp, signals.pv.ms).values);
  const travel = signals.travel && backFilled(onGrid(grid, signals.travel, signals.pv.ms).values);
  const mode = signals.mode && backFilled(onGrid(grid, signals.mode, signals.pv.ms).values);
  const everAutomatic = mode === null || mode.some((automatic) => automatic === 1);

  const bad = new Uint8Array(n);
  const manual = new Uint8Array(n);
  const filled = new Uint8Array(n);
  const stale = signals.op.ms === signals.pv.ms ? Infinity : longestAge(signals.op, grid.period);
  for (let i = 0; i < n; i++) {
    bad[i] = pv.bad[i]! | op.bad[i]!;
    manual[i] = mode !== null && mode[i] === 0 ? 1 : 0;
    filled[i] = bad[i]! || !grid.own[i] || op.age[i]! > carried * grid.period ? 1 : 0;
  }
  const spoilt = inLongRuns(bad);
  const usable = Uint8Array.from(bad, (_, i) => {
    const known = !Number.isNaN(pv.values[i]!) && !Number.isNaN(op.values[i]!) && op.age[i]! <= stale;
    return known && !spoilt[i] && (manual[i] === 0 || !everAutomatic) ? 1 : 0;
  });
  const { from, to } = longestStretch(usable, grid.afterGap);
  if (to - from < 2) {
    throw new UnreadableInput(
      `${what} has no two samples in a row with both PV and OP. Export both over the same time.`,
    );
  }

  const logging: LoggingFacts = {
    rows,
    duplicates: signals.duplicates,
    gaps: grid.gaps,
    longestGap: grid.longestGap,
    manualShare: shareOf(manual),
    badShare: shareOf(bad),
    filledShare: shareOf(filled.subarray(from, to)),
    skew: skewOf(signals),
    modeLogged: signals.mode !== null,
    keptShare: (to - from) / n,
  };
  const seconds = (sample: number): number => grid.time[sample]!;
  return {
    start: grid.origin + 1000 * seconds(from),
    samplePeriod: grid.period,
    pv: pv.values.slice(from, to),
    op: op.values.slice(from, to),
    sp: sp?.slice(from, to) ?? null,
    travel: travel?.slice(from, to) ?? null,
    logging,
    notes: [
      ...(grid.irregular
        ? [
            {
              code: 'irregular-stamps',
              text: `The stamps of PV come at no regular step; a grid of their median step, ${grid.period} s, was laid over them and the last value taken.`,
            },
          ]
        : []),
      ...gapNotes(signals, grid),
      ...(to - from < n
        ? [
            {
              code: 'kept-stretch',
              text: `The longest stretch in automatic, without a long gap or bad values, was kept: from ${hours(seconds(from))} to ${hours(seconds(to - 1))} after the start, ${percent((to - from) / n)} of the export.`,
            },
          ]
        : []),
      ...(everAutomatic
        ? []
        : [{ code: 'never-automatic', text: 'The controller is in manual throughout the export.' }]),
    ],
  };
}

interface OnGrid {
  /** Last good value; NaN before the first. */
  readonly values: Float64Array;
  /** 1 where the last value is bad or missing, so that an older one stands for it. */
  readonly bad: Uint8Array;
  /** Age of the last stamp, s; Infinity before the first. */
  readonly age: Float64Array;
}

/** @param pvMs the stamps over which the grid was laid */
function onGrid(grid: Grid, signal: Signal, pvMs: Float64Array): OnGrid {
  const n = grid.time.length;
  const values = new Float64Array(n);
  const bad = new Uint8Array(n);
  const age = new Float64Array(n);
  const rows = signal.ms.length;
  const together = signal.ms === pvMs;
  let row = -1;
  let last = Number.NaN;
  for (let i = 0; i < n; i++) {
    const now = grid.origin + 1000 * grid.time[i]!;
    // Half a millisecond of grace for stamps that are rounded differently.
    while (row + 1 < rows && (together ? row < grid.row[i]! : signal.ms[row + 1]! <= now + 0.5)) {
      row++;
      if (!Number.isNaN(signal.values[row]!)) last = signal.values[row]!;
    }
    values[i] = last;
    bad[i] = row >= 0 && Number.isNaN(signal.values[row]!) ? 1 : 0;
    age[i] = row >= 0 ? Math.max(0, (now - signal.ms[row]!) / 1000) : Infinity;
  }
  return { values, bad, age };
}

/** Values before the first are taken to be the first: set points and modes are often stored only when they change. */
function backFilled(values: Float64Array): Float64Array {
  const first = values.findIndex((value) => !Number.isNaN(value));
  return values.fill(values[first] ?? Number.NaN, 0, Math.max(0, first));
}

/** An OP that is stored only when it moves may be as old as it likes; one stored at a regular step may not. */
function longestAge(op: Signal, period: number): number {
  if (op.ms.length < 3) return Infinity;
  const step = usualStep(op.ms);
  return isRegular(op.ms, step) ? (longestFill + 1) * Math.max(period, step) : Infinity;
}

/** Marks runs of marks that are too long to be filled. */
function inLongRuns(marks: Uint8Array): Uint8Array {
  const long = new Uint8Array(marks.length);
  for (let i = 0; i < marks.length; ) {
    let end = i;
    while (end < marks.length && marks[end] === 1) end++;
    if (end - i > longestFill) long.fill(1, i, end);
    i = Math.max(end, i + 1);
  }
  return long;
}

/** The longest run of usable samples without a gap in it, the first of equal ones; `to` is left out. */
function longestStretch(usable: Uint8Array, afterGap: Uint8Array): { from: number; to: number } {
  let best = { from: 0, to: 0 };
  let from = 0;
  for (let i = 0; i <= usable.length; i++) {
    const ends = i === usable.length || usable[i] === 0 || afterGap[i] === 1;
    if (!ends) continue;
    if (i - from > best.to - best.from) best = { from, to: i };
    from = usable[i] === 0 ? i + 1 : i;
  }
  return best;
}

/** Median distance between a stamp of PV and the nearest one of OP, s. */
function skewOf({ pv, op }: Signals): number {
  if (pv.ms === op.ms) return 0;
  let near = 0;
  const distances = pv.ms.map((time) => {
    while (near + 1 < op.ms.length && Math.abs(op.ms[near + 1]! - time) <= Math.abs(op.ms[near]! - time))
      near++;
    return Math.abs(op.ms[near]! - time) / 1000;
  });
  return median(distances);
}

function gapNotes({ unplaced }: Signals, grid: Grid): Note[] {
  if (grid.gaps === 0 || grid.irregular) return [];
  const filled = grid.own.reduce((sum, own) => sum + 1 - own, 0);
  const hourGone = unplaced && Math.abs(grid.longestGap - 3600 - grid.period) <= 2 * grid.period;
  const dst =
    ' The longest is one hour, as at the beginning of daylight saving: state the zone of the stamps if that is so.';
  const text = `${grid.gaps} gap${grid.gaps > 1 ? 's' : ''} between rows, the longest ${grid.longestGap} s. Up to ${longestFill} missing samples were filled with the last value (${filled} in all), longer gaps split the record.`;
  return [{ code: 'gaps', text: text + (hourGone ? dst : '') }];
}

function shareOf(marks: Uint8Array): number {
  return marks.reduce((sum, mark) => sum + mark, 0) / marks.length;
}

function hours(seconds: number): string {
  const whole = Math.round(seconds);
  const two = (value: number): string => String(value).padStart(2, '0');
  return `${Math.floor(whole / 3600)}:${two(Math.floor(whole / 60) % 60)}:${two(whole % 60)} h`;
}

function percent(share: number): string {
  return `${(100 * share).toPrecision(3)} %`;
}
