/**
 * Surrogate test: a nonlinear cycle foretells itself better than signals with the same spectrum and random phases do.
 * In a plant-wide oscillation it is strongest near the source.
 */
import { blockMeans } from '../signal/block-means';
import { seededRandom } from '../signal/random';
import { mean, standardDeviation } from '../signal/statistics';
import { randomPhases, selfPredictionError, surrogate } from '../signal/surrogate';
import { firstReason, needsPvCycle, needsShape } from './applies';
import { figure, type Indicator } from './indicator';

/** Twelve cycles at least, and 7 to 25 samples in each (Thornhill 2005, value from memory). */
const fewestCycles = 12;
const samplesACycle = 10;
/** Longest stretch looked at: time grows with its square (own choice). */
const mostSamples = 480;
const surrogates = 30;
const neighbours = 8;

export interface SurrogateTest {
  /** (mean over the surrogates - signal) / (3 standard deviations over the surrogates), prediction errors. */
  readonly index: number;
  readonly cycles: number;
}

/**
 * @param values samples, slow trend removed
 * @param period samples
 */
export function surrogateTest(values: Float64Array, period: number, seed: number): SurrogateTest | null {
  const by = Math.max(1, Math.round(period / samplesACycle));
  const embedding = Math.round(period / by);
  const coarse = blockMeans(values, by);
  const stretch = withMatchedEnds(coarse.subarray(0, mostSamples), embedding);
  const random = seededRandom(seed);
  const errors = new Float64Array(surrogates).map(() =>
    selfPredictionError(surrogate(stretch, randomPhases(stretch.length, random)), embedding, neighbours),
  );
  const spread = standardDeviation(errors);
  const own = selfPredictionError(stretch, embedding, neighbours);
  const cycles = stretch.length / embedding;
  return spread > 0 ? { index: (mean(errors) - own) / (3 * spread), cycles } : null;
}

export const surrogateIndicator: Indicator = {
  name: 'surrogate test',
  threshold: 'above 1: nonlinear, counted as stiction; else not',
  source: 'Thornhill 2005, IEEE Trans. Control Syst. Technol. 13:434-443; rule: value from memory',
  skips: (facts) =>
    firstReason(
      needsPvCycle(facts),
      needsShape(facts),
      facts.pvCycle.cycles >= fewestCycles + 1
        ? null
        : `There are ${facts.pvCycle.cycles} cycles; at least ${fewestCycles + 1} are needed.`,
    ),
  evaluate({ error, pvCycle, record, seed }) {
    const test = surrogateTest(error, pvCycle.period! / record.samplePeriod, seed);
    if (test === null) return 'The surrogates all foretell themselves equally well.';
    const { index, cycles } = test;
    return {
      value: index,
      says: index > 1 ? 'stiction' : 'not',
      why: `Over ${Math.round(cycles)} cycles the error foretells itself ${index >= 0 ? 'better' : 'worse'} than ${surrogates} linear surrogates do, by ${figure(Math.abs(index))} times three standard deviations.`,
    };
  },
};

/** Cuts up to a cycle off either end so that value and slope match where the record would go on with its start. */
function withMatchedEnds(values: Float64Array, cycle: number): Float64Array {
  const n = values.length;
  let best = { from: 0, to: n, mismatch: Number.POSITIVE_INFINITY };
  const room = Math.max(1, Math.min(cycle, Math.floor(n / 4)));
  for (let from = 0; from < room; from++) {
    for (let to = n - room + 1; to <= n; to++) {
      const step = values[to - 1]! - values[from]!;
      const slope = values[to - 1]! - values[to - 2]! - (values[from + 1]! - values[from]!);
      const mismatch = step * step + slope * slope;
      if (mismatch < best.mismatch) best = { from, to, mismatch };
    }
  }
  // The last sample stands where the first comes again: leave it out.
  return values.slice(best.from, best.to - 1);
}
