/**
 * Grid search for the valve that best explains PV.
 *
 * S (shares of the OP swing) times J/S times lags times dead times. A thinned grid comes first; from the best of it
 * every neighbour on the full grid is tried until none is better, so that a few hundred of the 2 500 pairs suffice.
 */
import {
  createTravelPieces,
  type TravelPieces,
  type ValveModel,
  walkTwoParameter,
} from '../valve/two-parameter';
import {
  type BandMisfits,
  createBandMisfits,
  createObjective,
  createScratch,
  misfitOfPieces,
  type Objective,
  type Scratch,
} from './objective';
import { type Opening, openingOf, restingTravel } from './opening';
import type { ProcessSettings } from './process-fit';

/** How far OP may turn back, as a share of S, before it counts as a reversal. */
export const reversalTolerance = 0.02;
/** Landing point of `sticks-again`: half at OP, half by exactly J. */
const landingBlend = 0.5;
/** Steps of the grid in S (shares of the largest S) and in J/S. */
export const gridSteps = 50;
/** Steps of the thinned grid, and of the still thinner one that does to choose the disturbance filter. */
const thinned = { S: 2, J: 7 };
const thinnest = { S: 4, J: 12 };
/** Bands of dead times: a long one with a small S fits nearly as well as a short one with a large S. */
export const delayBands = 3;
const climbersKept = 5;
const lagSteps = 13;
const delaySteps = 18;

export interface GridPoint {
  readonly model: ValveModel;
  /** Band of dead times, 0 the shortest. */
  readonly band: number;
  readonly S: number;
  readonly J: number;
  readonly misfit: number;
  /** Samples. */
  readonly lag: number;
  readonly delay: number;
  readonly gain: number;
}

/** Lags and dead times to try, in samples. */
export function processGrid(settings: ProcessSettings): { lags: number[]; delays: number[] } {
  const longest = Math.max(3, settings.period);
  const lags = [0];
  for (let i = 0; i < lagSteps - 1; i++) lags.push(0.5 * (longest / 0.5) ** (i / (lagSteps - 2)));
  if (settings.deadTime !== null) return { lags, delays: [Math.max(1, Math.round(settings.deadTime))] };
  const last = Math.max(2, Math.min(240, Math.floor(settings.period / 6)));
  const delays = new Set<number>();
  for (let i = 0; i < delaySteps; i++) delays.add(Math.max(1, Math.round(last ** (i / (delaySteps - 1)))));
  for (let d = 1; delays.size < Math.min(delaySteps, last); d++) delays.add(d);
  return { lags, delays: [...delays].sort((a, b) => a - b) };
}

/** One OP, one objective, one variant: evaluates pairs of S and J. */
export class PairTrial {
  private readonly pieces: TravelPieces;
  private readonly scratch: Scratch;
  private readonly bandOf: readonly number[];
  private readonly best: BandMisfits;

  constructor(
    readonly objective: Objective,
    private readonly op: Float64Array,
    readonly model: ValveModel,
    readonly bands: number,
    private readonly opening: Opening,
  ) {
    const delays = objective.options.delays.length;
    this.pieces = createTravelPieces(op.length);
    this.scratch = createScratch(delays);
    this.bandOf = objective.options.delays.map((_, d) => Math.floor((d * bands) / delays));
    this.best = createBandMisfits(bands);
  }

  /** Best misfits of the pair over the lags given by index; overwritten by the next call. */
  of(S: number, J: number, lags: readonly number[]): BandMisfits {
    const { objective, op, pieces, bandOf, scratch, best } = this;
    walkTwoParameter(
      op,
      S,
      J,
      this.model === 'slides-on',
      reversalTolerance * S,
      landingBlend,
      restingTravel(this.opening, S, J),
      pieces,
    );
    misfitOfPieces(objective, pieces, op, lags, bandOf, scratch, best);
    return best;
  }
}

interface CoarsePoint {
  readonly s: number;
  readonly j: number;
  /** One a band. */
  readonly misfit: readonly number[];
}

function gridPair(s: number, j: number, largest: number): { S: number; J: number } {
  const S = ((s + 1) / gridSteps) * largest;
  return { S, J: Math.min(S, (S * j) / (gridSteps - 1)) };
}

/** A thinned grid with a few of the lags. */
function searchCoarse(
  trial: PairTrial,
  smallest: number,
  largest: number,
  steps: { readonly S: number; readonly J: number },
): CoarsePoint[] {
  const lagCount = trial.objective.perLag.length;
  const fewLags = trial.objective.perLag.map((_, i) => i).filter((i) => i % 4 === 1 || lagCount < 5);
  const coarse: CoarsePoint[] = [];
  for (let s = 0; s < gridSteps; s += steps.S) {
    for (let j = 0; j < gridSteps; j += steps.J) {
      const { S, J } = gridPair(s, j, largest);
      if (S < smallest) continue;
      coarse.push({ s, j, misfit: [...trial.of(S, J, fewLags).misfit] });
    }
  }
  return coarse;
}

const neighbours: readonly (readonly [number, number])[] = [
  [1, 0],
  [-1, 0],
  [0, 2],
  [0, -2],
  [1, -2],
  [-1, 2],
  [1, 2],
  [-1, -2],
  [0, 1],
  [0, -1],
  [1, 1],
  [-1, -1],
  [0, 4],
  [0, -4],
  [2, 0],
  [-2, 0],
];

/**
 * Searches the grid for one variant and gives every point of the full grid that was tried, once for each band of dead
 * times, best first. `smallest` and `largest` bound S, %.
 */
export function searchGrid(
  objective: Objective,
  op: Float64Array,
  model: ValveModel,
  smallest: number,
  largest: number,
  opening: Opening,
): GridPoint[] {
  const { lags, delays } = objective.options;
  const trial = new PairTrial(objective, op, model, Math.min(delayBands, delays.length), opening);
  const everyLag = objective.perLag.map((_, i) => i);
  const tried = new Map<number, GridPoint[]>();
  const pointsAt = (s: number, j: number): GridPoint[] | null => {
    if (s < 0 || j < 0 || s >= gridSteps || j >= gridSteps) return null;
    const pair = gridPair(s, j, largest);
    if (pair.S < smallest) return null;
    const key = s * gridSteps + j;
    let points = tried.get(key);
    if (!points) {
      const { misfit, lagIndex, delayIndex, gain } = trial.of(pair.S, pair.J, everyLag);
      points = Array.from(misfit, (value, band) => ({
        model,
        band,
        ...pair,
        misfit: value,
        lag: lags[lagIndex[band]],
        delay: delays[delayIndex[band]],
        gain: gain[band],
      }));
      tried.set(key, points);
    }
    return points;
  };
  const coarse = searchCoarse(trial, smallest, largest, thinned);
  for (let band = 0; band < trial.bands; band++) {
    coarse.sort((a, b) => a.misfit[band] - b.misfit[band]);
    for (const { s, j } of coarse.slice(0, climbersKept))
      climb(s, j, (a, b) => pointsAt(a, b)?.[band].misfit);
  }
  return [...tried.values()].flat().sort((a, b) => a.misfit - b.misfit);
}

/** Walks from grid point to better neighbour until there is none. */
function climb(s: number, j: number, misfit: (s: number, j: number) => number | undefined): void {
  let here = misfit(s, j) ?? Number.POSITIVE_INFINITY;
  for (let better = true; better; ) {
    better = false;
    const [fromS, fromJ] = [s, j];
    for (const [byS, byJ] of neighbours) {
      const there = misfit(fromS + byS, fromJ + byJ);
      if (there !== undefined && there < here - 1e-12) {
        here = there;
        s = fromS + byS;
        j = fromJ + byJ;
        better = true;
      }
    }
  }
}

/** The disturbance coefficient under which a thinned search leaves the smallest prediction errors. */
export function firstTheta(
  pv: Float64Array,
  op: Float64Array,
  smallest: number,
  largest: number,
  settings: ProcessSettings,
): number {
  const opening = openingOf(op, settings.period);
  const { lags, delays } = processGrid(settings);
  const few = { lags: lags.filter((_, i) => i % 4 === 1), delays };
  let best = 0;
  let least = Number.POSITIVE_INFINITY;
  for (const theta of [0.4, 0.75, 0.92, 0.98]) {
    const objective = createObjective(pv, op, { ...settings, ...few, theta });
    const trial = new PairTrial(objective, op, 'slides-on', 1, opening);
    const coarse = searchCoarse(trial, smallest, largest, thinnest);
    const innovations = Math.min(...coarse.map(({ misfit }) => misfit[0])) * objective.power;
    if (innovations < least) {
      least = innovations;
      best = theta;
    }
  }
  return best;
}
