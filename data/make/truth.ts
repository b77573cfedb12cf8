/**
 * What S and J a simulated valve truly had: the two-parameter element whose travel comes closest to the valve's true
 * travel for the same OP. The stem that moved the valve has friction in newtons, mass and lag; this is how it reads in
 * terms of S and J.
 */
import { createTravelPieces, type ValveModel, walkTwoParameter } from '../../src/valve/two-parameter';

export interface ValveTruth {
  readonly model: ValveModel;
  readonly S: number;
  readonly J: number;
  /** Share of the variance of the true travel that the element explains, at most 1. */
  readonly explains: number;
  /**
   * Lowest and highest J with which the element, with any S tried, explains all but {@link NEARLY} as much: where they
   * lie apart, not even the true travel tells J.
   */
  readonly jumpAsGood: readonly [number, number];
}

/** The element is started at the true position; this share of the record is then left out to forget the start. */
const FORGOTTEN = 0.1;
/** Share of S by which OP may turn back before it counts as a reversal, as in the fit of a record. */
const TOLERANCE = 0.02;
/** Share of the travel's variance within which two fits count as equally good in `jumpAsGood`. */
const NEARLY = 0.005;
/** A wide grid over S and J/S, then a fine one over J/S around its best S, as the surface is rugged along J. */
const WIDE = { S: 40, ratio: 9 };
const FINE = { S: 15, ratio: 41, reach: 0.1 };
/** Points, from the best on, from which the search goes on locally. */
const STARTS = 7;

interface Point {
  readonly model: ValveModel;
  readonly S: number;
  readonly ratio: number;
  readonly misfit: number;
}

/**
 * The best S and J over both variants: grids over S (logarithmic, up to the swing of OP) and J/S, then pattern
 * searches from their best points and from `near`. The offset between OP and travel is free.
 *
 * @param op controller output as sent to the valve, %
 * @param travel true travel, %, same length
 * @param near S and J that the valve was built with, as one more start
 * @returns null when the travel or OP does not move, so that nothing can be told
 */
export function fitTruth(
  op: Float64Array,
  travel: Float64Array,
  near: { readonly S: number; readonly J: number } | null,
): ValveTruth | null {
  const samples = op.length;
  const from = Math.floor(FORGOTTEN * samples);
  const count = samples - from;
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const value of op) {
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  const opMean = mean(op.subarray(from));
  const travelMean = mean(travel.subarray(from));
  // Sums from `from` to before sample k: a piece of the element's travel then costs the same at any length.
  const sumT = new Float64Array(samples + 1);
  const sumU = new Float64Array(samples + 1);
  const sumTT = new Float64Array(samples + 1);
  const sumUU = new Float64Array(samples + 1);
  const sumUT = new Float64Array(samples + 1);
  for (let k = from; k < samples; k++) {
    const t = travel[k] - travelMean;
    const u = op[k] - opMean;
    sumT[k + 1] = sumT[k] + t;
    sumU[k + 1] = sumU[k] + u;
    sumTT[k + 1] = sumTT[k] + t * t;
    sumUU[k + 1] = sumUU[k] + u * u;
    sumUT[k + 1] = sumUT[k] + u * t;
  }
  const variance = sumTT[samples];
  if (!(variance > 1e-9 * count) || !(high > low)) return null;

  const pieces = createTravelPieces(samples);
  const all: Point[] = [];
  const at = (model: ValveModel, S: number, ratio: number): Point => {
    walkTwoParameter(op, S, ratio * S, model === 'slides-on', TOLERANCE * S, 0, travel[0], pieces);
    let sum = 0;
    let squares = 0;
    for (let i = 0; i < pieces.count; i++) {
      const b = i + 1 < pieces.count ? pieces.from[i + 1] : samples;
      if (b <= from) continue;
      const a = Math.max(from, pieces.from[i]);
      const slope = pieces.slope[i];
      const offset = pieces.offset[i] + slope * opMean - travelMean;
      const t = sumT[b] - sumT[a];
      const tt = sumTT[b] - sumTT[a];
      // Sum of offset + slope u - t over the piece, and of its square; slope is 0 or 1.
      const u = slope * (sumU[b] - sumU[a]);
      const uu = slope * (sumUU[b] - sumUU[a]);
      const ut = slope * (sumUT[b] - sumUT[a]);
      sum += offset * (b - a) + u - t;
      squares += offset * offset * (b - a) + uu + tt + 2 * (offset * (u - t) - ut);
    }
    const point = { model, S, ratio, misfit: (squares - (sum * sum) / count) / variance };
    all.push(point);
    return point;
  };

  const best: Point[] = [];
  for (const model of ['slides-on', 'sticks-again'] as const) {
    const wide: Point[] = [];
    for (let i = 1; i <= WIDE.S; i++) {
      const S = (high - low) * 0.01 ** (1 - i / WIDE.S);
      for (let k = 0; k < WIDE.ratio; k++) wide.push(at(model, S, k / (WIDE.ratio - 1)));
    }
    wide.sort((a, b) => a.misfit - b.misfit);
    const tried = [...wide];
    for (let i = 0; i < FINE.S; i++) {
      const S = wide[0].S * Math.exp(FINE.reach * ((2 * i) / (FINE.S - 1) - 1));
      for (let k = 0; k < FINE.ratio; k++) tried.push(at(model, S, k / (FINE.ratio - 1)));
    }
    tried.sort((a, b) => a.misfit - b.misfit);
    const starts = tried.slice(0, STARTS);
    if (near !== null && near.S > 0) starts.push(at(model, near.S, near.J / near.S));
    for (const start of starts) best.push(polished(start, at));
  }
  best.sort((a, b) => a.misfit - b.misfit);
  const { model, S, ratio, misfit } = best[0];
  const jumps = all.filter((point) => point.misfit <= misfit + NEARLY).map((point) => point.ratio * point.S);
  return {
    model,
    S,
    J: ratio * S,
    explains: 1 - misfit,
    jumpAsGood: [Math.min(...jumps), Math.max(...jumps)],
  };
}

/** Pattern search in log S and J/S: steps are halved when none of the eight around a point is better. */
function polished(start: Point, at: (model: ValveModel, S: number, ratio: number) => Point): Point {
  let here = start;
  for (let step = 0.02; step > 5e-4; ) {
    let next = here;
    for (const [dS, dRatio] of [
      [1, 0],
      [-1, 0],
      [0, 1],
      [0, -1],
      [1, 1],
      [-1, -1],
      [1, -1],
      [-1, 1],
    ]) {
      const ratio = Math.min(1, Math.max(0, here.ratio + dRatio * step));
      const tried = at(here.model, here.S * Math.exp(dS * step), ratio);
      if (tried.misfit < next.misfit) next = tried;
    }
    if (next === here) step /= 2;
    else here = next;
  }
  return here;
}

function mean(values: Float64Array): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
