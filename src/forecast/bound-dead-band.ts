/**
 * How large a dead band a record with set-point moves still allows: an upper bound on S where the valve shows none.
 *
 * Each set-point move makes OP go and PV follow. A valve with a dead band S would have kept its travel back after
 * every reversal; from some S on PV contradicts that. Valves of rising S (each with its best J and process) are set
 * against a valve that follows OP, move by move.
 */

import { filterTravel, whiten } from '../estimate/objective';
import {
  bestTheta,
  createTarget,
  fitGain,
  fitProcess,
  type ProcessSettings,
  residualOf,
} from '../estimate/process-fit';
import type { LoopRecord } from '../record/loop-record';
import { twoParameterValve } from '../valve/two-parameter';

export interface DeadBandBound {
  /** Set-point moves, and how many of them turned back. */
  readonly moves: number;
  readonly reversals: number;
  /** Every S from here on is contradicted, % of OP span; null where none is, or where there are too few moves. */
  readonly below: number | null;
  readonly why: string;
}

/** Own choices: moves and turns asked for, and least t over the moves for a valve to be contradicted. */
const fewestMoves = 8;
const fewestReversals = 4;
const leastT = 2;
/** Values of S tried, % of OP span. */
const tried: readonly number[] = [0.5, 0.7, 1, 1.4, 2, 2.8, 4, 5.6, 8];
const jumps: readonly number[] = [0, 0.4, 0.8];
const lagStarts: readonly number[] = [1, 3, 8, 20];
/** Disturbance filter to begin with, and how often filter and process are fitted in turn. */
const firstTheta = 0.6;
const passes = 3;

/**
 * @param period s: bounds the dead time that is allowed for (a sixth of it), the cycle before the repair
 * @param gainSign of the process
 */
export function boundDeadBand(
  record: LoopRecord,
  {
    period,
    integrating,
    sign,
  }: { readonly period: number; readonly integrating: boolean; readonly sign: 1 | -1 },
): DeadBandBound {
  const { sp, pv, op, samplePeriod } = record;
  const at: number[] = [];
  let reversals = 0;
  let last = 0;
  for (let k = 1; sp !== null && k < sp.length; k++) {
    const move = Math.sign(sp[k]! - sp[k - 1]!);
    if (move === 0) continue;
    at.push(k);
    if (last !== 0 && move !== last) reversals++;
    last = move;
  }
  const few = at.length < fewestMoves || reversals < fewestReversals;
  if (few) {
    return {
      moves: at.length,
      reversals,
      below: null,
      why: `The record has ${at.length} set-point moves, ${reversals} of them reversals; at least ${fewestMoves} and ${fewestReversals} are asked for to bound the dead band.`,
    };
  }
  const settings: ProcessSettings = {
    integrating,
    sign,
    period: period / samplePeriod,
    deadTime: null,
    gainLow: 0,
    gainHigh: Number.POSITIVE_INFINITY,
    controller: null,
    samplePeriod,
  };
  const free = errorsOf(pv, op, settings);
  const blocks = at.map((from, i) => ({ from, to: at[i + 1] ?? op.length }));
  const contradicted = tried.map((S) => {
    const best = jumps
      .map((share) => errorsOf(pv, twoParameterValve(op, { S, J: share * S, start: op[0]! }), settings))
      .reduce((one, other) => (other.power < one.power ? other : one));
    return tOver(blocks, best.errors, free.errors) >= leastT;
  });
  const firstAllowed = contradicted.lastIndexOf(false);
  const below = firstAllowed === tried.length - 1 ? null : tried[firstAllowed + 1]!;
  return {
    moves: at.length,
    reversals,
    below,
    why:
      below === null
        ? `Even a dead band of ${tried.at(-1)} % goes with the ${at.length} set-point moves of this record: they are too small or too noisy.`
        : `${at.length} set-point moves, ${reversals} of them reversals, contradict a dead band of ${below} % or more.`,
  };
}

/** One-step prediction errors of PV with the process and the disturbance filter that go best with this travel. */
function errorsOf(
  pv: Float64Array,
  travel: Float64Array,
  settings: ProcessSettings,
): { errors: Float64Array; power: number } {
  const { integrating, sign } = settings;
  let best: { errors: Float64Array; power: number } | null = null;
  let theta = firstTheta;
  for (let pass = 0; pass < passes; pass++) {
    const target = createTarget(pv, theta, settings);
    const start = lagStarts
      .map((lag) => fitGain(travel, target, { lag, secondLag: 0, delay: 1 }, settings))
      .reduce((one, other) => (other.misfit < one.misfit ? other : one));
    const fit = fitProcess(travel, target, start, settings);
    const part = filterTravel(travel, fit, theta, integrating);
    const errors = whiten(pv, theta, integrating).map((value, k) => value - sign * fit.gain * part[k]!);
    const power = errors.reduce((sum, error) => sum + error * error, 0);
    if (best === null || power < best.power) best = { errors, power };
    const next = bestTheta(residualOf(pv, travel, fit, settings), integrating);
    if (next === theta) break;
    theta = next;
  }
  return best!;
}

/** t over the blocks of the log likelihood that `free` gains over `stuck`. */
function tOver(
  blocks: readonly { readonly from: number; readonly to: number }[],
  stuck: Float64Array,
  free: Float64Array,
): number {
  const variance = free.reduce((sum, error) => sum + error * error, 0) / free.length;
  const gained = blocks.map(({ from, to }) => {
    let sum = 0;
    for (let k = from; k < to; k++) sum += stuck[k]! ** 2 - free[k]! ** 2;
    return sum / (2 * variance);
  });
  const average = gained.reduce((sum, value) => sum + value, 0) / gained.length;
  const square = gained.reduce((sum, value) => sum + (value - average) ** 2, 0) / (gained.length - 1);
  return square > 0 ? average / Math.sqrt(square / gained.length) : 0;
}
