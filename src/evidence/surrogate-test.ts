/**
 * Surrogate test: a nonlinear cycle foretells itself better than signals with the same spectrum and random
 * phases do. In a plant-wide oscillation it is strongest near the source.
 */
import type { SingleCycle } from '../oscillation/cycle';
import { seededRandom } from '../signal/random';
import { mean, standardDeviation } from '../signal/statistics';
import { randomPhases, selfPredictionError, surrogate } from '../signal/surrogate';
import { threeDigits } from '../signal/three-digits';
import { slowTrend } from '../signal/trend';
import { firstReason, needsPvCycle, needsShape } from './applies';
import type { Indicator } from './indicator';

/** Twelve cycles at least, and 7 to 25 samples in each (Thornhill 2005, value from memory). */
const fewestCycles = 12;
const samplesACycle = 10;
/** Most cycles looked at: time grows with their square (own choice). */
const mostCycles = 36;
const surrogates = 30;
const neighbours = 8;

/**
 * (mean over the surrogates - signal) / (3 standard deviations over the surrogates) of the errors with which
 * each foretells itself; null when all surrogates do so equally well.
 *
 * @param values samples of whole cycles, `cycle` samples in each on average: where the ends do not meet,
 *   surrogates of a plain sine come out less regular than the sine
 */
function surrogateIndex(values: Float64Array, cycle: number, seed: number): number | null {
  const random = seededRandom(seed);
  const errors = new Float64Array(surrogates).map(() =>
    selfPredictionError(surrogate(values, randomPhases(values.length, random)), cycle, neighbours),
  );
  const spread = standardDeviation(errors);
  return spread > 0 ? (mean(errors) - selfPredictionError(values, cycle, neighbours)) / (3 * spread) : null;
}

/**
 * The cycles in `single` as one stretch of `samplesACycle` samples a cycle, by straight lines between local
 * means. Its end is moved by up to a quarter of a cycle to where the stretch holds just that many turns of
 * its fundamental.
 */
function wholeCycles(
  values: Float64Array,
  samplePeriod: number,
  single: readonly SingleCycle[],
): Float64Array {
  const from = single[0]!.from / samplePeriod;
  const to = single.at(-1)!.to / samplePeriod;
  const count = single.length * samplesACycle;
  const smooth = slowTrend(values, Math.max(1, Math.floor((to - from) / count)));
  const read = (end: number): Float64Array =>
    new Float64Array(count).map((_, i) => {
      const at = from + (i * (end - from)) / count;
      const below = Math.floor(at);
      const above = Math.min(below + 1, smooth.length - 1);
      return smooth[below]! + (at - below) * (smooth[above]! - smooth[below]!);
    });
  let best = { power: -1, stretch: read(to) };
  for (let move = -0.25; move <= 0.25; move += 0.01) {
    const end = to + (move * (to - from)) / single.length;
    if (end > values.length - 1) break;
    const stretch = read(end);
    let re = 0;
    let im = 0;
    for (let i = 0; i < count; i++) {
      re += stretch[i]! * Math.cos((2 * Math.PI * i) / samplesACycle);
      im += stretch[i]! * Math.sin((2 * Math.PI * i) / samplesACycle);
    }
    const power = re * re + im * im;
    if (power > best.power) best = { power, stretch };
  }
  return best.stretch;
}

export const surrogateIndicator: Indicator = {
  name: 'surrogate test',
  threshold: 'above 1: nonlinear, counted as stiction; else not',
  source: 'Thornhill 2005, IEEE Trans. Control Syst. Technol. 13:434-443; rule: value from memory',
  skips: (facts) =>
    firstReason(
      needsPvCycle(facts),
      needsShape(facts),
      facts.pvCycle.single.length >= fewestCycles
        ? null
        : `PV has ${facts.pvCycle.single.length} whole cycles; at least ${fewestCycles} are needed.`,
    ),
  evaluate({ error, pvCycle, record, seed }) {
    const single = pvCycle.single.slice(0, mostCycles);
    const value = surrogateIndex(wholeCycles(error, record.samplePeriod, single), samplesACycle, seed);
    if (value === null) return 'The surrogates all foretell themselves equally well.';
    return {
      value,
      says: value > 1 ? 'stiction' : 'not',
      why: `Over ${single.length} cycles the error foretells itself ${value >= 0 ? 'better' : 'worse'} than ${surrogates} linear surrogates do, by ${threeDigits(Math.abs(value))} times three standard deviations.`,
    };
  },
};
