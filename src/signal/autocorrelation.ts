/** Correlation of a signal with itself and with another one, over lags, by the fast Fourier transform. */
import { WrongUse } from '../errors';
import { forwardTransform, inverseTransform, nextPowerOfTwo } from './fourier';
import { removeMean } from './trend';

/**
 * Autocorrelation coefficients for the lags 0 to `maxLag`: r(k) = sum x(i) x(i + k) / sum x(i)^2 with the
 * mean taken off (the biased form, which fades towards long lags). Length `maxLag` + 1, 1 at lag 0; all zero
 * for a constant signal.
 *
 * @param maxLag samples, less than the length
 * @throws WrongUse when the lag does not fit the length
 */
export function autocorrelation(values: Float64Array, maxLag: number): Float64Array {
  return crossCorrelation(values, values, maxLag).slice(maxLag);
}

/**
 * Cross-correlation coefficients r(k) = sum a(i) b(i + k) / sqrt(sum a^2 sum b^2), means taken off, for the
 * lags k = -`maxLag` to `maxLag`: the value at index `maxLag` is lag 0, and a peak at positive lags means
 * that b follows a. Length 2 `maxLag` + 1; all zero when either signal is constant.
 *
 * @param maxLag samples, less than the length
 * @throws WrongUse when lengths differ or the lag does not fit them
 */
export function crossCorrelation(a: Float64Array, b: Float64Array, maxLag: number): Float64Array {
  const n = a.length;
  if (b.length !== n) {
    throw new WrongUse(
      `A cross-correlation needs two signals of one length. Received ${n} and ${b.length} samples.`,
    );
  }
  if (!Number.isInteger(maxLag) || maxLag < 0 || maxLag >= n) {
    throw new WrongUse(
      `The longest lag is a whole number from 0 to ${n - 1} for ${n} samples. Received ${maxLag}.`,
    );
  }
  const size = nextPowerOfTwo(n + maxLag);
  const first = removeMean(a);
  const second = a === b ? first : removeMean(b);
  const norm = Math.sqrt(sumOfSquares(first) * sumOfSquares(second));
  const out = new Float64Array(2 * maxLag + 1);
  if (isConstant(a) || isConstant(b) || norm === 0) return out;
  const one = forwardTransform(padded(first, size));
  const two = a === b ? one : forwardTransform(padded(second, size));
  const re = one.re.map((real, k) => real * two.re[k]! + one.im[k]! * two.im[k]!);
  const im = one.re.map((real, k) => real * two.im[k]! - one.im[k]! * two.re[k]!);
  const sums = inverseTransform({ re, im }, size);
  for (let lag = -maxLag; lag <= maxLag; lag++) {
    out[lag + maxLag] = sums[(lag + size) % size]! / norm;
  }
  return out;
}

function padded(values: Float64Array, size: number): Float64Array {
  const out = new Float64Array(size);
  out.set(values);
  return out;
}

function sumOfSquares(values: Float64Array): number {
  let sum = 0;
  for (const value of values) sum += value * value;
  return sum;
}

function isConstant(values: Float64Array): boolean {
  return values.every((value) => value === values[0]);
}
