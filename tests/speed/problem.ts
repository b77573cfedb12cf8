/** One record as the grid search of stage 1 meets it, for the fast search and for its rivals. */
import { createObjective, type Objective, type ObjectiveOptions } from '../../src/estimate/objective';
import { type Opening, openingOf, restingTravel } from '../../src/estimate/opening';
import { swingOf } from '../../src/estimate/process-fit';
import {
  firstTheta,
  type GridPoint,
  gridSteps,
  processGrid,
  reversalTolerance,
  searchGrid,
} from '../../src/estimate/search';
import { findCycle } from '../../src/oscillation/find-cycle';
import { findRhythm } from '../../src/oscillation/rhythm';
import { noiseLevel } from '../../src/signal/statistics';
import type { ValveModel } from '../../src/valve/two-parameter';

export const VARIANTS: readonly ValveModel[] = ['slides-on', 'sticks-again'];
/** Landing point of `sticks-again` in the search; another one there shows as a disagreement of misfits. */
const LANDING_BLEND = 0.5;

export interface Signals {
  readonly pv: Float64Array;
  readonly op: Float64Array;
  readonly samplePeriod: number;
  readonly integrating: boolean;
  /** Sign of the process gain. */
  readonly sign: 1 | -1;
}

/** A pair on the grid: S is (s + 1)/50 of the OP swing, J is j/49 of S. */
export interface GridPair {
  readonly s: number;
  readonly j: number;
}

/** A pair with its best misfit over all lags and dead times. */
export interface Tried extends GridPair {
  readonly misfit: number;
}

export interface Problem {
  readonly pv: Float64Array;
  readonly op: Float64Array;
  readonly options: ObjectiveOptions;
  /** Bounds of S, %. */
  readonly smallest: number;
  readonly largest: number;
  /** Where the stem begins. */
  readonly opening: Opening;
  readonly pairs: readonly (GridPair & { readonly S: number; readonly J: number })[];
}

/**
 * The whole grid of S and J with the lags, dead times, disturbance filter and bounds that stage 1 takes; null where OP
 * does not turn.
 */
export function makeProblem({ pv, op, samplePeriod, integrating, sign }: Signals): Problem | null {
  const period = findCycle(op, samplePeriod).period ?? findRhythm(op, samplePeriod).period;
  if (period === null) return null;
  const settings = {
    integrating,
    sign,
    period: period / samplePeriod,
    deadTime: null,
    gainLow: 0,
    gainHigh: Number.POSITIVE_INFINITY,
    controller: null,
    samplePeriod,
  };
  const largest = swingOf(op);
  const smallest = Math.min(2 * noiseLevel(op), largest / 4);
  const theta = firstTheta(pv, op, smallest, largest, settings);
  const pairs: { s: number; j: number; S: number; J: number }[] = [];
  for (let s = 0; s < gridSteps; s++) {
    const S = ((s + 1) / gridSteps) * largest;
    if (S < smallest) continue;
    for (let j = 0; j < gridSteps; j++) pairs.push({ s, j, S, J: (S * j) / (gridSteps - 1) });
  }
  return {
    pv,
    op,
    options: { ...settings, ...processGrid(settings), theta },
    smallest,
    largest,
    opening: openingOf(op, settings.period),
    pairs,
  };
}

/** What the fast search tried in each variant: tables of the objective first, then the search. */
export function searchFast({ pv, op, options, smallest, largest, opening }: Problem): GridPoint[][] {
  const objective = createObjective(pv, op, options);
  return VARIANTS.map((model) => searchGrid(objective, op, model, smallest, largest, opening));
}

/** The pairs that the fast search tried, best first; it gives a pair once for each band of dead times. */
export function pairsTried(points: readonly GridPoint[], { largest }: Problem): Tried[] {
  const best = new Map<number, Tried>();
  for (const { S, J, misfit } of points) {
    const s = Math.round((gridSteps * S) / largest) - 1;
    const j = Math.round(((gridSteps - 1) * J) / S);
    const key = gridSteps * s + j;
    if (misfit < (best.get(key)?.misfit ?? Number.POSITIVE_INFINITY)) best.set(key, { s, j, misfit });
  }
  return [...best.values()].sort((a, b) => a.misfit - b.misfit);
}

/** The problem as the rivals read it: nine numbers, then poles of each lag, dead times, S, J, filtered PV, OP. */
export function layOut(problem: Problem): Float64Array {
  const { pv, op, options, pairs, opening } = problem;
  const objective: Objective = createObjective(pv, op, options);
  const { gainLow, gainHigh, delays } = options;
  const poles = objective.perLag.map((tables) => tables.poles);
  return Float64Array.from([
    ...[op.length, poles[0].length, poles.length, delays.length, pairs.length],
    ...[reversalTolerance, LANDING_BLEND, gainLow, gainHigh],
    ...poles.flat(),
    ...delays,
    ...pairs.map(({ S }) => S),
    ...pairs.map(({ J }) => J),
    ...pairs.map(({ S, J }) => restingTravel(opening, S, J)),
    ...objective.target,
    ...op,
  ]);
}
