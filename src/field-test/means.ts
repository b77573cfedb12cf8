/** A value with its 90 % interval from repeated readings. */
import type { Estimate } from '../estimate/stiction-fit';
import { normalQuantile, studentTQuantile } from '../signal/distributions';

/** Two-sided level 0.9. */
const upper = 0.95;

/**
 * Mean of repeated readings. Its interval is Student's t over their scatter, and never narrower than what the error
 * `each` of a single reading leaves; two readings span at least their own distance, one its error.
 *
 * @param readings at least one
 * @param each standard error of one reading by itself
 */
export function meanOf(readings: readonly number[], each: number, unit: string, least = 0): Estimate {
  const n = readings.length;
  const value = readings.reduce((sum, one) => sum + one, 0) / n;
  const own = (normalQuantile(upper) * each) / Math.sqrt(n);
  let half = own;
  if (n === 2) half = Math.max(own, Math.abs(readings[0]! - readings[1]!) / 2);
  if (n > 2) {
    const squares = readings.reduce((sum, one) => sum + (one - value) ** 2, 0);
    const deviation = Math.sqrt(squares / (n - 1));
    half = Math.max(own, (studentTQuantile(upper, n - 1) * deviation) / Math.sqrt(n));
  }
  return {
    value: Math.max(least, value),
    low: Math.max(least, value - half),
    high: Math.max(least, value + half),
    unit,
  };
}
