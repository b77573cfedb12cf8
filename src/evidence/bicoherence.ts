/**
 * Nonlinearity of the loop from the bicoherence of its control error: a non-Gaussianity and a nonlinearity
 * index.
 */
import { type Bicoherence, squaredBicoherence } from '../signal/bispectrum';
import { blockMeans } from '../signal/block-means';
import { chiSquareQuantile } from '../signal/distributions';
import { quantile } from '../signal/statistics';
import { threeDigits } from '../signal/three-digits';
import { needsPvCycle } from './applies';
import type { Indicator } from './indicator';

const segment = 128;
/** Fewest samples, fifteen segments that overlap by one half (own choice). */
const fewestSamples = 1024;
/** Longer periods are thinned to this many samples a cycle, so that a segment holds several (own choice). */
const longestPeriod = 40;

/**
 * The window couples neighbouring pairs and overlapping segments a little. For simulated Gaussian noise the
 * mean scatters as that of this many times fewer pairs would, and stands higher by this factor (own choice;
 * else false alarms are frequent).
 */
const dependence = 2.7;
const overlap = 1.025;

export interface NonlinearityIndexes {
  /** NGI: mean squared bicoherence less its 95 % limit for a Gaussian signal. */
  readonly nonGaussianity: number;
  /** NLI: how far the largest value stands above the mean and two standard deviations of the middle ones. */
  readonly nonlinearity: number;
}

export function nonlinearityIndexes({ segments, squared }: Bicoherence): NonlinearityIndexes {
  const pairs = squared.length;
  const average = (values: Float64Array): number => values.reduce((sum, v) => sum + v, 0) / values.length;
  // Each value times 2 segments is chi-square with two degrees of freedom, and their sum has as many as it
  // has
  // independent pairs.
  const independent = pairs / dependence;
  const limit = (overlap * chiSquareQuantile(0.95, 2 * independent)) / (2 * segments * independent);
  const low = quantile(squared, 0.1);
  const high = quantile(squared, 0.9);
  const middle = squared.filter((value) => value >= low && value <= high);
  const centre = average(middle);
  const spread = Math.sqrt(average(middle.map((value) => (value - centre) ** 2)));
  const largest = squared.reduce((most, value) => Math.max(most, value), 0);
  return {
    nonGaussianity: average(squared) - limit,
    nonlinearity: Math.abs(largest - (centre + 2 * spread)),
  };
}

export const bicoherence: Indicator = {
  name: 'bicoherence',
  threshold: 'NGI above 0.001 and NLI above 0.01: nonlinear, counted as stiction; else not (value: NGI)',
  source:
    'Choudhury, Shah, Thornhill 2004, Automatica 40:1719-1728; thresholds: value from memory. False alarms on short or unsteady records',
  skips(facts) {
    const left = Math.floor(facts.error.length / thinning(facts.period));
    return (
      needsPvCycle(facts) ??
      (left >= fewestSamples
        ? null
        : `The record has ${left} samples at some ${Math.min(longestPeriod, Math.round(facts.period))} a cycle; at least ${fewestSamples} are needed, better 4096.`)
    );
  },
  evaluate({ error, period }) {
    const values = blockMeans(error, thinning(period));
    const found = squaredBicoherence(values, segment);
    const { nonGaussianity, nonlinearity } = nonlinearityIndexes(found);
    const nonlinear = nonGaussianity > 0.001 && nonlinearity > 0.01;
    return {
      value: nonGaussianity,
      says: nonlinear ? 'stiction' : 'not',
      why: `Over ${found.segments} segments of the error, NGI is ${threeDigits(nonGaussianity)} and NLI ${threeDigits(nonlinearity)}: ${nonlinear ? 'nonlinear' : nonGaussianity > 0.001 ? 'not Gaussian but linear' : 'Gaussian and linear'}.`,
    };
  },
};

function thinning(period: number): number {
  return Math.max(1, Math.round(period / longestPeriod));
}
