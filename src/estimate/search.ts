/**
 * Stage 1 of the estimate: the valve and process that best explain PV, and with them the travel.
 *
 * S and J are searched on a grid, coarse first, then every grid neighbour of the best few until none is better
 * ({@link searchGrid}); after that S and J leave the grid and lag, dead time and disturbance filter are refined
 * in turn ({@link reconstructTravel}). The pair found here explains PV best; it is not yet the pair that describes
 * the valve best, because timing leaks between slip and process. `describe-travel.ts` takes that second step.
 */
import {
  createTravelPieces,
  type TravelPieces,
  travelFromPieces,
  type ValveModel,
  walkTwoParameter,
} from '../valve/two-parameter';
import {
  createObjective,
  createScratch,
  filterTravel,
  misfitOfPieces,
  type Objective,
  type PiecesMisfit,
  type Scratch,
  simulateProcess,
  whiten,
} from './objective';

/** How far OP may turn back, as a share of S, before it counts as a reversal. */
export const reversalTolerance = 0.02;
/** Landing point of `sticks-again` in stage 1: half at OP, half by exactly J. */
const landingBlend = 0.5;
/** Steps of the grid in S (shares of the OP swing) and in J/S. */
export const gridSteps = 50;
const coarseStepS = 2;
const coarseStepJ = 7;
const climbersKept = 14;
const lagSteps = 13;
const delaySteps = 18;
const thetas: readonly number[] = [0, 0.2, 0.4, 0.6, 0.75, 0.85, 0.92, 0.96, 0.98];

export interface SearchSettings {
  readonly integrating: boolean;
  readonly sign: 1 | -1;
  /** Period of the cycle, samples. */
  readonly period: number;
  /** Stated dead time, samples; null when not stated. */
  readonly deadTime: number | null;
  /** Bounds of the size of the process gain, PV units per % (per % and sample when integrating). */
  readonly gainLow: number;
  readonly gainHigh: number;
}

export interface GridPoint {
  readonly S: number;
  readonly J: number;
  readonly misfit: number;
  readonly lagIndex: number;
  readonly delayIndex: number;
  readonly gain: number;
}

export interface Reconstruction {
  readonly model: ValveModel;
  readonly S: number;
  readonly J: number;
  /** Lag of the actuator on OP, samples. */
  readonly actuatorLag: number;
  readonly lag: number;
  readonly delay: number;
  readonly gain: number;
  readonly theta: number;
  readonly misfit: number;
  /** Power of the one-step prediction errors; comparable between disturbance filters and responses. */
  readonly innovations: number;
  readonly travel: Float64Array;
}

/** Lags and dead times that stage 1 tries, in samples. */
export function processGrid(settings: SearchSettings): { lags: number[]; delays: number[] } {
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

/** First-order lag of `lag` samples on `op`, starting at rest; the array itself for lag 0. */
export function lagged(op: Float64Array, lag: number): Float64Array {
  if (lag <= 0) return op;
  const pole = Math.exp(-1 / lag);
  const out = new Float64Array(op.length);
  let state = op[0];
  for (let k = 0; k < op.length; k++) {
    state = pole * state + (1 - pole) * op[k];
    out[k] = state;
  }
  return out;
}

/** One OP, one objective, one variant: evaluates pairs of S and J. */
class Trial {
  readonly pieces: TravelPieces;
  private readonly scratch: Scratch;
  constructor(
    readonly objective: Objective,
    readonly op: Float64Array,
    readonly model: ValveModel,
  ) {
    this.pieces = createTravelPieces(op.length);
    this.scratch = createScratch(objective.options.delays.length);
  }

  misfit(S: number, J: number, useLags: readonly number[], best: PiecesMisfit): void {
    walk(this.op, S, J, this.model, this.pieces);
    misfitOfPieces(this.objective, this.pieces, this.op, useLags, this.scratch, best);
  }
}

function walk(op: Float64Array, S: number, J: number, model: ValveModel, pieces: TravelPieces): void {
  walkTwoParameter(op, S, J, model === 'slides-on', reversalTolerance * S, landingBlend, op[0], pieces);
}

function nothingYet(): PiecesMisfit {
  return { misfit: 1, lagIndex: 0, delayIndex: 0, gain: 0 };
}

/** Evaluation of the grid of S and J, remembered so that no point is tried twice. */
export interface GridSearch {
  readonly best: GridPoint;
  /** misfit[s * gridSteps + j], NaN where not tried. S = (s+1)/gridSteps * largest, J = S * j/(gridSteps-1). */
  readonly tried: Float64Array;
}

function gridPair(s: number, j: number, largest: number): { S: number; J: number } {
  const S = ((s + 1) / gridSteps) * largest;
  return { S, J: (S * j) / (gridSteps - 1) };
}

interface CoarsePoint {
  readonly s: number;
  readonly j: number;
  readonly misfit: number;
}

/** The thinned grid with a few of the lags, best first. */
function searchCoarse(trial: Trial, largest: number): CoarsePoint[] {
  const lagCount = trial.objective.perLag.length;
  const fewLags = trial.objective.perLag.map((_, i) => i).filter((i) => i % 4 === 1 || lagCount < 5);
  const coarse: CoarsePoint[] = [];
  for (let s = 0; s < gridSteps; s += coarseStepS) {
    for (let j = 0; j < gridSteps; j += coarseStepJ) {
      const { S, J } = gridPair(s, j, largest);
      const found = nothingYet();
      trial.misfit(S, J, fewLags, found);
      coarse.push({ s, j, misfit: found.misfit });
    }
  }
  return coarse.sort((a, b) => a.misfit - b.misfit);
}

/** Finds the best grid point of S and J for one variant. `largest` is the largest S tried, %. */
export function searchGrid(
  objective: Objective,
  op: Float64Array,
  model: ValveModel,
  largest: number,
): GridSearch {
  const trial = new Trial(objective, op, model);
  const everyLag = objective.perLag.map((_, i) => i);
  const coarse = searchCoarse(trial, largest);
  const tried = new Float64Array(gridSteps * gridSteps).fill(Number.NaN);
  const results = new Map<number, PiecesMisfit>();
  const value = (s: number, j: number): number => {
    if (s < 0 || j < 0 || s >= gridSteps || j >= gridSteps) return Number.POSITIVE_INFINITY;
    const index = s * gridSteps + j;
    if (Number.isNaN(tried[index])) {
      const { S, J } = gridPair(s, j, largest);
      const found = nothingYet();
      trial.misfit(S, J, everyLag, found);
      tried[index] = found.misfit;
      results.set(index, found);
    }
    return tried[index];
  };
  const moves = [
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
  ];
  let bestIndex = 0;
  let bestMisfit = Number.POSITIVE_INFINITY;
  for (const start of coarse.slice(0, climbersKept)) {
    let { s, j } = start;
    let here = value(s, j);
    for (let better = true; better; ) {
      better = false;
      let nextS = s;
      let nextJ = j;
      for (const [ds, dj] of moves) {
        const there = value(s + ds, j + dj);
        if (there < here - 1e-12) {
          here = there;
          nextS = s + ds;
          nextJ = j + dj;
          better = true;
        }
      }
      s = nextS;
      j = nextJ;
    }
    if (here < bestMisfit) {
      bestMisfit = here;
      bestIndex = s * gridSteps + j;
    }
  }
  const s = Math.floor(bestIndex / gridSteps);
  const found = results.get(bestIndex) as PiecesMisfit;
  return { best: { ...gridPair(s, bestIndex % gridSteps, largest), ...found }, tried };
}

/** The disturbance coefficient that makes the residual's innovations smallest. */
export function bestTheta(residual: Float64Array, integrating: boolean): number {
  let best = thetas[0];
  let least = Number.POSITIVE_INFINITY;
  for (const theta of thetas) {
    const innovations = whiten(residual, theta, integrating);
    let power = 0;
    for (let k = 0; k < innovations.length; k++) power += innovations[k] * innovations[k];
    if (power < least) {
      least = power;
      best = theta;
    }
  }
  return best;
}

/** PV less the travel's part, gain fitted under the filter `theta`. */
export function residualOf(
  pv: Float64Array,
  travel: Float64Array,
  found: { lag: number; delay: number; gain: number },
  settings: SearchSettings,
): Float64Array {
  const part = simulateProcess(travel, found, settings.integrating);
  const out = new Float64Array(pv.length);
  const gain = settings.sign * found.gain;
  for (let k = 0; k < pv.length; k++) out[k] = pv[k] - gain * part[k];
  return out;
}

interface Refined {
  misfit: number;
  gain: number;
  lag: number;
  delay: number;
}

/** Misfit and gain of a travel for a process given in the plain form. */
export function plainMisfit(
  travel: Float64Array,
  target: Float64Array,
  power: number,
  lag: number,
  delay: number,
  theta: number,
  settings: SearchSettings,
): { misfit: number; gain: number } {
  const x = filterTravel(travel, { lag, delay }, theta, settings.integrating);
  let dot = 0;
  let energy = 0;
  for (let k = 0; k < x.length; k++) {
    dot += x[k] * target[k];
    energy += x[k] * x[k];
  }
  if (!(energy > 1e-12) || dot <= 0) return { misfit: 1, gain: 0 };
  const gain = Math.min(Math.max(dot / energy, settings.gainLow), settings.gainHigh);
  return { misfit: 1 - (gain * (2 * dot - gain * energy)) / power, gain };
}

/** Refines lag and dead time of a fixed travel by a shrinking pattern. */
export function refineProcess(
  travel: Float64Array,
  target: Float64Array,
  power: number,
  start: { lag: number; delay: number },
  theta: number,
  settings: SearchSettings,
): Refined {
  const longestDelay = Math.max(2, settings.period / 6);
  let { lag, delay } = start;
  let best = plainMisfit(travel, target, power, lag, delay, theta, settings);
  let lagStep = Math.max(0.3, 0.25 * lag);
  let delayStep = settings.deadTime === null ? 0.5 : 0;
  for (let round = 0; round < 5; round++) {
    for (let moved = true, turns = 0; moved && turns < 6; turns++) {
      moved = false;
      for (const [dl, dd] of [
        [lagStep, 0],
        [-lagStep, 0],
        [0, delayStep],
        [0, -delayStep],
        [lagStep, -delayStep],
        [-lagStep, delayStep],
      ]) {
        const nextLag = Math.max(0, lag + dl);
        const nextDelay = Math.min(Math.max(1, delay + dd), longestDelay);
        if (nextLag === lag && nextDelay === delay) continue;
        const there = plainMisfit(travel, target, power, nextLag, nextDelay, theta, settings);
        if (there.misfit < best.misfit - 1e-9) {
          best = there;
          lag = nextLag;
          delay = nextDelay;
          moved = true;
        }
      }
    }
    lagStep /= 2;
    delayStep /= 2;
  }
  return { ...best, lag, delay };
}

/** Lets S and J leave the grid, under an objective with few lags and delays near the best. */
function refinePair(trial: Trial, S: number, J: number, largest: number): GridPoint {
  const everyLag = trial.objective.perLag.map((_, i) => i);
  let best: PiecesMisfit = nothingYet();
  trial.misfit(S, J, everyLag, best);
  let stepS = largest / gridSteps / 1.5;
  let stepJ = Math.max((S / gridSteps) * 1.5, stepS / 2);
  let turns = 0;
  while (stepS > largest / gridSteps / 12 && turns++ < 24) {
    let better: { S: number; J: number; found: PiecesMisfit } | null = null;
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
      const nextS = S + ds * stepS;
      const nextJ = J + dj * stepJ;
      if (nextS <= 0 || nextS > largest || nextJ < 0 || nextJ > nextS) continue;
      const found: PiecesMisfit = { ...(better?.found ?? best) };
      const before = found.misfit;
      trial.misfit(nextS, nextJ, everyLag, found);
      if (found.misfit < before - 1e-9) better = { S: nextS, J: nextJ, found };
    }
    if (better) {
      S = better.S;
      J = better.J;
      best = better.found;
    } else {
      stepS /= 2;
      stepJ /= 2;
    }
  }
  return { S, J, ...best };
}

/** The disturbance coefficient under which a thinned search leaves the smallest innovations. */
function firstTheta(
  pv: Float64Array,
  op: Float64Array,
  grid: { lags: number[]; delays: number[] },
  largest: number,
  settings: SearchSettings,
): number {
  let best = 0;
  let least = Number.POSITIVE_INFINITY;
  for (const theta of [0.4, 0.75, 0.92, 0.98]) {
    const few = { lags: grid.lags.filter((_, i) => i % 4 === 1), delays: grid.delays };
    const objective = createObjective(pv, op, { ...settings, ...few, theta });
    const [first] = searchCoarse(new Trial(objective, op, 'slides-on'), largest);
    const innovations = first.misfit * objective.power;
    if (innovations < least) {
      least = innovations;
      best = theta;
    }
  }
  return best;
}

/** Lags of the actuator on OP that stage 1 tries, samples. */
const actuatorLags: readonly number[] = [0, 0.5, 1, 1.5];

/** Stage 1: finds the travel behind `pv` (any unit) and `op` (%), both of one length. Null when OP does not move. */
export function reconstructTravel(
  pv: Float64Array,
  op: Float64Array,
  settings: SearchSettings,
): Reconstruction | null {
  const largest = swingOf(op);
  if (!(largest > 0)) return null;
  const grid = processGrid(settings);
  let theta = firstTheta(pv, op, grid, largest, settings);
  let best: Reconstruction | null = null;
  for (let pass = 0; pass < 2; pass++) {
    const objective = createObjective(pv, op, { ...settings, ...grid, theta });
    const found: Reconstruction[] = (['slides-on', 'sticks-again'] as const).map((model) => {
      const { best: point } = searchGrid(objective, op, model, largest);
      const start = { lag: grid.lags[point.lagIndex], delay: grid.delays[point.delayIndex] };
      return refine(pv, op, { ...point, ...start, model, theta }, actuatorLags, largest, settings);
    });
    const better = found[0].misfit <= found[1].misfit ? found[0] : found[1];
    if (!best || better.innovations < best.innovations) best = better;
    const next = bestTheta(residualOf(pv, better.travel, better, settings), settings.integrating);
    if (next === theta) break;
    theta = next;
  }
  return best;
}

/** The valve that best explains a part of the record, looked for near one found on the whole. */
export function refitNear(
  pv: Float64Array,
  op: Float64Array,
  whole: Reconstruction,
  settings: SearchSettings,
  largest: number,
): Reconstruction {
  let best: Reconstruction | null = null;
  for (const s of [0.85, 1, 1.15]) {
    for (const j of [0.5, 1, 1.5]) {
      const S = Math.min(s * whole.S, largest);
      const start = { ...whole, S, J: Math.min(j * whole.J, S) };
      const found = refine(pv, op, start, [whole.actuatorLag], largest, settings);
      if (!best || found.misfit < best.misfit) best = found;
    }
  }
  return best!;
}

/** Misfit of any pair of S and J with the variant and actuator of `whole`, the process free to move a little. */
export function mapNear(
  pv: Float64Array,
  op: Float64Array,
  whole: Reconstruction,
  settings: SearchSettings,
): (S: number, J: number) => number {
  const trial = trialNear(pv, lagged(op, whole.actuatorLag), whole, settings);
  const everyLag = trial.objective.perLag.map((_, i) => i);
  return (S, J) => {
    const found = nothingYet();
    trial.misfit(S, J, everyLag, found);
    return Math.max(0, found.misfit);
  };
}

interface Start {
  readonly model: ValveModel;
  readonly S: number;
  readonly J: number;
  readonly lag: number;
  readonly delay: number;
  readonly theta: number;
}

/** A trial with few lags and dead times around those of `start`. */
function trialNear(pv: Float64Array, u: Float64Array, start: Start, settings: SearchSettings): Trial {
  const whole = Math.max(1, Math.round(start.delay));
  const delays = settings.deadTime === null ? [whole - 2, whole - 1, whole, whole + 1] : [whole];
  const lags = [start.lag * 0.7, start.lag * 0.85, start.lag, start.lag * 1.18];
  const kept = delays.filter((delay) => delay >= 1);
  const objective = createObjective(pv, u, { ...settings, theta: start.theta, lags, delays: kept });
  return new Trial(objective, u, start.model);
}

function refine(
  pv: Float64Array,
  op: Float64Array,
  start: Start,
  actuators: readonly number[],
  largest: number,
  settings: SearchSettings,
): Reconstruction {
  const { theta, model } = start;
  const target = whiten(pv, theta, settings.integrating);
  let power = 0;
  for (let k = 0; k < target.length; k++) {
    target[k] *= settings.sign;
    power += target[k] * target[k];
  }
  let best: Reconstruction | null = null;
  let { S, J } = start;
  for (const actuatorLag of actuators) {
    const u = lagged(op, actuatorLag);
    const trial = trialNear(pv, u, start, settings);
    const pair = refinePair(trial, S, J, largest);
    walk(u, pair.S, pair.J, model, trial.pieces);
    const travel = new Float64Array(op.length);
    travelFromPieces(trial.pieces, u, travel);
    const { lags, delays } = trial.objective.options;
    const near = { lag: lags[pair.lagIndex], delay: delays[pair.delayIndex] };
    const refined = refineProcess(travel, target, power, near, theta, settings);
    if (!best || refined.misfit < best.misfit) {
      const innovations = refined.misfit * power;
      best = { model, S: pair.S, J: pair.J, actuatorLag, theta, travel, innovations, ...refined };
      S = pair.S;
      J = pair.J;
    }
  }
  return best!;
}

/** Range of `values` without the outermost half per cent at both ends. */
export function swingOf(values: Float64Array): number {
  const sorted = Float64Array.from(values).sort();
  const cut = Math.floor(sorted.length * 0.005);
  return sorted[sorted.length - 1 - cut] - sorted[cut];
}
