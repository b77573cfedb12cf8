/**
 * Stage 2 of the estimate: the two-parameter element that best describes a travel, raw OP in, travel out, with a
 * free offset. The travel is the measured one, or the one reconstructed in stage 1. The first tenth of the record
 * is not counted, so that the unknown start is forgotten.
 */
import {
  createTravelPieces,
  type TravelPieces,
  type ValveModel,
  walkTwoParameter,
} from '../valve/two-parameter';
import { reversalTolerance } from './search';

export interface Description {
  readonly model: ValveModel;
  readonly S: number;
  readonly J: number;
  /** Share of the travel's variance that the element explains, 0..1. */
  readonly explains: number;
}

interface Pair {
  readonly S: number;
  readonly J: number;
  /** Share of the travel's variance left unexplained. */
  readonly left: number;
}

/** Where to look: a pair known to be near, or null to search everywhere up to `largest`. */
export interface DescribeSettings {
  readonly near: { readonly S: number; readonly J: number } | null;
  /** Largest S to try, %. */
  readonly largest: number;
  /** Whether a few pairs around `near` do, as while histories are compared. Default false: a fine grid around it. */
  readonly quick?: boolean;
}

/** Share of the record that is not counted, to forget the start. */
const notCounted = 0.1;
/** Grids over S and J without a pair to start from: a wide one, then a fine one around its best S. */
const coarse = { S: 32, J: 25 };
const finer = { S: 21, J: 41, reach: 0.12 };
/** Best pairs of a grid from which the search goes on, for each variant. */
const usualStarts = 5;
const quickStarts = 2;
/** Smallest step of the search as a share of S, and the gain in the share left unexplained that is worth a step. */
const usualSteps = { smallest: 0.002, gain: 1e-9 };
const quickSteps = { smallest: 0.008, gain: 1e-5 };

/**
 * Share of a travel's variance that an element leaves unexplained, offset free. Sums over OP and travel are made
 * once, so that a piece of the element's travel costs the same at any length.
 */
export class TravelMisfit {
  private readonly pieces: TravelPieces;
  private readonly first: number;
  private readonly opMean: number;
  private readonly travelMean: number;
  private readonly sums: Record<'t' | 'u' | 'tt' | 'uu' | 'ut', Float64Array>;
  private readonly start: number;

  constructor(
    private readonly op: Float64Array,
    travel: Float64Array,
  ) {
    const samples = op.length;
    this.pieces = createTravelPieces(samples);
    this.first = Math.floor(notCounted * samples);
    this.opMean = meanFrom(op, this.first);
    this.travelMean = meanFrom(travel, this.first);
    this.start = travel[0];
    const sum = (): Float64Array => new Float64Array(samples + 1);
    this.sums = { t: sum(), u: sum(), tt: sum(), uu: sum(), ut: sum() };
    const { t, u, tt, uu, ut } = this.sums;
    for (let k = this.first; k < samples; k++) {
      const a = travel[k] - this.travelMean;
      const b = op[k] - this.opMean;
      t[k + 1] = t[k] + a;
      u[k + 1] = u[k] + b;
      tt[k + 1] = tt[k] + a * a;
      uu[k + 1] = uu[k] + b * b;
      ut[k + 1] = ut[k] + a * b;
    }
  }

  of(S: number, J: number, model: ValveModel): number {
    const { op, pieces, first, sums } = this;
    const samples = op.length;
    const variance = sums.tt[samples];
    const counted = samples - first;
    if (!(variance > 1e-12 * counted)) return 1;
    walkTwoParameter(op, S, J, model === 'slides-on', reversalTolerance * S, 0, this.start, pieces);
    const shift = this.opMean - this.travelMean;
    const { t, u, uu, ut } = sums;
    let sum = 0;
    let squares = 0;
    for (let i = 0; i < pieces.count; i++) {
      const to = i + 1 < pieces.count ? pieces.from[i + 1] : samples;
      if (to <= first) continue;
      const from = Math.max(first, pieces.from[i]);
      const travel = t[to] - t[from];
      if (pieces.slope[i] === 0) {
        const level = pieces.offset[i] - this.travelMean;
        sum += level * (to - from) - travel;
        squares += level * level * (to - from) - 2 * level * travel;
      } else {
        const level = pieces.offset[i] + shift;
        const off = u[to] - u[from] - travel;
        sum += level * (to - from) + off;
        squares +=
          level * level * (to - from) + 2 * level * off + uu[to] - uu[from] - 2 * (ut[to] - ut[from]);
      }
    }
    return (squares + variance - (sum * sum) / counted) / variance;
  }
}

function meanFrom(values: Float64Array, first: number): number {
  let sum = 0;
  for (let k = first; k < values.length; k++) sum += values[k];
  return sum / (values.length - first);
}

/** Finds the element of either variant that best describes `travel` (%), given `op` (%), both of one length. */
export function describeTravel(
  op: Float64Array,
  travel: Float64Array,
  settings: DescribeSettings,
): Description {
  const misfit = new TravelMisfit(op, travel);
  let best: { S: number; J: number; model: ValveModel; left: number } | null = null;
  for (const model of ['slides-on', 'sticks-again'] as const) {
    for (const start of startingPairs(misfit, model, settings)) {
      const found = descend(misfit, model, start, settings);
      if (!best || found.left < best.left) best = { ...found, model };
    }
  }
  const { S, J, model, left } = best!;
  return { model, S, J, explains: Math.max(0, 1 - left) };
}

function startingPairs(
  misfit: TravelMisfit,
  model: ValveModel,
  { near, largest, quick = false }: DescribeSettings,
): Pair[] {
  const tried = (pairs: readonly { S: number; J: number }[]): Pair[] =>
    pairs
      .map((pair) => ({ ...pair, left: misfit.of(pair.S, pair.J, model) }))
      .sort((a, b) => a.left - b.left);
  if (near && quick) {
    const around = [0.85, 0.95, 1, 1.06, 1.15].flatMap((s) => {
      const S = Math.min(near.S * s, largest);
      return [0.7, 1, 1.3].map((j) => ({ S, J: Math.min(near.J * j, S) }));
    });
    return tried(around).slice(0, quickStarts);
  }
  const wide = near ? [] : tried(pairGrid(largest / coarse.S, largest, coarse.S, coarse.J));
  const { S } = near ?? wide[0];
  const low = S * (1 - finer.reach);
  const fine = tried(pairGrid(low, Math.min(S * (1 + finer.reach), largest), finer.S, finer.J));
  return [...wide.slice(0, usualStarts), ...fine.slice(0, usualStarts)];
}

/** Even steps of S from `low` to `high` times even steps of J from 0 to S. */
function pairGrid(low: number, high: number, stepsS: number, stepsJ: number): { S: number; J: number }[] {
  return Array.from({ length: stepsS * stepsJ }, (_, i) => {
    const S = low + ((high - low) * Math.floor(i / stepsJ)) / (stepsS - 1);
    return { S, J: Math.min(S, (S * (i % stepsJ)) / (stepsJ - 1)) };
  });
}

function descend(
  misfit: TravelMisfit,
  model: ValveModel,
  start: { S: number; J: number },
  { largest, quick = false }: DescribeSettings,
): Pair {
  let { S, J } = start;
  let left = misfit.of(S, J, model);
  let step = 0.05 * S;
  let turns = 0;
  const { smallest, gain } = quick ? quickSteps : usualSteps;
  while (step > smallest * S && turns++ < 40) {
    let moved = false;
    for (const [ds, dj] of [
      [1, 0],
      [-1, 0],
      [0, 1],
      [0, -1],
      [1, 1],
      [-1, -1],
      [1, -1],
      [-1, 1],
    ]) {
      const nextS = S + ds * step;
      const nextJ = J + dj * step;
      if (nextS <= 0 || nextS > largest || nextJ < 0 || nextJ > nextS) continue;
      const there = misfit.of(nextS, nextJ, model);
      if (there < left - gain) {
        S = nextS;
        J = nextJ;
        left = there;
        moved = true;
        break;
      }
    }
    if (!moved) step /= 2;
  }
  return { S, J, left };
}
