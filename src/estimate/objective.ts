/**
 * How well a valve explains PV: travel through a linear process against PV, under a disturbance of drift plus
 * white noise.
 *
 * Process: first-order lag and dead time (integrating: the same behind an integrator). Disturbance: IMA(1,1),
 * so both sides are filtered by H = (1 - B)/(1 - theta B); an integrating process takes H twice, which also
 * removes its integrator. The misfit is the residual's power over that of the filtered PV, 1 = nothing explained.
 *
 * The search tries thousands of travels against every lag and dead time. Two facts make that cheap:
 * the dot product of a filtered, delayed travel with PV equals that of the travel's *moves* with PV filtered
 * backwards, once per lag; and a travel of few pieces needs only the ends of its pieces, given running sums
 * over OP. See {@link misfitOfPieces}. {@link simulateProcess} is the plain sample-by-sample form.
 */
import type { TravelPieces } from '../valve/two-parameter';

export interface ObjectiveOptions {
  /** Coefficient of the disturbance filter, 0..1. 0: random walk; near 1: white noise about a slow drift. */
  readonly theta: number;
  readonly integrating: boolean;
  /** Lags to try, in samples, each >= 0. */
  readonly lags: readonly number[];
  /** Dead times to try, in samples, whole, each >= 1. */
  readonly delays: readonly number[];
  /** Sign of the process gain. */
  readonly sign: 1 | -1;
  /** Bounds of the size of the process gain, PV units per % (per % and sample when integrating). */
  readonly gainLow: number;
  readonly gainHigh: number;
}

/** Everything that depends on PV, OP, lags and dead times but not on the valve; made once per search. */
export interface Objective {
  readonly samples: number;
  readonly options: ObjectiveOptions;
  /** Filtered PV and its power. */
  readonly target: Float64Array;
  readonly power: number;
  readonly perLag: readonly LagTables[];
}

interface LagTables {
  readonly poles: number[];
  readonly weights: number[];
  /** powers[i][n] = poles[i]^n */
  readonly powers: Float64Array[];
  /** gap[i][l] = 1/(1 - p_i p_l), the sum of an endless decay. */
  readonly gap: number[][];
  /** PV filtered backwards. */
  readonly back: Float64Array;
  /** slideSum[k * delays + d] = sum over m <= k of (OP move at m) * back[m + delay d]. */
  readonly slideSum: Float64Array;
  /** Per pole: response to OP's moves from rest. */
  readonly response: Float64Array[];
  /** Running sum of the whole response squared, up to and including k. */
  readonly responsePower: Float64Array;
  /** Per pole: sum over k >= s of response[k] * pole^(k - s). */
  readonly responseAhead: Float64Array[];
}

/** Best misfit of one travel in each band of dead times, with the lag and dead time (by index) and gain that give it. */
export interface BandMisfits {
  readonly misfit: Float64Array;
  readonly lagIndex: Int32Array;
  readonly delayIndex: Int32Array;
  readonly gain: Float64Array;
}

export function createBandMisfits(bands: number): BandMisfits {
  return {
    misfit: new Float64Array(bands),
    lagIndex: new Int32Array(bands),
    delayIndex: new Int32Array(bands),
    gain: new Float64Array(bands),
  };
}

/** H once (self-regulating) or twice (integrating) on `values`; the first sample of each pass is 0. */
export function whiten(values: Float64Array, theta: number, integrating: boolean): Float64Array {
  const once = differenceAndSmooth(values, theta);
  return integrating ? differenceAndSmooth(once, secondTheta(theta)) : once;
}

function differenceAndSmooth(values: Float64Array, theta: number): Float64Array {
  const out = new Float64Array(values.length);
  for (let k = 1; k < values.length; k++) out[k] = values[k] - values[k - 1] + theta * out[k - 1];
  return out;
}

/** The second disturbance pole differs a little from the first, so that partial fractions exist. */
export function secondTheta(theta: number): number {
  return 0.94 * theta;
}

/** Poles of travel move -> filtered PV, kept apart by at least 1e-3. */
function polesFor(lag: number, theta: number, integrating: boolean): number[] {
  const lagPole = poleOf(lag);
  const others = integrating ? [theta, secondTheta(theta)] : [theta];
  let pole = lagPole;
  while (others.some((other) => Math.abs(other - pole) < 1e-3)) pole += 2.1e-3;
  return [Math.min(pole, 0.99999), ...others];
}

/** Weights of the partial fractions of (1 - lag pole) / prod(1 - p_i B), so that the response is sum w_i p_i^n. */
function partialFractions(poles: readonly number[]): number[] {
  const gain = 1 - poles[0];
  return poles.map((pole, i) => {
    let weight = gain;
    poles.forEach((other, l) => {
      if (l !== i) weight *= pole / (pole - other);
    });
    return weight;
  });
}

export function createObjective(pv: Float64Array, op: Float64Array, options: ObjectiveOptions): Objective {
  const { theta, integrating, lags, delays, sign } = options;
  const samples = pv.length;
  const target = whiten(pv, theta, integrating);
  for (let k = 0; k < samples; k++) target[k] *= sign;
  let power = 0;
  for (let k = 0; k < samples; k++) power += target[k] * target[k];
  const perLag = lags.map((lag) => tablesForLag(polesFor(lag, theta, integrating), target, op, delays));
  return { samples, options, target, power, perLag };
}

function tablesForLag(
  poles: number[],
  target: Float64Array,
  op: Float64Array,
  delays: readonly number[],
): LagTables {
  const samples = target.length;
  const weights = partialFractions(poles);
  const powers = poles.map((pole) => {
    const table = new Float64Array(samples + 1);
    table[0] = 1;
    for (let n = 1; n <= samples; n++) table[n] = table[n - 1] * pole;
    return table;
  });
  const gap = poles.map((p) => poles.map((q) => 1 / (1 - p * q)));

  const back = new Float64Array(samples);
  const state = poles.map(() => 0);
  for (let k = samples - 1; k >= 0; k--) {
    let sum = 0;
    for (let i = 0; i < poles.length; i++) {
      state[i] = poles[i] * state[i] + target[k];
      sum += weights[i] * state[i];
    }
    back[k] = sum;
  }

  const columns = delays.length;
  const slideSum = new Float64Array(samples * columns);
  for (let k = 1; k < samples; k++) {
    const move = op[k] - op[k - 1];
    for (let d = 0; d < columns; d++) {
      const at = k + delays[d];
      slideSum[k * columns + d] = slideSum[(k - 1) * columns + d] + (at < samples ? move * back[at] : 0);
    }
  }

  const response = poles.map(() => new Float64Array(samples));
  const responsePower = new Float64Array(samples);
  const whole = new Float64Array(samples);
  for (let k = 1; k < samples; k++) {
    const move = op[k] - op[k - 1];
    let sum = 0;
    for (let i = 0; i < poles.length; i++) {
      response[i][k] = poles[i] * response[i][k - 1] + move;
      sum += weights[i] * response[i][k];
    }
    whole[k] = sum;
    responsePower[k] = responsePower[k - 1] + sum * sum;
  }
  const responseAhead = poles.map((pole) => {
    const table = new Float64Array(samples + 1);
    for (let k = samples - 1; k >= 0; k--) table[k] = whole[k] + pole * table[k + 1];
    return table;
  });
  return { poles, weights, powers, gap, back, slideSum, response, responsePower, responseAhead };
}

/** Room for the per-candidate sums, so that the inner loop allocates nothing. */
export interface Scratch {
  readonly dot: Float64Array;
  readonly state: Float64Array;
}

export function createScratch(delays: number): Scratch {
  return { dot: new Float64Array(delays), state: new Float64Array(3) };
}

/**
 * Best misfit of a travel given as pieces, over the lags `useLags` (indices) and all dead times, for each band of
 * dead times: `bandOf[d]` is the band of dead time d. `op` is the OP that the objective was made with. The answers
 * are written into `best`; 1 where nothing is explained.
 */
export function misfitOfPieces(
  objective: Objective,
  pieces: TravelPieces,
  op: Float64Array,
  useLags: readonly number[],
  bandOf: readonly number[],
  scratch: Scratch,
  best: BandMisfits,
): void {
  const { samples, power, options } = objective;
  const { delays, gainLow, gainHigh } = options;
  const columns = delays.length;
  const { dot } = scratch;
  best.misfit.fill(1);
  best.gain.fill(0);
  for (const lagIndex of useLags) {
    const tables = objective.perLag[lagIndex];
    dot.fill(0);
    const energy = walkPieces(tables, pieces, op, delays, samples, scratch);
    if (!(energy > 1e-12)) continue;
    for (let d = 0; d < columns; d++) {
      if (dot[d] <= 0) continue;
      const gain = Math.min(Math.max(dot[d] / energy, gainLow), gainHigh);
      const misfit = 1 - (gain * (2 * dot[d] - gain * energy)) / power;
      const band = bandOf[d];
      if (misfit < best.misfit[band]) {
        best.misfit[band] = misfit;
        best.lagIndex[band] = lagIndex;
        best.delayIndex[band] = d;
        best.gain[band] = gain;
      }
    }
  }
}

/** Adds the dot products of all pieces to `scratch.dot` and returns the power of the filtered travel. */
function walkPieces(
  tables: LagTables,
  pieces: TravelPieces,
  op: Float64Array,
  delays: readonly number[],
  samples: number,
  scratch: Scratch,
): number {
  const { poles, weights, powers, gap, back, slideSum, response, responsePower, responseAhead } = tables;
  const { dot, state } = scratch;
  const order = poles.length;
  const columns = delays.length;
  const { from, slope, offset, count } = pieces;
  let energy = 0;
  let travel = slope[0] === 0 ? offset[0] : op[0] + offset[0];
  for (let i = 0; i < order; i++) state[i] = 0;
  for (let piece = 0; piece < count; piece++) {
    const start = from[piece];
    const end = piece + 1 < count ? from[piece + 1] : samples;
    const sliding = slope[piece] === 1;
    const landing = sliding ? op[start] + offset[piece] : offset[piece];
    const jump = landing - travel;
    if (jump !== 0) {
      for (let d = 0; d < columns; d++) {
        const at = start + delays[d];
        if (at < samples) dot[d] += jump * back[at];
      }
    }
    const length = end - start;
    if (sliding) {
      if (length > 1) {
        const top = (end - 1) * columns;
        const bottom = start * columns;
        for (let d = 0; d < columns; d++) dot[d] += slideSum[top + d] - slideSum[bottom + d];
      }
      energy += responsePower[end - 1] - (start > 0 ? responsePower[start - 1] : 0);
      for (let i = 0; i < order; i++) {
        const difference = (start > 0 ? state[i] : 0) + jump - response[i][start];
        const ahead = responseAhead[i];
        energy += 2 * weights[i] * difference * (ahead[start] - powers[i][length] * ahead[end]);
        state[i] = difference;
      }
    } else {
      for (let i = 0; i < order; i++) state[i] += jump;
    }
    for (let i = 0; i < order; i++) {
      const left = weights[i] * state[i];
      const decay = powers[i][length];
      energy += left * left * (1 - decay * decay) * gap[i][i];
      for (let l = 0; l < i; l++) {
        energy += 2 * left * weights[l] * state[l] * (1 - decay * powers[l][length]) * gap[i][l];
      }
    }
    if (sliding) {
      travel = op[end - 1] + offset[piece];
      for (let i = 0; i < order; i++) {
        state[i] = poles[i] * (response[i][end - 1] + state[i] * powers[i][length - 1]);
      }
    } else {
      travel = landing;
      for (let i = 0; i < order; i++) state[i] *= powers[i][length];
    }
  }
  return energy;
}

/** A process in the plain form, in samples: two lags in a row (each >= 0), dead time (any, >= 1; between whole ones shared). */
export interface PlainProcess {
  readonly lag: number;
  readonly secondLag: number;
  readonly delay: number;
}

export function poleOf(lag: number): number {
  return lag <= 0 ? 0 : Math.exp(-1 / lag);
}

/**
 * Travel through the process and the disturbance filter, gain 1 (per sample when integrating). Written into `out`, as
 * long as `travel`, where one is given.
 */
export function filterTravel(
  travel: Float64Array,
  process: PlainProcess,
  theta: number,
  integrating: boolean,
  out: Float64Array = new Float64Array(travel.length),
): Float64Array {
  const samples = travel.length;
  const whole = Math.floor(process.delay);
  const part = process.delay - whole;
  out.fill(0, 0, whole + 1);
  const first = poleOf(process.lag);
  const second = poleOf(process.secondLag);
  const again = integrating ? secondTheta(theta) : 0;
  let before = 0;
  let w = 0;
  let x = 0;
  let y = 0;
  let z = 0;
  for (let k = whole + 1; k < samples; k++) {
    const m = k - whole;
    const now = travel[m] - travel[m - 1];
    w = second * w + (1 - second) * ((1 - part) * now + part * before);
    x = first * x + (1 - first) * w;
    y = theta * y + x;
    z = again * z + y;
    out[k] = z;
    before = now;
  }
  return out;
}

/** Travel through the process alone, gain 1 (per sample when integrating), starting from rest at its first value. */
export function simulateProcess(
  travel: Float64Array,
  process: PlainProcess,
  integrating: boolean,
): Float64Array {
  const samples = travel.length;
  const whole = Math.floor(process.delay);
  const part = process.delay - whole;
  const first = poleOf(process.lag);
  const second = poleOf(process.secondLag);
  const out = new Float64Array(samples);
  let before = 0;
  let w = 0;
  let x = 0;
  let sum = 0;
  for (let k = 0; k < samples; k++) {
    const m = k - whole;
    const now = m > 0 ? travel[m] - travel[0] : 0;
    w = second * w + (1 - second) * ((1 - part) * now + part * before);
    x = first * x + (1 - first) * w;
    sum += x;
    out[k] = integrating ? sum : x;
    before = now;
  }
  return out;
}
