/**
 * Cycles that keep their size but not their period. A valve that sticks where PV almost meets SP can wait
 * there for any time: OP and PV then turn round at the same levels at uneven intervals, which spectrum and
 * autocorrelation miss. Such cycles show in the number of reversals: it is the same for any tolerance between
 * noise and swing, while that of noise and random walks falls steeply. The method and its limits are own
 * choices, set so that white, coloured and smooth noise and random walks pass at most one time in fifty.
 */
import { blockMeans } from '../signal/block-means';
import { resolution } from '../signal/resolution';
import { median, quantile } from '../signal/statistics';
import { countReversals } from './reversals';

export interface SteadySwing {
  /** Sample indices of the turns, highs and lows in turn. */
  readonly turns: readonly number[];
  /** Median distance between neighbouring turns, unit of the signal. */
  readonly swing: number;
  /** Median time from one turn to the next but one, samples. */
  readonly period: number;
}

/** Over tolerances this factor apart the number of reversals may grow by no more than `growth`. */
const plateau = 2.3;
const growth = 1.25;
/** Five cycles. */
const fewestTurns = 10;
/** Nine in ten swings lie within this factor of the median. */
const spread = 1.5;
/** A swing of fewer steps of a quantised signal may be noise that flips the last digit. */
const fewestSteps = 3;
/** Share of the time in the upper (and lower) half of the swing: less than this is a row of spikes. */
const leastShare = 0.1;
/** Share of the record between the first and the last turn. */
const leastCover = 0.6;
/** Noise is averaged out over 1, 2, 4 ... samples, as long as a cycle keeps this many of the averages. */
const fewestAverages = 10;

/** null when there is no such cycle. `values` are samples, all finite. */
export function steadySwing(values: Float64Array): SteadySwing | null {
  for (let by = 1; values.length >= 35 * by; by *= 2) {
    const found = inAverages(blockMeans(values, by));
    if (found === null) continue;
    if (found.period < fewestAverages) return null;
    const turns = found.turns.map((turn) => turn * by + Math.floor(by / 2));
    return { turns, swing: found.swing, period: found.period * by };
  }
  return null;
}

function inAverages(values: Float64Array): SteadySwing | null {
  const tolerance = steadyTolerance(values);
  if (tolerance === null) return null;
  const turns = countReversals(values, tolerance).at;
  const swings = differences(turns.map((turn) => values[turn]!)).map(Math.abs);
  const swing = median(swings);
  const even = quantile(swings, 0.1) >= swing / spread && quantile(swings, 0.9) <= swing * spread;
  const covered = turns.at(-1)! - turns[0]! >= leastCover * values.length;
  const upper = shareAbove(values, turns);
  const twoSided = upper >= leastShare && upper <= 1 - leastShare;
  if (!even || !covered || !twoSided || swing < fewestSteps * resolution(values)) return null;
  const periods = Float64Array.from(turns.slice(2), (turn, i) => turn - turns[i]!);
  return { turns, swing, period: median(periods) };
}

/**
 * A tolerance in the middle of the range over which the number of reversals does not change; null without
 * one.
 */
function steadyTolerance(values: Float64Array): number | null {
  const range = quantile(values, 1) - quantile(values, 0);
  if (!(range > 0)) return null;
  const step = plateau ** 0.25;
  const tolerances: number[] = [];
  for (let tolerance = range / 200; tolerance < range; tolerance *= step) tolerances.push(tolerance);
  const counts = tolerances.map((tolerance) => countReversals(values, tolerance).count);
  let best: { growth: number; tolerance: number } | null = null;
  for (let i = 0; i + 4 < counts.length && counts[i + 4]! >= fewestTurns; i++) {
    const grown = counts[i]! / counts[i + 4]!;
    if (grown <= growth && (best === null || grown < best.growth)) {
      best = { growth: grown, tolerance: tolerances[i + 2]! };
    }
  }
  return best?.tolerance ?? null;
}

/** Share of the samples between the turns that lie above the middle of their two turns. */
function shareAbove(values: Float64Array, turns: readonly number[]): number {
  let above = 0;
  let all = 0;
  for (const [i, from] of turns.slice(0, -1).entries()) {
    const to = turns[i + 1]!;
    const middle = (values[from]! + values[to]!) / 2;
    for (let k = from; k < to; k++) if (values[k]! > middle) above++;
    all += to - from;
  }
  return above / all;
}

function differences(values: readonly number[]): Float64Array {
  return Float64Array.from(values.slice(1), (value, i) => value - values[i]!);
}
