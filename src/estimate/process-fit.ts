/**
 * The linear process between a given travel and PV: lag, dead time, gain and disturbance coefficient, fitted in the
 * plain sample-by-sample form. `search.ts` does the same for thousands of travels at once on a grid.
 */
import type { LoopController } from './loop-stability';
import { filterTravel, type PlainProcess, poleOf, simulateProcess, whiten } from './objective';

export interface ProcessSettings {
  readonly integrating: boolean;
  readonly sign: 1 | -1;
  /** Period of the cycle, samples. */
  readonly period: number;
  /** Stated dead time, samples; null when not stated. */
  readonly deadTime: number | null;
  /** Bounds of the size of the process gain, PV units per % (per % and sample when integrating). */
  readonly gainLow: number;
  readonly gainHigh: number;
  /** Controller as read from the record, to tell which process gains the loop could bear; null: not used. */
  readonly controller: LoopController | null;
  /** s */
  readonly samplePeriod: number;
}

/** PV under a disturbance filter, the sign of the process gain taken out, and its power. */
export interface Target {
  readonly values: Float64Array;
  readonly power: number;
  readonly theta: number;
  /** Room for a filtered travel, written anew by every fit, so that thousands of them leave nothing behind. */
  readonly room: Float64Array;
}

export interface ProcessFit {
  /** Samples. */
  readonly lag: number;
  readonly secondLag: number;
  readonly delay: number;
  /** Size of the gain, PV units per % (per % and sample when integrating). */
  readonly gain: number;
  /** Power of the prediction errors over that of the target: 1 = nothing explained. */
  readonly misfit: number;
}

const thetas: readonly number[] = [0, 0.2, 0.4, 0.6, 0.75, 0.85, 0.92, 0.96, 0.98];

export function createTarget(pv: Float64Array, theta: number, settings: ProcessSettings): Target {
  const values = whiten(pv, theta, settings.integrating);
  let power = 0;
  for (let k = 0; k < values.length; k++) {
    values[k] *= settings.sign;
    power += values[k] * values[k];
  }
  return { values, power, theta, room: new Float64Array(values.length) };
}

/** First-order lag of `lag` samples on `op`, starting at rest; the array itself for lag 0. */
export function lagged(op: Float64Array, lag: number): Float64Array {
  if (lag <= 0) return op;
  const pole = poleOf(lag);
  const out = new Float64Array(op.length);
  let state = op[0];
  for (let k = 0; k < op.length; k++) {
    state = pole * state + (1 - pole) * op[k];
    out[k] = state;
  }
  return out;
}

/** Fit of the gain of `travel` (%) to the target, lags and dead time given, in samples. */
export function fitGain(
  travel: Float64Array,
  target: Target,
  process: PlainProcess,
  settings: ProcessSettings,
): ProcessFit {
  const { lag, secondLag, delay } = process;
  const x = filterTravel(travel, process, target.theta, settings.integrating, target.room);
  let dot = 0;
  let energy = 0;
  for (let k = 0; k < x.length; k++) {
    dot += x[k] * target.values[k];
    energy += x[k] * x[k];
  }
  if (!(energy > 1e-12) || dot <= 0) return { lag, secondLag, delay, misfit: 1, gain: 0 };
  const gain = Math.min(Math.max(dot / energy, settings.gainLow), settings.gainHigh);
  return { lag, secondLag, delay, misfit: 1 - (gain * (2 * dot - gain * energy)) / target.power, gain };
}

/** Steps in lag, second lag and dead time, in units of their step sizes; the last ones keep the sum of the three. */
const directions: readonly (readonly [number, number, number])[] = [
  [1, 0, 0],
  [-1, 0, 0],
  [0, 1, 0],
  [0, -1, 0],
  [0, 0, 1],
  [0, 0, -1],
  [1, 0, -1],
  [-1, 0, 1],
  [0, 1, -1],
  [0, -1, 1],
];

/** A change of the process that makes the misfit smaller by no more than this is not followed up. */
const leastGain = 1e-5;

/** Refines lags and dead time for a fixed travel by a pattern that shrinks `rounds` times, from `start`. */
export function fitProcess(
  travel: Float64Array,
  target: Target,
  start: PlainProcess,
  settings: ProcessSettings,
  rounds: number = 4,
): ProcessFit {
  const longestDelay = Math.max(2, settings.period / 6);
  const free = settings.deadTime === null;
  let best = fitGain(travel, target, start, settings);
  let lagStep = Math.max(0.3, 0.25 * start.lag);
  let delayStep = 0.5;
  for (let round = 0; round < rounds; round++) {
    for (let moved = true, turns = 0; moved && turns < 6; turns++) {
      moved = false;
      for (const [byLag, bySecond, byDelay] of directions) {
        if (byDelay !== 0 && !free) continue;
        const next = {
          lag: Math.max(0, best.lag + byLag * lagStep),
          secondLag: Math.max(0, best.secondLag + bySecond * delayStep),
          delay: Math.min(Math.max(1, best.delay + byDelay * delayStep), longestDelay),
        };
        if (next.secondLag > next.lag) continue;
        if (next.lag === best.lag && next.secondLag === best.secondLag && next.delay === best.delay) continue;
        const there = fitGain(travel, target, next, settings);
        if (there.misfit < best.misfit - leastGain) {
          best = there;
          moved = true;
        }
      }
    }
    lagStep /= 2;
    delayStep /= 2;
  }
  return best;
}

/** PV less the travel's part in it. */
export function residualOf(
  pv: Float64Array,
  travel: Float64Array,
  found: PlainProcess & { readonly gain: number },
  settings: ProcessSettings,
): Float64Array {
  const part = simulateProcess(travel, found, settings.integrating);
  const gain = settings.sign * found.gain;
  return pv.map((value, k) => value - gain * part[k]) as Float64Array;
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

/** Range of `values` without the outermost half per cent at both ends. */
export function swingOf(values: Float64Array): number {
  const sorted = Float64Array.from(values).sort();
  const cut = Math.floor(sorted.length * 0.005);
  return sorted[sorted.length - 1 - cut] - sorted[cut];
}
