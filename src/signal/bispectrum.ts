/**
 * Squared bicoherence: how strongly pairs of frequencies drive their sum, which linear systems with Gaussian
 * input never do.
 */
import { WrongUse } from '../errors';
import { forwardTransform } from './fourier';
import { removeMean } from './trend';

export interface Bicoherence {
  /** Segments averaged. */
  readonly segments: number;
  /** Frequencies of each pair, cycles a sample: `first` >= `second` > 0, their sum at most 1/2. */
  readonly first: Float64Array;
  readonly second: Float64Array;
  /** Squared bicoherence of each pair, 0..1. For Gaussian linear signals about 1 / `segments`. */
  readonly squared: Float64Array;
}

/**
 * Squared bicoherence over segments of `segment` samples that overlap by one half, each with its mean taken
 * off and a Hann window: |E[X1 X2 X3*]|^2 / (E[|X1 X2|^2] E[|X3|^2]), X3 at the sum of the two frequencies
 * (Kim and Powers 1979, IEEE Trans. Plasma Sci. 7:120-131).
 *
 * Limits: a strong sine leaks into neighbouring frequencies, and when its period divides half a segment it
 * does so in step in all segments, which reads as coupling. Needs some tens of segments.
 *
 * @param segment samples, even, at least 8 and not longer than the signal
 * @throws WrongUse when the segment does not fit
 */
export function squaredBicoherence(values: Float64Array, segment: number): Bicoherence {
  if (!Number.isInteger(segment) || segment % 2 !== 0 || segment < 8 || segment > values.length) {
    throw new WrongUse(
      `A segment is an even number of samples from 8 to the ${values.length} of the signal. Received ${segment}.`,
    );
  }
  const half = segment / 2;
  const segments = Math.floor(values.length / half) - 1;
  const window = new Float64Array(segment).map((_, i) => 0.5 - 0.5 * Math.cos((2 * Math.PI * i) / segment));
  const spectra = Array.from({ length: segments }, (_, s) =>
    forwardTransform(
      removeMean(values.subarray(s * half, s * half + segment)).map((value, i) => value * window[i]!),
    ),
  );
  const first: number[] = [];
  const second: number[] = [];
  const squared: number[] = [];
  for (let k = 1; k <= half; k++) {
    for (let l = 1; l <= k && k + l <= half; l++) {
      let tripleRe = 0;
      let tripleIm = 0;
      let pairPower = 0;
      let sumPower = 0;
      for (const { re, im } of spectra) {
        const pairRe = re[k]! * re[l]! - im[k]! * im[l]!;
        const pairIm = re[k]! * im[l]! + im[k]! * re[l]!;
        const sumRe = re[k + l]!;
        const sumIm = im[k + l]!;
        tripleRe += pairRe * sumRe + pairIm * sumIm;
        tripleIm += pairIm * sumRe - pairRe * sumIm;
        pairPower += pairRe * pairRe + pairIm * pairIm;
        sumPower += sumRe * sumRe + sumIm * sumIm;
      }
      const powers = pairPower * sumPower;
      first.push(k / segment);
      second.push(l / segment);
      squared.push(powers > 0 ? (tripleRe * tripleRe + tripleIm * tripleIm) / powers : 0);
    }
  }
  return {
    segments,
    first: Float64Array.from(first),
    second: Float64Array.from(second),
    squared: Float64Array.from(squared),
  };
}
