/**
 * How long a signal typically takes to go to and fro, whether or not it does so regularly. A valve that sticks under
 * changing load makes the loop hunt without a fixed period; its reversals can still be read.
 */
import { quantile } from '../signal/statistics';
import { countReversals } from './reversals';

/** Turns smaller than this share of the signal's range (without its outermost 2 per cent) do not count. Own choice. */
const leastTurn = 0.25;

export interface Rhythm {
  /** Turns counted. */
  readonly reversals: number;
  /** Twice the mean time between turns, s; null with fewer than two. */
  readonly period: number | null;
}

/** Rhythm of evenly sampled `values`; `samplePeriod` in s. */
export function findRhythm(values: Float64Array, samplePeriod: number): Rhythm {
  const range = quantile(values, 0.98) - quantile(values, 0.02);
  if (!(range > 0)) return { reversals: 0, period: null };
  const { count, at } = countReversals(values, leastTurn * range);
  if (count < 2) return { reversals: count, period: null };
  return { reversals: count, period: (2 * (at[count - 1] - at[0]) * samplePeriod) / (count - 1) };
}
