/**
 * How the data choose between a sticking valve, a valve with dead band only (J = 0), and a straight line from OP
 * to travel: one-step prediction errors of PV under each, compared block by block.
 *
 * A valve model that is right wins in most blocks; one that fits by chance wins in some. A coherent line in OP, as
 * an outside sine makes it, can fake valve evidence: the test is then made again with that line and its
 * harmonics taken out of prediction errors and regressors alike.
 */
import { twoParameterValve, type ValveModel } from '../valve/two-parameter';
import { filterTravel, type PlainProcess, whiten } from './objective';
import { openingOf, restingTravel } from './opening';
import {
  bestTheta,
  createTarget,
  fitGain,
  fitProcess,
  lagged,
  type ProcessSettings,
  residualOf,
} from './process-fit';
import type { Reconstruction } from './reconstruct-travel';
import { processGrid } from './search';
import type { ValveTest } from './stiction-fit';

const blocks = 16;
const harmonics = 5;
/** Second lags, samples, with which the straight line may explain PV, so that the valve does not win as mere lag. */
const secondLags: readonly number[] = [0, 1.5, 4, 10, 25];
/** Share of the power around the cycle that one steady sine must hold for OP to carry a coherent line. Own choice. */
export const coherentShare = 0.9;

interface Explanation {
  /** Travel through process, both filtered; and PV filtered. */
  readonly part: Float64Array;
  readonly target: Float64Array;
  /** Price of the liberties taken with the travel, in units of log likelihood. */
  readonly price: number;
}

export function testValve(
  pv: Float64Array,
  op: Float64Array,
  found: Reconstruction,
  settings: ProcessSettings,
  line: { readonly frequency: number; readonly coherent: boolean },
): ValveTest {
  const u = lagged(op, found.actuatorLag);
  const opening = openingOf(u, settings.period);
  const element = (S: number, J: number, model: ValveModel): Float64Array =>
    twoParameterValve(u, { S, J, model, start: restingTravel(opening, S, J) });
  const followed = { ...explanation(pv, found.travel, found, settings), price: found.penalty };
  const jumping = bestExplanation(
    pv,
    [element(found.S, found.J, 'slides-on'), element(found.S, found.J, 'sticks-again')],
    found,
    settings,
  );
  const straight = bestExplanation(
    pv,
    secondLags.map((lag) => lagged(u, lag)),
    found,
    settings,
  );
  const deadBands = [0.7, 0.85, 0.93, 1, 1.07].map((share) => element(share * found.S, 0, 'slides-on'));
  const deadBand = bestExplanation(pv, deadBands, found, settings);
  const sticking = better(followed, jumping);
  const valve = better(sticking, deadBand);
  const overLine = compare(valve, straight);
  const overDeadBand = compare(sticking, deadBand);
  let tWithoutLine: number | null = null;
  if (line.coherent) {
    const basis = lineBasis(pv.length, line.frequency);
    tWithoutLine = compare(withoutLine(valve, basis), withoutLine(straight, basis)).t;
  }
  return {
    blocks,
    blocksForValve: overLine.wins,
    gainOverLine: overLine.sum,
    tOverLine: overLine.t,
    gainOverDeadBand: overDeadBand.sum,
    tOverDeadBand: overDeadBand.t,
    tWithoutLine,
  };
}

function explanation(
  pv: Float64Array,
  travel: Float64Array,
  found: PlainProcess & { readonly theta: number },
  settings: ProcessSettings,
): Explanation {
  return {
    part: filterTravel(travel, found, found.theta, settings.integrating),
    target: whiten(pv, found.theta, settings.integrating),
    price: 0,
  };
}

/** The best of several travels, each with its own process and disturbance filter. */
function bestExplanation(
  pv: Float64Array,
  travels: readonly Float64Array[],
  found: Reconstruction,
  settings: ProcessSettings,
): Explanation {
  const grid = processGrid(settings);
  let best: Explanation | null = null;
  let least = Number.POSITIVE_INFINITY;
  for (const travel of travels) {
    let theta = found.theta;
    for (let pass = 0; pass < 2; pass++) {
      const target = createTarget(pv, theta, settings);
      let start = fitGain(travel, target, found, settings);
      for (let i = 0; i < grid.lags.length; i += 3) {
        for (let d = 0; d < grid.delays.length; d += 3) {
          const there = fitGain(
            travel,
            target,
            { lag: grid.lags[i], secondLag: 0, delay: grid.delays[d] },
            settings,
          );
          if (there.misfit < start.misfit) start = there;
        }
      }
      const refined = fitProcess(travel, target, start, settings);
      const innovations = refined.misfit * target.power;
      if (innovations < least) {
        least = innovations;
        best = explanation(pv, travel, { ...refined, theta }, settings);
      }
      const next = bestTheta(residualOf(pv, travel, refined, settings), settings.integrating);
      if (next === theta) break;
      theta = next;
    }
  }
  return best!;
}

/** Prediction errors with the gain fitted over the whole record. */
function errorsOf({ part, target }: Explanation): Float64Array {
  let dot = 0;
  let energy = 0;
  for (let k = 0; k < part.length; k++) {
    dot += part[k] * target[k];
    energy += part[k] * part[k];
  }
  const gain = energy > 0 ? dot / energy : 0;
  return target.map((value, k) => value - gain * part[k]) as Float64Array;
}

/** Negative log likelihood of the whole record, its liberties paid for. */
function priceOf(explanation: Explanation): number {
  const errors = errorsOf(explanation);
  const power = errors.reduce((sum, error) => sum + error * error, 0);
  return (errors.length / 2) * Math.log(power / errors.length) + explanation.price;
}

function better(one: Explanation, other: Explanation): Explanation {
  return priceOf(one) <= priceOf(other) ? one : other;
}

/** Log likelihood gained by `valve` over `other` in each block: sum, t over blocks, and blocks won. */
function compare(valve: Explanation, other: Explanation): { sum: number; t: number; wins: number } {
  const mine = errorsOf(valve);
  const theirs = errorsOf(other);
  const paid = (valve.price - other.price) / blocks;
  let sum = 0;
  let square = 0;
  let wins = 0;
  for (let b = 0; b < blocks; b++) {
    const from = Math.floor((b * mine.length) / blocks);
    const to = Math.floor(((b + 1) * mine.length) / blocks);
    let myPower = 1e-300;
    let theirPower = 1e-300;
    for (let k = from; k < to; k++) {
      myPower += mine[k] * mine[k];
      theirPower += theirs[k] * theirs[k];
    }
    const gained = ((to - from) / 2) * Math.log(theirPower / myPower) - paid;
    sum += gained;
    square += gained * gained;
    if (gained > 0) wins++;
  }
  const average = sum / blocks;
  const spread = Math.sqrt(Math.max(0, square / blocks - average * average) / (blocks - 1));
  return { sum, t: spread > 0 ? average / spread : 0, wins };
}

/** Orthonormal sines and cosines of a line and its harmonics over a record of `samples` samples. */
function lineBasis(samples: number, frequency: number): Float64Array[] {
  const basis: Float64Array[] = [];
  for (let h = 1; h <= harmonics; h++) {
    if (h * frequency >= 0.5) break;
    for (const shift of [0, Math.PI / 2]) {
      const wave = new Float64Array(samples);
      for (let k = 0; k < samples; k++) wave[k] = Math.cos(2 * Math.PI * h * frequency * k + shift);
      for (const earlier of basis) subtract(wave, earlier);
      const size = Math.sqrt(wave.reduce((sum, value) => sum + value * value, 0));
      if (size < 1e-9) continue;
      basis.push(wave.map((value) => value / size) as Float64Array);
    }
  }
  return basis;
}

function subtract(values: Float64Array, direction: Float64Array): void {
  let dot = 0;
  for (let k = 0; k < values.length; k++) dot += values[k] * direction[k];
  for (let k = 0; k < values.length; k++) values[k] -= dot * direction[k];
}

function withoutLine(from: Explanation, basis: readonly Float64Array[]): Explanation {
  const clean = { ...from, part: from.part.slice(), target: from.target.slice() };
  for (const wave of basis) {
    subtract(clean.part, wave);
    subtract(clean.target, wave);
  }
  return clean;
}

/**
 * The steady sine that holds most of OP's power near its cycle, and whether it holds nearly all of it.
 * `period` in samples; the frequency given back is per sample.
 */
export function findLine(
  op: Float64Array,
  period: number,
): { frequency: number; share: number; coherent: boolean } {
  const samples = op.length;
  const width = 1 / samples;
  const centre = 1 / period;
  let best = { frequency: centre, power: 0 };
  const mean = op.reduce((sum, value) => sum + value, 0) / samples;
  const powerAt = (frequency: number): number => {
    let re = 0;
    let im = 0;
    for (let k = 0; k < samples; k++) {
      const angle = 2 * Math.PI * frequency * k;
      const taper = 0.5 - 0.5 * Math.cos((2 * Math.PI * (k + 0.5)) / samples);
      re += taper * (op[k] - mean) * Math.cos(angle);
      im += taper * (op[k] - mean) * Math.sin(angle);
    }
    return re * re + im * im;
  };
  let around = 0;
  const low = Math.floor((0.7 * centre) / width);
  const high = Math.ceil((1.35 * centre) / width);
  const powers: number[] = [];
  for (let bin = low; bin <= high; bin++) powers.push(powerAt(bin * width));
  powers.forEach((power, i) => {
    around += power;
    if (power > best.power) best = { frequency: (low + i) * width, power };
  });
  for (let step = width / 2; step > width / 40; step /= 2) {
    for (const frequency of [best.frequency - step, best.frequency + step]) {
      const power = powerAt(frequency);
      if (power > best.power) best = { frequency, power };
    }
  }
  let line = 0;
  const centreBin = best.frequency / width;
  powers.forEach((power, i) => {
    if (Math.abs(low + i - centreBin) <= 1.6) line += power;
  });
  const share = around > 0 ? Math.min(1, line / around) : 0;
  return { frequency: best.frequency, share, coherent: share >= coherentShare };
}
