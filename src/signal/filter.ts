/** Filters for evenly sampled signals. The result has the input's length and unit. */
import { Matrix, pseudoInverse } from 'ml-matrix';
import { WrongUse } from '../errors';
import { forwardTransform, inverseTransform } from './fourier';
import { checkSamplePeriod } from './sample-period';

/**
 * Zero-phase band-pass in the frequency domain: the signal is continued by its mirror image (so that its two
 * ends meet), transformed, and each frequency weighted by the square of a second-order Butterworth magnitude
 * at either edge, half power at the edges. It delays nothing; steps ring a little before and after.
 *
 * @param samplePeriod s
 * @param low 1/s; 0 keeps the slow side and the mean
 * @param high 1/s; Infinity keeps the fast side
 * @throws WrongUse without values, with a sample period that is not above 0, or with edges out of order
 */
export function bandPass(
  values: Float64Array,
  samplePeriod: number,
  low: number,
  high: number,
): Float64Array {
  checkSamplePeriod(samplePeriod);
  if (!(low >= 0 && high > low)) {
    throw new WrongUse(`A band runs from a low to a higher frequency. Received ${low} to ${high} 1/s.`);
  }
  const n = values.length;
  const both = new Float64Array(2 * n);
  both.set(values);
  both.set(Float64Array.from(values).reverse(), n);
  const { re, im } = forwardTransform(both);
  for (let k = 0; k < re.length; k++) {
    const frequency = k / (2 * n * samplePeriod);
    const slowSide = low === 0 ? 1 : frequency === 0 ? 0 : 1 / (1 + (low / frequency) ** 4);
    const weight = slowSide / (1 + (frequency / high) ** 4);
    re[k]! *= weight;
    im[k]! *= weight;
  }
  return inverseTransform({ re, im }, 2 * n).slice(0, n);
}

/**
 * First-order lag, exact for an input that is held between samples: y(k + 1) = a y(k) + (1 - a) u(k) with
 * a = exp(-samplePeriod / tau). It starts at rest, y(0) = u(0); an input step shows from the next sample on.
 *
 * @param samplePeriod s
 * @param tau time constant, s
 * @throws WrongUse when the sample period or the time constant is not above 0
 */
export function firstOrderLag(values: Float64Array, samplePeriod: number, tau: number): Float64Array {
  checkSamplePeriod(samplePeriod);
  if (!(tau > 0)) throw new WrongUse(`A time constant is a number of seconds above 0. Received ${tau}.`);
  const a = Math.exp(-samplePeriod / tau);
  const out = new Float64Array(values.length);
  let y = values[0] ?? 0;
  for (let i = 0; i < values.length; i++) {
    out[i] = y;
    y = a * y + (1 - a) * values[i]!;
  }
  return out;
}

/**
 * Smoothing, or a smoothed derivative per sample, by a polynomial fitted to each window of samples and read
 * in its middle (Savitzky and Golay 1964, Analytical Chemistry 36:1627-1639). Within half a window of the
 * ends the polynomial of the first or last whole window is read.
 *
 * @param window samples, odd, above the degree and not longer than the signal
 * @param degree of the polynomial
 * @param derivative 0 smooths, 1 and 2 give that derivative, per sample (or per sample squared)
 * @throws WrongUse when window, degree and derivative do not fit
 */
export function savitzkyGolay(
  values: Float64Array,
  window: number,
  degree: number,
  derivative: 0 | 1 | 2 = 0,
): Float64Array {
  const n = values.length;
  if (
    !Number.isInteger(window) ||
    window % 2 !== 1 ||
    window > n ||
    !Number.isInteger(degree) ||
    degree < derivative ||
    degree >= window
  ) {
    throw new WrongUse(
      `A polynomial smoother takes an odd window, above the degree and at most the ${n} samples, and a degree not below the derivative. Received window ${window}, degree ${degree}, derivative ${derivative}.`,
    );
  }
  const half = (window - 1) / 2;
  // Positions are scaled to -1..1 so that high powers keep their digits.
  const scale = Math.max(1, half);
  const powers = Matrix.zeros(window, degree + 1);
  for (let i = 0; i < window; i++) {
    for (let p = 0; p <= degree; p++) powers.set(i, p, ((i - half) / scale) ** p);
  }
  const toCoefficients = pseudoInverse(powers);
  /** Weights on the samples of a window that read the polynomial `offset` samples from its middle. */
  const weightsAt = (offset: number): Float64Array => {
    const weights = new Float64Array(window);
    for (let p = derivative; p <= degree; p++) {
      const factor = derivative === 0 ? 1 : derivative === 1 ? p : p * (p - 1);
      const read = (factor * (offset / scale) ** (p - derivative)) / scale ** derivative;
      for (let i = 0; i < window; i++) weights[i]! += read * toCoefficients.get(p, i);
    }
    return weights;
  };
  const middle = weightsAt(0);
  return new Float64Array(n).map((_, k) => {
    const start = Math.min(Math.max(k - half, 0), n - window);
    const offset = k - start - half;
    const weights = offset === 0 ? middle : weightsAt(offset);
    let sum = 0;
    for (let i = 0; i < window; i++) sum += weights[i]! * values[start + i]!;
    return sum;
  });
}
