/**
 * The response to one step in the terms of ANSI/ISA-75.25.01: dead time, T63 and T86 (63.2 % and 86.5 % of the lasting
 * change, dead time included; shares from memory, they are 1 - 1/e and 1 - 1/e^2), and overshoot.
 */
import type { Estimate } from '../estimate/stiction-fit';
import { normalQuantile } from '../signal/distributions';

export interface StepResponse {
  readonly deadTime: Estimate | null;
  readonly T63: Estimate | null;
  readonly T86: Estimate | null;
  readonly overshoot: Estimate | null;
  /** Why something was not read; ''. */
  readonly note: string;
}

export interface ResponseWindow {
  /** What was watched, and its level before the step and at the end of the dwell. */
  readonly signal: Float64Array;
  readonly before: number;
  readonly after: number;
  /** First sample with the new command, and the first after the dwell. */
  readonly at: number;
  readonly until: number;
  /** Standard deviation of the noise on the signal. */
  readonly noise: number;
  /** Whether the level still moved at the end of the dwell. */
  readonly settled: boolean;
  /** s */
  readonly samplePeriod: number;
}

const responseShares = { T63: 1 - Math.exp(-1), T86: 1 - Math.exp(-2) };

/** A response that is smaller than this many times the noise gives no times (own choice). */
const leastOverNoise = 8;
/** The first movement is where the response leaves its start by this share of the change, or by the noise. */
const firstMovement = { share: 0.02, overNoise: 4.5 };

/**
 * Times count from the first sample that shows the new command. The step itself may have come up to a sample earlier:
 * the intervals reach that far up.
 */
export function stepResponse(window: ResponseWindow): StepResponse {
  const { signal, before, after, at, until, noise, settled, samplePeriod } = window;
  const change = after - before;
  const none = { deadTime: null, T63: null, T86: null, overshoot: null };
  if (Math.abs(change) < leastOverNoise * noise || change === 0) {
    return { ...none, note: 'The move is too small against the noise for times.' };
  }
  if (!settled) return { ...none, note: 'Not settled when the next step came, so that no times are read.' };
  const relative = noise / Math.abs(change);
  const share = (k: number): number => (k < at ? 0 : (signal[k]! - before) / change);
  const spread = normalQuantile(0.95) * relative;

  const crossing = (level: number): { time: number; error: number; sample: number } | null => {
    for (let k = at; k < until; k++) {
      const stays = k + 1 >= until || share(k + 1) >= level - 2 * spread;
      if (share(k) < level || !stays) continue;
      const last = k > at ? share(k - 1) : 0;
      const rise = share(k) - last;
      // A response that is there with the first sample has no sample before it to go from.
      const part = k === at ? 0 : (level - last) / rise;
      const time = k === at ? 0 : (k - 1 + part - at) * samplePeriod;
      return { time, error: Math.min(1, spread / rise) * samplePeriod, sample: k };
    }
    return null;
  };
  const timeAt = (level: number): Estimate | null => {
    const found = crossing(level);
    return (
      found && {
        value: found.time,
        low: Math.max(0, found.time - found.error),
        high: found.time + found.error + samplePeriod,
        unit: 's',
      }
    );
  };
  const start = crossing(Math.max(firstMovement.share, firstMovement.overNoise * relative));
  const deadTime: Estimate | null = start && {
    value: start.time,
    low: Math.max(0, (start.sample - 1 - at) * samplePeriod),
    high: (start.sample + 1 - at) * samplePeriod,
    unit: 's',
  };
  return {
    deadTime,
    T63: timeAt(responseShares.T63),
    T86: timeAt(responseShares.T86),
    overshoot: overshootOf(window, share, relative),
    note: '',
  };
}

/** Highest mean of three samples past the lasting change, %; 0 where noise explains it. */
function overshootOf(
  { at, until }: ResponseWindow,
  share: (k: number) => number,
  relative: number,
): Estimate | null {
  if (until - at < 3) return null;
  let highest = 0;
  for (let k = at + 1; k + 1 < until; k++) {
    highest = Math.max(highest, (share(k - 1) + share(k) + share(k + 1)) / 3 - 1);
  }
  const error = (100 * 3 * relative) / Math.sqrt(3);
  const value = 100 * highest <= error ? 0 : 100 * highest;
  return { value, low: Math.max(0, value - error), high: value + error, unit: '% of the change' };
}
