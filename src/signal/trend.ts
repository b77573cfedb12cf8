/** Takes slow parts out of a signal. The input stays as it is; the result has its length and unit. */
import { WrongUse } from '../errors';
import { mean } from './statistics';

/** The signal less its mean. @throws WrongUse without values */
export function removeMean(values: Float64Array): Float64Array {
  const centre = mean(values);
  return values.map((value) => value - centre);
}

/** The signal less the straight line fitted to it by least squares. @throws WrongUse without values */
export function removeLine(values: Float64Array): Float64Array {
  const trend = slowTrend(values, values.length);
  return values.map((value, i) => value - trend[i]!);
}

/**
 * The signal less its slow trend, see {@link slowTrend}. With a window of one or more whole cycles the cycle
 * itself stays.
 *
 * @param window samples
 * @throws WrongUse when the window is not a whole number of at least 1
 */
export function removeSlowTrend(values: Float64Array, window: number): Float64Array {
  const trend = slowTrend(values, window);
  return values.map((value, i) => value - trend[i]!);
}

/**
 * Slow trend of a signal: at each sample, the straight line fitted to the `window` samples around it. Inside
 * the record that is the centred moving average; within half a window of the ends the line of the first or
 * last whole window is used, so that a straight drift is followed exactly to the ends.
 *
 * @param window samples; an even window is taken one longer, one longer than the record is the whole record
 * @throws WrongUse without values, or when the window is not a whole number of at least 1
 */
export function slowTrend(values: Float64Array, window: number): Float64Array {
  const n = values.length;
  if (n === 0) throw new WrongUse('A trend needs at least one value. Received none.');
  if (!Number.isInteger(window) || window < 1) {
    throw new WrongUse(`A trend window is a whole number of samples, at least 1. Received ${window}.`);
  }
  if (window >= n) return line(values, 0, n, 0, n);
  const half = Math.min(Math.floor(window / 2), Math.floor((n - 1) / 2));
  const width = 2 * half + 1;
  const trend = new Float64Array(n);
  // The first value is taken off so that sums of large, nearly equal numbers keep their digits.
  const base = values[0]!;
  let sum = 0;
  for (let i = 0; i < width; i++) sum += values[i]! - base;
  for (let i = half; i < n - half; i++) {
    trend[i] = base + sum / width;
    if (i + half + 1 < n) sum += values[i + half + 1]! - values[i - half]!;
  }
  trend.set(line(values, 0, width, 0, half), 0);
  trend.set(line(values, n - width, n, n - half, n), n - half);
  return trend;
}

/**
 * Least-squares line through the samples `from`..`to`, read at the samples `first`..`last` (ends left out).
 */
function line(values: Float64Array, from: number, to: number, first: number, last: number): Float64Array {
  const n = to - from;
  const middle = (from + to - 1) / 2;
  const centre = mean(values.subarray(from, to));
  let up = 0;
  for (let i = from; i < to; i++) up += (i - middle) * (values[i]! - centre);
  const slope = n > 1 ? (12 * up) / (n * (n * n - 1)) : 0;
  return new Float64Array(last - first).map((_, i) => centre + slope * (first + i - middle));
}
