/** A value with its 90 % interval from repeated readings. */
import type { Estimate } from '../estimate/stiction-fit';
import { normalQuantile, studentTQuantile } from '../signal/distributions';
import { average } from './straight-line';

/** Two-sided level 0.9. */
const upper = 0.95;

export interface ReadingErrors {
  /** Standard error of one reading by itself, which averages out. */
  readonly each: number;
  /** Standard error that all readings share, as where strokes meet the sampling in step; it does not average out. */
  readonly shared?: number;
}

/**
 * Mean of repeated readings of something that cannot be below 0. Its interval is Student's t over their scatter, never
 * narrower than what the errors leave; two readings span at least their own distance.
 *
 * @param readings at least one
 */
export function meanOf(
  readings: readonly number[],
  { each, shared = 0 }: ReadingErrors,
  unit: string,
): Estimate {
  const n = readings.length;
  const value = average(readings);
  const z = normalQuantile(upper);
  const own = z * Math.hypot(each / Math.sqrt(n), shared);
  let half = own;
  if (n === 2) half = Math.max(own, Math.abs(readings[0]! - readings[1]!) / 2);
  if (n > 2) {
    const squares = readings.reduce((sum, one) => sum + (one - value) ** 2, 0);
    const deviation = Math.sqrt(squares / (n - 1));
    const scatter = (studentTQuantile(upper, n - 1) * deviation) / Math.sqrt(n);
    half = Math.max(own, Math.hypot(scatter, z * shared));
  }
  const atLeast0 = (one: number): number => Math.max(0, one);
  return { value: atLeast0(value), low: atLeast0(value - half), high: atLeast0(value + half), unit };
}
