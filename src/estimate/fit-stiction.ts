/**
 * Dead band and slip jump of the valve in a loop, with intervals, or the reasons why there are no numbers.
 *
 * With measured travel the element is fitted to it directly. Without, stage 1 (`reconstruct-travel.ts`) finds the
 * travel behind OP and PV, and stage 2 (`describe-travel.ts`) fits the element to the reconstruction.
 */
import { refuseUnknownOptions, WrongUse } from '../errors';
import { findCycle } from '../oscillation/find-cycle';
import { findRhythm } from '../oscillation/rhythm';
import { type ControllerReading, readController } from '../process/read-controller';
import { checkRecord } from '../record/check-record';
import type { Fitness } from '../record/fitness';
import type { LoopRecord, Note, Response } from '../record/loop-record';
import { mean, noiseLevel } from '../signal/statistics';
import { twoParameterValve } from '../valve/two-parameter';
import { describeTravel } from './describe-travel';
import {
  type Alternative,
  type Intervals,
  intervalsOf,
  type PartFit,
  recordParts,
  roomBeyondS,
} from './interval';
import { misfitMap } from './misfit-map';
import { type ProcessSettings, residualOf, swingOf } from './process-fit';
import { followPart, type Reconstruction, reconstructTravel } from './reconstruct-travel';
import type { Slip, StictionFit, StictionResult, ValveTest } from './stiction-fit';
import { findLine, testValve } from './valve-test';
import { busiestWindow } from './window';

export interface FitOptions {
  /** How the PV answers the valve. Default: the record's. With `unknown` both are tried and the better one is told. */
  readonly response?: Response;
  /** Dead time between travel and PV, s, when it is known. Default null: fitted. */
  readonly deadTime?: number | null;
  /** Process gain, PV units per % of OP (integrating: per % and second), when it is known. Default null: fitted. */
  readonly processGain?: number | null;
  /** Fitness of the record when already checked. Default: {@link checkRecord}. */
  readonly fitness?: Fitness;
  /** Period of the cycle in OP, s, when already found. Default: that of {@link findCycle}, else of {@link findRhythm}, on OP. */
  readonly period?: number | null;
  /** Controller as read from the record. Default: {@link readController}. */
  readonly controller?: ControllerReading | null;
}

/** How far a stated process gain may be off; an operator's figure is seldom nearer. Own choice. */
const statedGainTolerance = 0.15;
/** Share of OP's moves that a controller reading must explain to be used. Own choice. */
const trustedController = 0.6;
/** Spread of J, as a share of S, and room of OP beyond S, from which J is not resolved. Own choice, set on simulated loops. */
const widestSpread = 0.25;
const leastRoom = 0.2;
const fewestReversals = 10;
const leastExplained = 0.5;
/** Least t over blocks of valve against straight line for numbers to be given. Own choice. */
const leastT = 1.5;
/** Refused when S is this close to the whole OP swing and, with the steady line out, t stays below `clearT`. */
const nearSwing = 0.9;
const clearT = 4;

/**
 * Fits the two-parameter valve model to a loop record.
 *
 * @throws WrongUse for an unknown option, or a stated dead time or gain that is not above 0.
 */
export function fitStiction(record: LoopRecord, options: FitOptions = {}): StictionResult {
  refuseUnknownOptions('fitStiction', options, [
    'response',
    'deadTime',
    'processGain',
    'fitness',
    'period',
    'controller',
  ]);
  const { deadTime = null, processGain = null } = options;
  if (deadTime !== null && !(deadTime >= 0)) {
    throw new WrongUse(`A stated dead time is in seconds and not below 0; received ${deadTime}.`);
  }
  if (processGain !== null && !(Math.abs(processGain) > 0)) {
    throw new WrongUse(`A stated process gain is PV units per % of OP and not 0; received ${processGain}.`);
  }
  const fitness = options.fitness ?? checkRecord(record);
  const period =
    options.period ??
    findCycle(record.op, record.samplePeriod).period ??
    findRhythm(record.op, record.samplePeriod).period;
  const controller =
    options.controller === undefined
      ? readController(record.sp, record.pv, record.op, record.samplePeriod)
      : options.controller;
  const refused = fitness.checks
    .filter((check) => !check.passed && check.forbids.includes('numbers'))
    .map((check) => check.text);
  const nothing: StictionResult = { fit: null, drawn: null, refused, test: null };
  if (period === null) {
    return {
      ...nothing,
      refused: [...refused, 'OP does not turn, so there are no reversals to read S and J from.'],
    };
  }
  if (!fitness.allows.cycle || !(swingOf(record.op) > 0)) return nothing;

  const responses: ('self-regulating' | 'integrating')[] =
    (options.response ?? record.response) === 'unknown'
      ? ['self-regulating', 'integrating']
      : [(options.response ?? record.response) as 'self-regulating' | 'integrating'];
  const notes: Note[] = [];
  let found: Found | null = null;
  for (const response of responses) {
    const settings = settingsFor(record, response === 'integrating', period, controller, options);
    const whole = reconstructWhole(record, settings);
    if (whole && (!found || whole.reconstruction.innovations < found.reconstruction.innovations))
      found = whole;
  }
  if (!found) {
    return {
      ...nothing,
      refused: [...refused, 'No move of a valve, early or late, large or small, explains any of PV.'],
    };
  }
  if (responses.length > 1) {
    const chosen = found.settings.integrating ? 'integrating' : 'self-regulating';
    notes.push({
      code: 'response-from-data',
      text: `The response was not stated; the data fit better as ${chosen}. State it with --response to be sure.`,
    });
  }
  const { reconstruction, settings } = found;
  const measured = record.travel !== null;
  const travel = record.travel ?? reconstruction.travel;
  const largest = swingOf(record.op);
  const description = describeTravel(record.op, travel, {
    near: measured ? null : reconstruction,
    largest: Math.max(largest, reconstruction.S) * 1.05,
  });
  const { S, J, model } = description;
  const parts = fitParts(record, found, travel, measured, { S, J }, largest);
  const room = roomBeyondS(record.op, S);
  const intervals = intervalsOf({ S, J }, parts, measured ? [] : found.alternatives, measured ? 1 : room);
  const line = findLine(record.op, period / record.samplePeriod);
  const test = testValve(record.pv, record.op, reconstruction, settings, line);

  const modelTravel = twoParameterValve(record.op, { S, J, model, start: travel[0] });
  const residual = residualOf(record.pv, travel, reconstruction, settings);
  const simulatedPv = simulated(record.pv, residual, period / record.samplePeriod);
  // OP of a sample acts until the next one, so PV answers a sample later even without dead time.
  const secondsOfDelay = Math.max(0, reconstruction.delay - 1) * record.samplePeriod;
  const unresolved = measured ? null : whyJIsNotResolved(intervals, room, processGain !== null);
  if (unresolved) notes.push({ code: 'jump-not-resolved', text: unresolved });
  if (!measured && deadTime === null) {
    notes.push({
      code: 'dead-time-fitted',
      text: `The dead time was fitted (${secondsOfDelay.toFixed(1)} s). A longer dead time with a smaller S fits nearly as well; state a known one with --dead-time.`,
    });
  }
  const fit: StictionFit = {
    model,
    travelSource: measured ? 'measured' : 'reconstructed',
    S: intervals.S,
    J: unresolved ? null : intervals.J,
    jumpDrawn: J,
    explains: description.explains,
    explainsPv: Math.max(0, 1 - reconstruction.misfit),
    notes,
    travel,
    modelTravel,
    simulatedPv,
    slips: slipsOf(travel, record.samplePeriod, J),
    map: misfitMap(record.pv, record.op, reconstruction, settings, largest, { S, J }),
    process: {
      response: settings.integrating ? 'integrating' : 'self-regulating',
      gain: (settings.sign * reconstruction.gain) / (settings.integrating ? record.samplePeriod : 1),
      lag: settings.integrating
        ? null
        : (reconstruction.lag + reconstruction.secondLag) * record.samplePeriod,
      deadTime: secondsOfDelay,
    },
  };
  refused.push(...whyNumbersAreRefused(record, fit, test, largest));
  return { fit: refused.length > 0 ? null : fit, drawn: fit, refused, test };
}

interface Found {
  readonly reconstruction: Reconstruction;
  readonly alternatives: readonly Alternative[];
  readonly settings: ProcessSettings;
}

/** Searches the busiest window of the record and follows the travel from there through all of it. */
function reconstructWhole({ pv, op }: LoopRecord, settings: ProcessSettings): Found | null {
  const { from, to } = busiestWindow(op);
  const all = reconstructTravel(pv.subarray(from, to), op.subarray(from, to), settings);
  if (all === null) return null;
  const [best] = all;
  return {
    reconstruction: to - from === op.length ? best : followPart(pv, op, best, settings),
    alternatives: all.map(({ S, J, price }) => ({ S, J, excess: price - best.price })),
    settings,
  };
}

function settingsFor(
  record: LoopRecord,
  integrating: boolean,
  period: number,
  controller: ControllerReading | null,
  { deadTime = null, processGain = null }: FitOptions,
): ProcessSettings {
  const { samplePeriod } = record;
  const stated = processGain === null ? null : Math.abs(processGain) * (integrating ? samplePeriod : 1);
  const trusted = controller !== null && controller.explains >= trustedController;
  return {
    integrating,
    sign: signOfGain(record, processGain, trusted ? controller : null),
    period: period / samplePeriod,
    deadTime: deadTime === null ? null : deadTime / samplePeriod + 1,
    gainLow: stated === null ? 0 : stated * (1 - statedGainTolerance),
    gainHigh: stated === null ? Number.POSITIVE_INFINITY : stated * (1 + statedGainTolerance),
    controller: trusted ? controller : null,
    samplePeriod,
  };
}

/**
 * Sign of the process gain: the stated one, else that of the controller, as feedback is negative; without a trusted
 * controller reading, whether OP moves with the error SP - PV or against it.
 */
function signOfGain(record: LoopRecord, stated: number | null, controller: ControllerReading | null): 1 | -1 {
  if (stated !== null) return stated > 0 ? 1 : -1;
  if (controller !== null) return controller.gain > 0 ? 1 : -1;
  const { pv, sp, op } = record;
  const error = pv.map((value, k) => (sp ? sp[k] : 0) - value);
  const middle = mean(error as Float64Array);
  let agree = 0;
  for (let k = 1; k < op.length; k++) agree += (op[k] - op[k - 1]) * (error[k] - middle);
  return agree >= 0 ? 1 : -1;
}

function fitParts(
  record: LoopRecord,
  found: Found,
  travel: Float64Array,
  measured: boolean,
  whole: PartFit,
  largest: number,
): PartFit[] {
  return recordParts(record.op.length).map(({ from, to }) => {
    const op = record.op.slice(from, to);
    const near = measured
      ? { ...whole, travel: travel.slice(from, to) }
      : followPart(record.pv.slice(from, to), op, found.reconstruction, found.settings);
    return describeTravel(op, near.travel, { near, largest: largest * 1.05 });
  });
}

/** The simulated PV with the slow part of the residual given back, so that drift does not hide the shape. */
function simulated(pv: Float64Array, residual: Float64Array, period: number): Float64Array {
  const window = Math.max(3, Math.round(period) | 1);
  const half = (window - 1) / 2;
  const sums = new Float64Array(residual.length + 1);
  for (let k = 0; k < residual.length; k++) sums[k + 1] = sums[k] + residual[k];
  return Float64Array.from(pv, (value, k) => {
    const from = Math.max(0, k - half);
    const to = Math.min(residual.length, k + half + 1);
    return value - residual[k] + (sums[to] - sums[from]) / (to - from);
  });
}

/** Moments at which the travel steps by more than a third of the jump (at least 0.02 %) within two samples. */
function slipsOf(travel: Float64Array, samplePeriod: number, J: number): Slip[] {
  const least = Math.max(0.35 * J, 0.02);
  const slips: Slip[] = [];
  for (let k = 1; k < travel.length; k++) {
    const step = travel[k] - travel[k - 1];
    if (Math.abs(step) < least) continue;
    const last = slips[slips.length - 1];
    if (last && k - last.sample <= 2 && Math.sign(last.size) === Math.sign(step)) {
      slips[slips.length - 1] = { ...last, size: last.size + step };
    } else {
      slips.push({ sample: k, time: k * samplePeriod, size: step });
    }
  }
  return slips;
}

function whyJIsNotResolved(
  { partsJ, alternativesJ }: Intervals,
  room: number,
  gainStated: boolean,
): string | null {
  const remedy =
    'A stated process gain (--process-gain), set-point steps in the record, or logged travel would resolve it.';
  if (partsJ > widestSpread) {
    return `Parts of the record give slip jumps that differ by ${(100 * partsJ).toFixed(0)} % of S, so J is not resolved. ${remedy}`;
  }
  if (alternativesJ > widestSpread) {
    return `Travels with slip jumps that differ by ${(100 * alternativesJ).toFixed(0)} % of S explain PV nearly as well, so J is not resolved. ${remedy}`;
  }
  if (room < leastRoom && !gainStated) {
    return `OP turns back right after each slip (it moves only ${(100 * room).toFixed(0)} % of S further), so PV shows the jump times the process gain and J is not resolved. ${remedy}`;
  }
  return null;
}

function whyNumbersAreRefused(
  record: LoopRecord,
  fit: StictionFit,
  test: ValveTest,
  largest: number,
): string[] {
  const reasons: string[] = [];
  const S = fit.S.value;
  const percent = (share: number): string => `${(100 * share).toFixed(0)} %`;
  if (fit.explains < leastExplained) {
    reasons.push(
      `The two-parameter valve explains ${percent(fit.explains)} of the travel; at least ${percent(leastExplained)} is asked for.`,
    );
  }
  const noise = noiseLevel(record.op);
  if (noise > S / 4) {
    reasons.push(
      `The noise on OP (${noise.toFixed(2)} %) is above a quarter of the fitted S (${S.toFixed(2)} %), so reversals cannot be told from noise.`,
    );
  }
  if (fit.slips.length < fewestReversals) {
    reasons.push(
      `Only ${fit.slips.length} slips of the valve can be seen; at least ${fewestReversals} are asked for.`,
    );
  }
  if (fit.travelSource === 'measured') return reasons;
  const t = Math.min(test.tOverLine, test.tWithoutLine ?? test.tOverLine);
  if (t < leastT) {
    reasons.push(
      `A straight line from OP to travel predicts PV about as well as a sticking valve (t = ${t.toFixed(1)} over ${test.blocks} blocks, at least ${leastT} is asked for), so this record holds no S and J to read.`,
    );
  } else if (test.tWithoutLine !== null && test.tWithoutLine < clearT && S > nearSwing * largest) {
    reasons.push(
      `The fitted S (${S.toFixed(1)} %) is nearly the whole swing of OP (${largest.toFixed(1)} %) and OP carries a steady line: an outside cycle many times larger than S gives the same picture.`,
    );
  }
  return reasons;
}
