/**
 * Stage 2 of the estimate: the two-parameter element that best describes a travel, raw OP in, travel out, with a
 * free offset. The travel is the measured one, or the one reconstructed in stage 1. The first tenth of the record
 * is not counted, so that the unknown start is forgotten.
 */
import {
  createTravelPieces,
  type TravelPieces,
  travelFromPieces,
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

/** Where to look: a pair known to be near, or null to search everywhere up to `largest`. */
export interface DescribeSettings {
  readonly near: { readonly S: number; readonly J: number } | null;
  /** Largest S to try, %. */
  readonly largest: number;
}

const coarseS = 26;
const coarseJ = 9;
const startsKept = 5;

class TravelMisfit {
  private readonly pieces: TravelPieces;
  private readonly model: Float64Array;
  private readonly first: number;
  private readonly variance: number;
  private readonly start: number;

  constructor(
    private readonly op: Float64Array,
    private readonly travel: Float64Array,
  ) {
    this.pieces = createTravelPieces(op.length);
    this.model = new Float64Array(op.length);
    this.first = Math.floor(op.length / 10);
    let opSum = 0;
    let sum = 0;
    let square = 0;
    const counted = op.length - this.first;
    for (let k = this.first; k < op.length; k++) {
      opSum += op[k];
      sum += travel[k];
      square += travel[k] * travel[k];
    }
    this.variance = square / counted - (sum / counted) ** 2;
    this.start = travel[0] - (sum - opSum) / counted;
  }

  /** Share of the travel's variance left unexplained. */
  of(S: number, J: number, model: ValveModel): number {
    const { op, travel, first } = this;
    if (!(this.variance > 0)) return 1;
    walkTwoParameter(op, S, J, model === 'slides-on', reversalTolerance * S, 0, this.start, this.pieces);
    travelFromPieces(this.pieces, op, this.model);
    let sum = 0;
    let square = 0;
    for (let k = first; k < op.length; k++) {
      const off = travel[k] - this.model[k];
      sum += off;
      square += off * off;
    }
    const counted = op.length - first;
    return (square / counted - (sum / counted) ** 2) / this.variance;
  }
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
      const found = descend(misfit, model, start, settings.largest);
      if (!best || found.left < best.left) best = { ...found, model };
    }
  }
  const { S, J, model, left } = best!;
  return { model, S, J, explains: Math.max(0, 1 - left) };
}

function startingPairs(
  misfit: TravelMisfit,
  model: ValveModel,
  { near, largest }: DescribeSettings,
): { S: number; J: number }[] {
  const pairs: { S: number; J: number }[] = [];
  if (near) {
    for (const s of [0.85, 0.95, 1, 1.06, 1.15]) {
      for (const j of [0.7, 1, 1.3]) {
        const S = Math.min(near.S * s, largest);
        pairs.push({ S, J: Math.min(near.J * j, S) });
      }
    }
  } else {
    for (let s = 1; s <= coarseS; s++) {
      for (let j = 0; j < coarseJ; j++) {
        const S = (s / coarseS) * largest;
        pairs.push({ S, J: (S * j) / (coarseJ - 1) });
      }
    }
  }
  return pairs
    .map((pair) => ({ ...pair, left: misfit.of(pair.S, pair.J, model) }))
    .sort((a, b) => a.left - b.left)
    .slice(0, startsKept);
}

function descend(
  misfit: TravelMisfit,
  model: ValveModel,
  start: { S: number; J: number },
  largest: number,
): { S: number; J: number; left: number } {
  let { S, J } = start;
  let left = misfit.of(S, J, model);
  let step = 0.05 * S;
  let turns = 0;
  while (step > 0.002 * S && turns++ < 40) {
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
      if (there < left - 1e-9) {
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
