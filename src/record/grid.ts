/** The common time grid: evenly spaced samples, each with the row of PV that it takes, and the gaps between them. */
import { mean, median } from '../signal/statistics';

/** A step this many times the usual one is a gap. */
const gapSteps = 1.5;
/**
 * Missing samples that are filled with the last value; a longer gap splits the record. Own choice: half a cycle at the
 * 20 samples a cycle that are asked for; one spoilt half cycle among twenty hardly moves S, and the filled share is
 * limited on its own.
 */
export const longestFill = 10;
/** Share of steps outside 0.5 to 1.5 times the usual one from which stamps count as irregular (own choice). */
const irregular = 0.1;

export interface Grid {
  /** Seconds between samples. */
  readonly period: number;
  /** Time of each sample, s since `origin`. */
  readonly time: Float64Array;
  /** Index into the stamps of the last one at or before the sample. */
  readonly row: Int32Array;
  /** 1 where a stamp belongs to the sample, 0 where the last one is carried forward. */
  readonly own: Uint8Array;
  /** 1 where a long gap lies before the sample. */
  readonly afterGap: Uint8Array;
  readonly gaps: number;
  /** s */
  readonly longestGap: number;
  /** Stamps come at no regular step: the grid was laid over them. */
  readonly irregular: boolean;
  /** ms since 1970 */
  readonly origin: number;
}

/** The usual step of stamps, s: the mean of their steps without the extremes, or the median when that is as close. */
export function usualStep(ms: Float64Array): number {
  const steps = stepsOf(ms).sort();
  const cut = Math.floor(steps.length / 20);
  const usual = mean(steps.subarray(cut, steps.length - cut));
  const middle = median(steps);
  // Stamps that jitter have a mean; stamps of a clean clock have a round median, and a few gaps do not move it.
  return Math.round((Math.abs(usual - middle) <= 0.001 * middle ? middle : usual) * 1e6) / 1e6;
}

function stepsOf(ms: Float64Array): Float64Array {
  const steps = new Float64Array(ms.length - 1);
  for (let i = 0; i < steps.length; i++) steps[i] = (ms[i + 1]! - ms[i]!) / 1000;
  return steps;
}

/** Whether at most a tenth of the steps lie outside 0.5 to 1.5 times the usual one. */
export function isRegular(ms: Float64Array, period: number): boolean {
  let outside = 0;
  for (let i = 1; i < ms.length; i++) {
    const steps = (ms[i]! - ms[i - 1]!) / 1000 / period;
    if (steps < 0.5 || steps > gapSteps) outside++;
  }
  return outside <= irregular * (ms.length - 1);
}

/**
 * Lays the grid over stamps. Regular stamps are their own grid, sample by sample, with missing samples put in; over
 * irregular ones a grid at the median step is laid.
 *
 * @param ms time since 1970 in ms, increasing, two stamps at least
 */
export function layGrid(ms: Float64Array): Grid {
  const usual = usualStep(ms);
  const regular = isRegular(ms, usual);
  const steps = stepsOf(ms);
  const period = regular ? usual : Math.max(median(steps), 0.001);
  let gaps = 0;
  let longestGap = 0;
  for (const step of steps) {
    if (step <= gapSteps * period) continue;
    gaps++;
    longestGap = Math.max(longestGap, step);
  }
  const laid = regular ? overRegular(steps, period) : overIrregular(steps, period);
  return { period, ...laid, gaps, longestGap, irregular: !regular, origin: ms[0]! };
}

type Laid = Pick<Grid, 'time' | 'row' | 'own' | 'afterGap'>;

function overRegular(steps: Float64Array, period: number): Laid {
  const samples = new Samples();
  samples.add(0, 0, true, false);
  let now = 0;
  for (let i = 0; i < steps.length; i++) {
    const step = steps[i]!;
    // A stamp that is only late itself is made up for by the next step: nothing is missing then.
    const next = steps[i + 1] ?? period;
    const missing = Math.min(Math.round(step / period) - 1, Math.round((step + next) / period) - 2);
    const fill = missing <= longestFill ? missing : 0;
    for (let k = 1; k <= fill; k++) samples.add(now + (k * step) / (fill + 1), i, false, false);
    now += step;
    samples.add(now, i + 1, true, missing > longestFill);
  }
  return samples.done();
}

function overIrregular(steps: Float64Array, period: number): Laid {
  const samples = new Samples();
  let row = 0;
  let stamp = 0;
  let sample = 0;
  let gap = false;
  let fresh = true;
  for (;;) {
    const now = sample * period;
    while (row < steps.length && stamp + steps[row]! <= now + 1e-9) {
      stamp += steps[row]!;
      row++;
      fresh = true;
    }
    samples.add(now, row, fresh, gap);
    fresh = false;
    if (row >= steps.length) return samples.done();
    sample++;
    gap = stamp + steps[row]! - now > (longestFill + 1) * period;
    if (gap) sample = Math.ceil((stamp + steps[row]!) / period - 1e-9);
  }
}

/** Collects a grid sample by sample. */
class Samples {
  private readonly time: number[] = [];
  private readonly row: number[] = [];
  private readonly own: number[] = [];
  private readonly afterGap: number[] = [];

  add(time: number, row: number, own: boolean, afterGap: boolean): void {
    this.time.push(time);
    this.row.push(row);
    this.own.push(own ? 1 : 0);
    this.afterGap.push(afterGap ? 1 : 0);
  }

  done(): Laid {
    return {
      time: new Float64Array(this.time),
      row: new Int32Array(this.row),
      own: new Uint8Array(this.own),
      afterGap: new Uint8Array(this.afterGap),
    };
  }
}
