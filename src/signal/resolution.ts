/** The step in which the values of a signal are written. */
import { median } from './statistics';

/**
 * Median gap between neighbouring distinct values, in the signal's unit: the step of a quantised signal, and next
 * to nothing for a signal that takes any value. 0 for a constant one.
 *
 * Limit: a record that visits few of its levels (a handful of samples) reads too coarse.
 */
export function resolution(values: Float64Array): number {
  const sorted = Float64Array.from(values).sort();
  const rounding = 1e-9 * Math.max(Math.abs(sorted[0] ?? 0), Math.abs(sorted[sorted.length - 1] ?? 0));
  const gaps: number[] = [];
  for (let i = 1; i < sorted.length; i++) {
    const gap = sorted[i]! - sorted[i - 1]!;
    if (gap > rounding) gaps.push(gap);
  }
  return gaps.length > 0 ? median(Float64Array.from(gaps)) : 0;
}
