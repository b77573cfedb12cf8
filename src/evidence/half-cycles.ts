/** Cuts a cycling signal at its zero crossings, for the indicators that look at single half cycles. */

import { standardDeviation } from '../signal/statistics';
import { slowTrend } from '../signal/trend';

export interface HalfCycle {
  /** Zero crossings at either end, fractional samples. */
  readonly from: number;
  readonly to: number;
  /** 1 above zero, -1 below. */
  readonly sign: 1 | -1;
}

/**
 * The signal must go this share of its standard deviation beyond zero for a crossing to count (own choice).
 */
const beyond = 0.3;
/** Half cycles shorter or longer than these shares of half a period are left out (own choice). */
const shortest = 0.4;
const longest = 2.5;

/** Fewer half cycles are no basis for a mean (own choice). */
const fewest = 6;

/** The reason why these half cycles are too few for an indicator, or null. */
export function tooFewHalves(halves: readonly HalfCycle[]): string | null {
  return halves.length >= fewest
    ? null
    : `There are ${halves.length} clear half cycles; at least ${fewest} are needed.`;
}

/**
 * Half cycles between neighbouring zero crossings. The signal is averaged over a twelfth of the period first,
 * and a crossing counts only when the signal then goes well beyond zero, so that noise makes none.
 *
 * @param values samples, slow trend removed
 * @param period samples
 */
export function halfCycles(values: Float64Array, period: number): HalfCycle[] {
  const smooth = slowTrend(values, Math.max(1, Math.floor(period / 12)));
  const limit = beyond * standardDeviation(smooth);
  const crossings: { at: number; sign: 1 | -1 }[] = [];
  let side = 0;
  let last = 0;
  for (let i = 1; i < smooth.length; i++) {
    const before = smooth[i - 1]!;
    const after = smooth[i]!;
    if (before > 0 !== after > 0) last = i - 1 + before / (before - after);
    const now = after > limit ? 1 : after < -limit ? -1 : side;
    if (now !== side && side !== 0) crossings.push({ at: last, sign: now as 1 | -1 });
    side = now;
  }
  return crossings
    .slice(0, -1)
    .map(({ at, sign }, i) => ({ from: at, to: crossings[i + 1]!.at, sign }))
    .filter(({ from, to }) => to - from >= (shortest * period) / 2 && to - from <= (longest * period) / 2);
}
