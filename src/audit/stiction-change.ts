/** Whether a quantity that was estimated window after window has changed, how, and since when. */
import { fQuantile } from '../signal/distributions';
import { seededRandom } from '../signal/random';

/** One window's estimate at its middle. */
export interface TrackedValue {
  /** s since the start of the record: the window's beginning and end. */
  readonly from: number;
  readonly to: number;
  readonly value: number;
  /** Standard deviation that its own interval gives it, above 0. */
  readonly spread: number;
}

export interface Change {
  readonly says: 'rising' | 'falling' | 'no change shown' | 'cannot tell';
  /** A step from one level to another, or a level that leaves on a slope; null when no change is shown. */
  readonly shape: 'step' | 'slope' | null;
  /** s since the start of the record, with the ends of its 90 % interval; null when no change is shown. */
  readonly since: { readonly value: number; readonly low: number; readonly high: number } | null;
  /** Level before the change and at the end of the record; both the weighted mean when no change is shown; null without enough values. */
  readonly before: number | null;
  readonly after: number | null;
  /** How often chance alone, the same values in any order, shows so clear a change; null without enough values. */
  readonly chance: number | null;
}

/** Fewest windows with a value; of fewer even a perfect order comes about by chance too often (own choice). */
export const fewestWindows = 6;
/** A change is shown when chance alone does as much in at most this share of cases. */
export const leastChance = 0.05;
const shuffles = 999;
const level = 0.9;

interface Fit {
  readonly shape: 'step' | 'slope';
  /** s; */
  readonly at: number;
  readonly before: number;
  readonly after: number;
  /** Weighted sum of squares that is left. */
  readonly left: number;
}

/**
 * Compares three stories of the values: one level; one level and from some moment another; one level and from some
 * moment a slope. Values are weighted by their intervals. The change is shown when the better of the last two leaves so
 * little that the same values, shuffled 999 times over the windows, do as well in at most 5 % of cases: a permutation
 * test of the best F over all moments, which needs no distribution and pays for the search. The interval of the moment
 * is the set of moments that F does not reject at 0.9 against the best one, widened to whole windows.
 *
 * Limits: windows count as independent; two changes are told as one. Of fewer than eight windows a step cannot be shown,
 * only a slope: too many orders of the values look like a step.
 *
 * @param values in the order of time
 * @param seed of the shuffles
 */
export function findChange(values: readonly TrackedValue[], seed: number): Change {
  const n = values.length;
  if (n < fewestWindows) {
    return { says: 'cannot tell', shape: null, since: null, before: null, after: null, chance: null };
  }
  const times = values.map(({ from, to }) => (from + to) / 2);
  const weights = values.map(({ spread }) => 1 / spread ** 2);
  const numbers = values.map(({ value }) => value);
  const fits = fitsOf(times, numbers, weights, values);
  const best = leastLeft(fits);
  const constant = levelOf(numbers, weights, 0, n);
  const clarity = (all: number, left: number): number => (all - left) / Math.max(left, 1e-12 * all);
  const own = clarity(constant.left, best.left);
  const random = seededRandom(seed);
  let asClear = 1;
  for (let shuffle = 0; shuffle < shuffles; shuffle++) {
    const orderOf = shuffled(n, random.uniform);
    const value = orderOf.map((i) => numbers[i]!);
    const weight = orderOf.map((i) => weights[i]!);
    const other = leastLeft(fitsOf(times, value, weight, values));
    if (clarity(levelOf(value, weight, 0, n).left, other.left) >= own) asClear++;
  }
  const chance = constant.left > 0 ? asClear / (shuffles + 1) : 1;
  if (chance > leastChance || best.after === best.before) {
    const { mean } = constant;
    return { says: 'no change shown', shape: null, since: null, before: mean, after: mean, chance };
  }
  const most = best.left * (1 + fQuantile(level, 1, n - 3) / (n - 3));
  const asGood = fits.filter(({ shape, left }) => shape === best.shape && left <= most).map(({ at }) => at);
  const width = Math.max(...values.map(({ from, to }) => to - from));
  return {
    says: best.after > best.before ? 'rising' : 'falling',
    shape: best.shape,
    since: {
      value: best.at,
      low: Math.max(values[0]!.from, Math.min(...asGood) - width / 2),
      high: Math.min(values[n - 1]!.to, Math.max(...asGood) + width / 2),
    },
    before: best.before,
    after: best.after,
    chance,
  };
}

function leastLeft(fits: readonly Fit[]): Fit {
  return fits.reduce((best, fit) => (fit.left < best.left ? fit : best));
}

interface Level {
  readonly mean: number;
  readonly left: number;
}

/** Weighted mean of the values `from` to before `to`, and what it leaves. */
function levelOf(values: readonly number[], weights: readonly number[], from: number, to: number): Level {
  let weight = 0;
  let sum = 0;
  for (let i = from; i < to; i++) {
    weight += weights[i]!;
    sum += weights[i]! * values[i]!;
  }
  const mean = sum / weight;
  let left = 0;
  for (let i = from; i < to; i++) left += weights[i]! * (values[i]! - mean) ** 2;
  return { mean, left };
}

/** Every step with two windows on either side, and every slope with three windows on it. */
function fitsOf(
  times: readonly number[],
  values: readonly number[],
  weights: readonly number[],
  windows: readonly { readonly from: number; readonly to: number }[],
): Fit[] {
  const n = times.length;
  const fits: Fit[] = [];
  for (let k = 2; k <= n - 2; k++) {
    const before = levelOf(values, weights, 0, k);
    const after = levelOf(values, weights, k, n);
    fits.push({
      shape: 'step',
      at: (windows[k - 1]!.to + windows[k]!.from) / 2,
      before: before.mean,
      after: after.mean,
      left: before.left + after.left,
    });
  }
  for (let k = 0; k <= n - 4; k++) fits.push(slopeFrom(k, times, values, weights));
  return fits;
}

/** Level up to the middle of window `k`, and from there a straight line. */
function slopeFrom(
  k: number,
  times: readonly number[],
  values: readonly number[],
  weights: readonly number[],
): Fit {
  const at = times[k]!;
  const run = times.map((time) => Math.max(0, time - at));
  let weight = 0;
  let x = 0;
  let y = 0;
  for (let i = 0; i < run.length; i++) {
    weight += weights[i]!;
    x += weights[i]! * run[i]!;
    y += weights[i]! * values[i]!;
  }
  x /= weight;
  y /= weight;
  let xx = 0;
  let xy = 0;
  for (let i = 0; i < run.length; i++) {
    xx += weights[i]! * (run[i]! - x) ** 2;
    xy += weights[i]! * (run[i]! - x) * (values[i]! - y);
  }
  const slope = xy / xx;
  const before = y - slope * x;
  let left = 0;
  for (let i = 0; i < run.length; i++) left += weights[i]! * (values[i]! - before - slope * run[i]!) ** 2;
  return { shape: 'slope', at, before, after: before + slope * run[run.length - 1]!, left };
}

/** The numbers 0 to n - 1 in random order (Fisher and Yates). */
function shuffled(n: number, uniform: () => number): number[] {
  const all = Array.from({ length: n }, (_, i) => i);
  for (let i = n - 1; i > 0; i--) {
    const k = Math.floor((i + 1) * uniform());
    [all[i], all[k]] = [all[k]!, all[i]!];
  }
  return all;
}
