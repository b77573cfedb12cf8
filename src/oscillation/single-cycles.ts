/** Cuts an oscillating signal into its single cycles. */
import { noiseLevel, standardDeviation } from '../signal/statistics';
import { slowTrend } from '../signal/trend';
import type { SingleCycle } from './cycle';

/** A new cycle starts no sooner than this share of the period after the last (own choice). */
const shortestCycle = 0.4;
/**
 * Below this share of the amplitude noise is left alone: smoothing would cut sharp turns by more (own
 * choice).
 */
const noticeableNoise = 0.03;

/**
 * Where cycles start, in fractional samples: the upward zero crossings of the signal averaged twice over half
 * a period. That leaves the fundamental, no second harmonic and little of the others, so that noise makes no
 * cycles and a wandering period is followed.
 *
 * @param values samples, slow trend removed
 * @param period of the cycle, samples
 */
export function cycleStarts(values: Float64Array, period: number): number[] {
  const half = Math.max(1, Math.floor(period / 2));
  const carrier = slowTrend(slowTrend(values, half), half);
  const starts: number[] = [];
  for (let i = 1; i < carrier.length; i++) {
    if (carrier[i - 1]! > 0 || carrier[i]! <= 0) continue;
    const at = i - 1 + carrier[i - 1]! / (carrier[i - 1]! - carrier[i]!);
    if (starts.length === 0 || at - starts.at(-1)! >= shortestCycle * period) starts.push(at);
  }
  return starts;
}

/**
 * The cycles between neighbouring starts. The amplitude is taken from the signal itself; where its noise is
 * above 3 % of the amplitude, it is first smoothed by the average over a twentieth of the period. What noise
 * is left makes the amplitude read high.
 *
 * @param values samples, slow trend removed
 * @param samplePeriod s
 * @param period of the cycle, samples
 * @param starts fractional samples, rising
 */
export function singleCycles(
  values: Float64Array,
  samplePeriod: number,
  period: number,
  starts: readonly number[],
): SingleCycle[] {
  const noisy = noiseLevel(values) > noticeableNoise * Math.SQRT2 * standardDeviation(values);
  const smooth = noisy ? slowTrend(values, Math.max(1, Math.round(period / 20))) : values;
  return starts.slice(1).map((to, i) => {
    const from = starts[i]!;
    let low = Number.POSITIVE_INFINITY;
    let high = Number.NEGATIVE_INFINITY;
    for (let k = Math.ceil(from); k <= Math.floor(to); k++) {
      low = Math.min(low, smooth[k]!);
      high = Math.max(high, smooth[k]!);
    }
    return { from: from * samplePeriod, to: to * samplePeriod, amplitude: (high - low) / 2 };
  });
}
