/** S and J along the calendar: a long record, window by window, and whether S is getting worse, since when. */
import { DateTime } from 'luxon';
import { duration } from '../assessment/make-answer-card';
import { refuseUnknownOptions, WrongUse } from '../errors';
import { fitStiction } from '../estimate/fit-stiction';
import type { Estimate } from '../estimate/stiction-fit';
import type { LoopRecord } from '../record/loop-record';
import { type Change, fewestWindows, findChange, leastChance } from './stiction-change';

export interface TrackOptions {
  /**
   * Length of a window, s. Default: a twelfth of the record. A window needs what any record needs: 20 cycles, and 20
   * samples in each.
   */
  readonly window?: number;
  /** Dead time between travel and PV, s, when known. Default null: fitted in each window. */
  readonly deadTime?: number | null;
  /** Process gain, PV units per % of OP (integrating: per % and second), when known. Default null: fitted in each window. */
  readonly processGain?: number | null;
  /** Seed of everything random. Default 1. */
  readonly seed?: number;
  /** Called before each window and once at the end, with the share done, 0..1. */
  readonly onProgress?: (share: number) => void;
}

export interface StictionWindow {
  /** s since the start of the record. */
  readonly from: number;
  readonly to: number;
  readonly S: Estimate | null;
  /** Null without S, and where it is not resolved. */
  readonly J: Estimate | null;
  /** Why there is no S; empty when there is one. */
  readonly refused: readonly string[];
}

export interface StictionTrack {
  readonly loop: string;
  /** As {@link LoopRecord}'s. */
  readonly start: string;
  /** Length of a window, s: a whole number of samples. */
  readonly window: number;
  /** In the order of time, next to each other; what is left at the end of the record, less than a window, is not used. */
  readonly windows: readonly StictionWindow[];
  readonly change: Change;
  /** What the change says and rests on, in sentences. */
  readonly reasons: readonly string[];
}

/** More windows than this are taken for a slip of the pen (own choice). */
const mostWindows = 2000;
/** Standard normal at 0.95: half of a 90 % interval in standard deviations. */
const halfWidth = 1.645;

/**
 * Fits the valve in each window on its own ({@link fitStiction}; about a second for 3 600 samples) and looks for a
 * change of S over the windows (`stiction-change.ts`). Windows without numbers are kept with their reasons.
 *
 * The interval of S holds errors that all windows share (the process and disturbance model), so that the scatter
 * between windows is mostly smaller. That only makes the weights cautious: whether there is a change is judged by the
 * scatter. A change of load or tuning can move S a little without any change of the valve.
 *
 * @throws WrongUse for an unknown option, or a window that is not above 0, longer than the record, or far too short
 */
export function trackStiction(record: LoopRecord, options: TrackOptions = {}): StictionTrack {
  refuseUnknownOptions('trackStiction', options, ['window', 'deadTime', 'processGain', 'seed', 'onProgress']);
  const { deadTime = null, processGain = null, seed = 1, onProgress = () => {} } = options;
  const { samplePeriod } = record;
  const seconds = record.op.length * samplePeriod;
  const asked = options.window ?? seconds / 12;
  const samples = Math.floor(asked / samplePeriod + 1e-9);
  const count = Math.floor(record.op.length / samples);
  if (!(asked > 0) || samples < 2 || count < 1 || count > mostWindows) {
    throw new WrongUse(
      `A window is a length in s, of two samples and more, at most the ${duration(seconds)} of the record and at least 1/${mostWindows} of it. Received ${asked}.`,
    );
  }
  const windows = Array.from({ length: count }, (_, i): StictionWindow => {
    onProgress(i / count);
    const part = stretch(record, i * samples, (i + 1) * samples);
    const { fit, refused } = fitStiction(part, { deadTime, processGain });
    return {
      from: i * samples * samplePeriod,
      to: (i + 1) * samples * samplePeriod,
      S: fit?.S ?? null,
      J: fit?.J ?? null,
      refused: fit === null ? whyNot(refused) : [],
    };
  });
  onProgress(1);
  const values = windows.flatMap(({ from, to, S }) =>
    S === null
      ? []
      : [{ from, to, value: S.value, spread: Math.max(S.high - S.low, 1e-6 * S.value) / (2 * halfWidth) }],
  );
  const change = findChange(values, seed);
  return {
    loop: record.loop,
    start: record.start,
    window: samples * samplePeriod,
    windows,
    change,
    reasons: reasonsOf(change, record.start, values.length, windows),
  };
}

function whyNot(refused: readonly string[]): readonly string[] {
  return refused.length > 0 ? refused : ['OP does not cycle and hardly moves in this window.'];
}

/** The facts of logging stay those of the whole record. */
function stretch(record: LoopRecord, from: number, to: number): LoopRecord {
  const cut = (values: Float64Array): Float64Array => values.slice(from, to);
  return {
    ...record,
    pv: cut(record.pv),
    sp: record.sp && cut(record.sp),
    op: cut(record.op),
    travel: record.travel && cut(record.travel),
  };
}

function reasonsOf(
  change: Change,
  start: string,
  withS: number,
  windows: readonly StictionWindow[],
): string[] {
  const of = `${withS} of ${windows.length} windows of ${duration(windows[0]!.to)} give S.`;
  const { says, since, before, after, chance } = change;
  if (says === 'cannot tell') {
    return [of, `Fewer than ${fewestWindows} are too few to tell whether S changes.`];
  }
  const clear = `Shuffled over the windows, the same values show as clear a change in ${percent(chance!)} of cases`;
  if (since === null) {
    return [
      of,
      `No change of S is shown: S is about ${short(before!)} %. ${clear}; ${percent(leastChance)} or less would show one.`,
    ];
  }
  const at = (seconds: number): string => clockTime(start, seconds);
  const moment = `${at(since.value)} (90 % interval ${at(since.low)} to ${at(since.high)})`;
  return [
    of,
    change.shape === 'step'
      ? `S went ${says === 'rising' ? 'up' : 'down'} from about ${short(before!)} % to ${short(after!)} % at ${moment}.`
      : `S is ${says} since ${moment}: from about ${short(before!)} % to ${short(after!)} % at the end.`,
    `${clear}.`,
  ];
}

/** As the clock on the wall showed it where the record was made. */
function clockTime(start: string, seconds: number): string {
  return DateTime.fromISO(start, { setZone: true, zone: 'utc' })
    .plus({ seconds })
    .toFormat('yyyy-MM-dd HH:mm');
}

const short = (value: number): string => String(Number(value.toPrecision(2)));
const percent = (share: number): string => `${Number((100 * share).toPrecision(2))} %`;
