/** Plain statistics of one row of numbers. */
import { WrongUse } from '../errors';

/** Throws {@link WrongUse} when fewer than `needed` values were given to the statistic `what`. */
function need(what: string, values: Float64Array, needed: number): void {
  if (values.length < needed) {
    throw new WrongUse(
      `The ${what} needs at least ${needed} value${needed > 1 ? 's' : ''}. Received ${values.length}.`,
    );
  }
}

/** Arithmetic mean. @throws WrongUse without values */
export function mean(values: Float64Array): number {
  need('mean', values, 1);
  let sum = 0;
  for (const value of values) sum += value;
  return sum / values.length;
}

/** Variance with divisor n - 1, by the two-pass formula. @throws WrongUse with fewer than two values */
export function variance(values: Float64Array): number {
  need('variance', values, 2);
  const centre = mean(values);
  let squares = 0;
  let rest = 0;
  for (const value of values) {
    squares += (value - centre) ** 2;
    rest += value - centre;
  }
  return (squares - (rest * rest) / values.length) / (values.length - 1);
}

/** Square root of {@link variance}. @throws WrongUse with fewer than two values */
export function standardDeviation(values: Float64Array): number {
  return Math.sqrt(Math.max(0, variance(values)));
}

/** Middle value, the mean of the middle two for an even count. @throws WrongUse without values */
export function median(values: Float64Array): number {
  return quantile(values, 0.5);
}

/**
 * Value below which the share `share` of the values lies, with straight lines between the sorted values
 * (definition 7 of Hyndman and Fan 1996, The American Statistician 50:361-365; value from memory).
 *
 * @param share 0 (smallest) to 1 (largest)
 * @throws WrongUse without values or with a share outside 0..1
 */
export function quantile(values: Float64Array, share: number): number {
  need('quantile', values, 1);
  if (!(share >= 0 && share <= 1)) {
    throw new WrongUse(`The share of a quantile lies between 0 and 1. Received ${share}.`);
  }
  const sorted = Float64Array.from(values).sort();
  const at = share * (sorted.length - 1);
  const below = Math.floor(at);
  const above = Math.min(below + 1, sorted.length - 1);
  return sorted[below]! + (at - below) * (sorted[above]! - sorted[below]!);
}

/** Largest less smallest value; -Infinity without values. */
export function rangeOf(values: Float64Array): number {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const value of values) {
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  return high - low;
}

/**
 * Standard deviation of the fast noise on a signal, in the signal's unit: the median size of the second
 * differences over what it would be for white noise of standard deviation 1 (0.6745 times the square root of
 * 6). Jumps and slow movement hardly touch it.
 *
 * Limits: noise that is not white reads low. A signal of fewer than about ten samples a cycle reads high.
 * Where more than half of the second differences are zero (coarse quantisation, held or interpolated values)
 * it is 0.
 *
 * @throws WrongUse with fewer than three values
 */
export function noiseLevel(values: Float64Array): number {
  need('noise level', values, 3);
  const size = new Float64Array(values.length - 2);
  for (let i = 0; i < size.length; i++) {
    size[i] = Math.abs(values[i]! - 2 * values[i + 1]! + values[i + 2]!);
  }
  return median(size) / (0.6744897501960817 * Math.sqrt(6));
}
