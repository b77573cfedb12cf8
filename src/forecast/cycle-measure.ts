/** Period and swings of a cycle, read in the same way from a record and from a simulation of it. */
import { countReversals } from '../oscillation/reversals';
import { findRhythm } from '../oscillation/rhythm';
import { median, noiseLevel, quantile, rangeOf, standardDeviation } from '../signal/statistics';
import { removeSlowTrend, slowTrend } from '../signal/trend';

export interface CycleMeasure {
  /** Median time from a turn of OP to the next but one, s. */
  readonly period: number;
  /** Median peak to peak over the cycles: PV units, % of OP span. */
  readonly pvSwing: number;
  readonly opSwing: number;
}

/** Fewest turns of OP whose median is told, and the least one as a share of OP's range (own choices). */
const fewestTurns = 8;
const leastTurn = 0.3;
const noticeableNoise = 0.03;

/** null where OP does not turn often enough to tell. */
export function measureCycle(pv: Float64Array, op: Float64Array, samplePeriod: number): CycleMeasure | null {
  const rough = findRhythm(op, samplePeriod).period;
  if (rough === null) return null;
  const window = Math.min(op.length, Math.max(3, Math.round((3 * rough) / samplePeriod)));
  const level = removeSlowTrend(op, window);
  const range = quantile(level, 0.98) - quantile(level, 0.02);
  const { at } = countReversals(level, leastTurn * range);
  if (at.length < fewestTurns) return null;
  const lengths = Float64Array.from({ length: at.length - 2 }, (_, i) => at[i + 2]! - at[i]!);
  const period = median(lengths);
  const swing = (values: Float64Array): number => {
    const steady = steadied(removeSlowTrend(values, window), period);
    return median(
      Float64Array.from({ length: at.length - 2 }, (_, i) =>
        rangeOf(steady.subarray(at[i]!, at[i + 2]! + 1)),
      ),
    );
  };
  return { period: period * samplePeriod, pvSwing: swing(pv), opSwing: swing(op) };
}

/** Median peak to peak within stretches of `length` s: what is left to see where nothing cycles. */
export function swingWithin(values: Float64Array, length: number, samplePeriod: number): number {
  const size = Math.max(2, Math.round(length / samplePeriod));
  const count = Math.max(1, Math.floor(values.length / size));
  const steady = steadied(values, size);
  return median(
    Float64Array.from({ length: count }, (_, i) => rangeOf(steady.subarray(i * size, (i + 1) * size))),
  );
}

/**
 * Averaged over a twentieth of the period where noise would show in the peaks (noise above 3 % of the amplitude of a
 * sine of its spread), as in the cycles of an assessment.
 */
function steadied(values: Float64Array, period: number): Float64Array {
  const width = Math.round(period / 20);
  if (width < 2 || values.length < 3) return values;
  const noisy = noiseLevel(values) > noticeableNoise * Math.SQRT2 * standardDeviation(values);
  return noisy ? slowTrend(values, width) : values;
}
