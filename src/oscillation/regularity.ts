/**
 * Regularity of a cycle from the zero crossings of its autocorrelation (Thornhill, Huang, Zhang 2003, J.
 * Process Control 13:91-100; details from memory): the signal is band-filtered around one spectral peak, the
 * lags of up to eleven zero crossings of its autocorrelation are taken, and r = mean(Tp) / (3 std(Tp)) over
 * the periods Tp (twice the distance of neighbouring crossings). r > 1 is regular.
 */
import { forwardTransform, inverseTransform, nextPowerOfTwo } from '../signal/fourier';

export interface Regularity {
  /** Samples. */
  readonly period: number;
  /** r of the paper, at most {@link largestRegularity}. */
  readonly value: number;
  /** Autocorrelation one cycle later, corrected for the shrinking overlap: 1 = the next cycle is the same. */
  readonly persistence: number;
  /** Autocorrelation of the filtered signal for lags 0, 1, ... samples. */
  readonly autocorrelation: Float64Array;
}

/** Crossings that are equal to rounding would give any number: more than this is not told apart. */
export const largestRegularity = 1000;

const mostCrossings = 11;
/**
 * Four intervals between crossings are the fewest of which a standard deviation is worth anything (own
 * choice).
 */
const fewestCrossings = 5;
/**
 * Full weight within this factor of the peak, none beyond its square. Narrow filters make noise look regular.
 */
const passFactor = 1.35;

/**
 * @param values samples, slow trend removed
 * @param frequency of the peak, cycles a sample
 * @returns null when there are fewer than five crossings
 */
export function regularityAt(values: Float64Array, frequency: number): Regularity | null {
  const n = values.length;
  const size = nextPowerOfTwo(2 * n);
  const padded = new Float64Array(size);
  padded.set(values);
  const { re, im } = forwardTransform(padded);
  const passed = re.map((real, k) => {
    if (k === 0) return 0;
    const away = Math.abs(Math.log(k / (frequency * size))) / Math.log(passFactor);
    const weight = away <= 1 ? 1 : away >= 2 ? 0 : 0.5 + 0.5 * Math.cos(Math.PI * (away - 1));
    return weight * (real * real + im[k]! * im[k]!);
  });
  const sums = inverseTransform({ re: passed, im: new Float64Array(passed.length) }, size);
  if (!(sums[0]! > 0)) return null;
  const lags = Math.min(n - 1, Math.ceil(8 / frequency));
  const autocorrelation = sums.slice(0, lags + 1).map((value) => value / sums[0]!);

  // Beyond four fifths of the record too few samples overlap.
  const crossings = zeroCrossings(autocorrelation, Math.floor(0.8 * n));
  if (crossings.length < fewestCrossings) return null;
  const periods = crossings.slice(1).map((lag, i) => 2 * (lag - crossings[i]!));
  const period = periods.reduce((sum, value) => sum + value, 0) / periods.length;
  const squares = periods.reduce((sum, value) => sum + (value - period) ** 2, 0);
  const deviation = Math.sqrt(squares / (periods.length - 1));
  const value = deviation * 3 * largestRegularity > period ? period / (3 * deviation) : largestRegularity;

  let persistence = -1;
  for (let lag = Math.round(0.7 * period); lag <= Math.min(lags, Math.round(1.3 * period)); lag++) {
    persistence = Math.max(persistence, (autocorrelation[lag]! * n) / (n - lag));
  }
  return { period, value, persistence: Math.min(1, persistence), autocorrelation };
}

/** Fractional lags of the first zero crossings, by straight lines between lags. */
function zeroCrossings(curve: Float64Array, longest: number): number[] {
  const found: number[] = [];
  for (let lag = 1; lag < curve.length && lag <= longest && found.length < mostCrossings; lag++) {
    const before = curve[lag - 1]!;
    const after = curve[lag]!;
    if (before > 0 !== after > 0) found.push(lag - 1 + before / (before - after));
  }
  return found;
}
