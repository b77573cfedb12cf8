/**
 * How the data choose between a sticking valve, a valve with dead band only (J = 0), and a straight line from OP
 * to travel: one-step prediction errors of PV under each, compared block by block.
 *
 * A valve model that is right wins in most blocks; one that fits by chance wins in some. A coherent line in OP, as
 * an outside sine makes it, can fake valve evidence: the test is then made again with that line and its
 * harmonics taken out of prediction errors and regressors alike.
 */
import { createTravelPieces, travelFromPieces, walkTwoParameter } from '../valve/two-parameter';
import { filterTravel, whiten } from './objective';
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
import { processGrid, reversalTolerance } from './search';
import type { ValveTest } from './stiction-fit';

const blocks = 16;
const harmonics = 5;
/** Share of the power around the cycle that one steady sine must hold for OP to carry a coherent line. Own choice. */
export const coherentShare = 0.9;

interface Explanation {
  /** Travel through process, both filtered; and PV filtered. */
  readonly part: Float64Array;
  readonly target: Float64Array;
}

export function testValve(
  pv: Float64Array,
  op: Float64Array,
  found: Reconstruction,
  settings: ProcessSettings,
  line: { readonly frequency: number; readonly coherent: boolean },
): ValveTest {
  const valve = explanation(pv, found.travel, found, settings);
  const straight = bestExplanation(pv, [lagged(op, found.actuatorLag)], found, settings);
  const deadBands = [0.7, 0.85, 0.93, 1, 1.07].map((share) => deadBandTravel(op, found, share * found.S));
  const deadBand = bestExplanation(pv, deadBands, found, settings);
  const valveLog = blockLogs(valve);
  const overLine = compare(valveLog, blockLogs(straight), pv.length);
  const overDeadBand = compare(valveLog, blockLogs(deadBand), pv.length);
  let tWithoutLine: number | null = null;
  if (line.coherent) {
    const basis = lineBasis(pv.length, line.frequency);
    const without = compare(
      blockLogs(withoutLine(valve, basis)),
      blockLogs(withoutLine(straight, basis)),
      pv.length,
    );
    tWithoutLine = without.t;
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

function deadBandTravel(op: Float64Array, found: Reconstruction, S: number): Float64Array {
  const u = lagged(op, found.actuatorLag);
  const pieces = createTravelPieces(op.length);
  walkTwoParameter(u, S, 0, true, reversalTolerance * S, 0, u[0], pieces);
  const travel = new Float64Array(op.length);
  travelFromPieces(pieces, u, travel);
  return travel;
}

function explanation(
  pv: Float64Array,
  travel: Float64Array,
  found: { lag: number; delay: number; theta: number },
  settings: ProcessSettings,
): Explanation {
  return {
    part: filterTravel(travel, found, found.theta, settings.integrating),
    target: whiten(pv, found.theta, settings.integrating),
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
      let start = fitGain(travel, target, found.lag, found.delay, settings);
      for (let i = 0; i < grid.lags.length; i += 3) {
        for (let d = 0; d < grid.delays.length; d += 3) {
          const there = fitGain(travel, target, grid.lags[i], grid.delays[d], settings);
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

/** Log of the mean squared prediction error in each block, the gain fitted over the whole record. */
function blockLogs({ part, target }: Explanation): Float64Array {
  let dot = 0;
  let energy = 0;
  for (let k = 0; k < part.length; k++) {
    dot += part[k] * target[k];
    energy += part[k] * part[k];
  }
  const gain = energy > 0 ? dot / energy : 0;
  const logs = new Float64Array(blocks);
  for (let b = 0; b < blocks; b++) {
    const from = Math.floor((b * part.length) / blocks);
    const to = Math.floor(((b + 1) * part.length) / blocks);
    let sum = 0;
    for (let k = from; k < to; k++) sum += (target[k] - gain * part[k]) ** 2;
    logs[b] = Math.log(Math.max(sum / Math.max(1, to - from), 1e-300));
  }
  return logs;
}

function compare(
  valve: Float64Array,
  other: Float64Array,
  samples: number,
): { sum: number; t: number; wins: number } {
  const perBlock = samples / blocks / 2;
  let sum = 0;
  let square = 0;
  let wins = 0;
  for (let b = 0; b < blocks; b++) {
    const gained = perBlock * (other[b] - valve[b]);
    sum += gained;
    square += gained * gained;
    if (gained > 0) wins++;
  }
  const average = sum / blocks;
  const spread = Math.sqrt(Math.max(0, square / blocks - average * average) / (blocks - 1));
  const t = spread > 0 ? average / spread : 0;
  return { sum, t, wins };
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

function withoutLine({ part, target }: Explanation, basis: readonly Float64Array[]): Explanation {
  const clean = { part: Float64Array.from(part), target: Float64Array.from(target) };
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
