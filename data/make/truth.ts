/**
 * What S and J a simulated valve truly had: the two-parameter element whose travel comes closest to the valve's true
 * travel for the same OP. The stem that moved the valve has friction in newtons, mass and lag; this is how it reads in
 * terms of S and J.
 */
import {
  createTravelPieces,
  travelFromPieces,
  type ValveModel,
  walkTwoParameter,
} from '../../src/valve/two-parameter';

export interface ValveTruth {
  readonly model: ValveModel;
  readonly S: number;
  readonly J: number;
  /** Share of the variance of the true travel that the element explains, at most 1. */
  readonly explains: number;
}

/** The element is started at the true position; this share of the record is then left out to forget the start. */
const FORGOTTEN = 0.1;
/** Share of S by which OP may turn back before it counts as a reversal, as in the fit of a record. */
const TOLERANCE = 0.02;
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
  const from = Math.floor(FORGOTTEN * op.length);
  const counted = travel.subarray(from);
  const mean = counted.reduce((sum, value) => sum + value, 0) / counted.length;
  const variance = counted.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const value of op) {
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  if (!(variance > 1e-9 * counted.length) || !(high > low)) return null;

  const pieces = createTravelPieces(op.length);
  const modelled = new Float64Array(op.length);
  const at = (model: ValveModel, S: number, ratio: number): Point => {
    walkTwoParameter(op, S, ratio * S, model === 'slides-on', TOLERANCE * S, 0, travel[0], pieces);
    travelFromPieces(pieces, op, modelled);
    let sum = 0;
    let squares = 0;
    for (let k = from; k < op.length; k++) {
      const off = modelled[k] - travel[k];
      sum += off;
      squares += off * off;
    }
    return { model, S, ratio, misfit: (squares - (sum * sum) / counted.length) / variance };
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
  return { model, S, J: ratio * S, explains: 1 - misfit };
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
