/**
 * The loop as a record shows it, ready to be simulated: controller as read from SP, PV and OP; two-parameter valve;
 * linear process fitted to the travel of that valve; noise and drift of about the record's strength.
 */
import {
  bestTheta,
  createTarget,
  fitProcess,
  type ProcessSettings,
  residualOf,
} from '../estimate/process-fit';
import type { FoundProcess, StictionFit } from '../estimate/stiction-fit';
import { type LoopRun, simulateLoop } from '../process/closed-loop';
import type { ControllerOptions } from '../process/controller';
import type { Disturbance } from '../process/disturbance';
import type { LinearProcessOptions } from '../process/linear-process';
import type { ControllerReading } from '../process/read-controller';
import type { LoopRecord } from '../record/loop-record';
import { mean, median, noiseLevel } from '../signal/statistics';
import { twoParameterValve, type ValveModel } from '../valve/two-parameter';
import { createTwoParameterValve } from '../valve/two-parameter-steps';

export interface ValveNumbers {
  readonly model: ValveModel;
  /** % of OP span. */
  readonly S: number;
  readonly J: number;
}

export interface LoopModel {
  readonly valve: ValveNumbers;
  readonly process: LinearProcessOptions & {
    readonly response: 'self-regulating' | 'integrating';
    readonly gain: number;
    readonly lags: readonly number[];
    readonly deadTime: number;
  };
  readonly controller: ControllerOptions & {
    readonly form: 'P' | 'PI' | 'PID' | 'I';
    readonly gain: number;
    readonly integralTime: number;
  };
  readonly scanPeriod: number;
  /** Standard deviation of the measurement noise, PV units. */
  readonly noise: number;
  /** Random walk: what it gains in one second, PV units on PV, or % on the load of an integrating process. */
  readonly drift: number;
  readonly setPoint: number;
  /** Swing of PV in the record, PV units: the size of the push that starts a simulation. */
  readonly push: number;
}

/** Everything that the models of one record share. */
export interface ModelSource {
  readonly record: LoopRecord;
  readonly controller: ControllerReading;
  /** The fit of the assessment, with the process that goes with it. */
  readonly fit: StictionFit & { readonly process: FoundProcess };
  /** Period of the cycle in the record, s. */
  readonly period: number;
  readonly pvSwing: number;
}

/**
 * The loop with a valve of S and J: the process is fitted again to the travel that this valve makes of the record's OP.
 * null when no process goes with that travel.
 */
export function modelWith(source: ModelSource, valve: ValveNumbers): LoopModel | null {
  const { record, controller, fit, period } = source;
  const { process: found } = fit;
  const { response } = found;
  const { samplePeriod, pv, op } = record;
  const integrating = response === 'integrating';
  const settings: ProcessSettings = {
    integrating,
    sign: found.gain > 0 ? 1 : -1,
    period: period / samplePeriod,
    deadTime: null,
    gainLow: 0,
    gainHigh: Number.POSITIVE_INFINITY,
    controller,
    samplePeriod,
  };
  const travel = twoParameterValve(op, { ...valve, start: fit.travel[0] });
  const start = {
    lag: (found.lag ?? 0) / samplePeriod,
    secondLag: 0,
    delay: Math.max(1, found.deadTime / samplePeriod + 1),
  };
  const first = { ...start, gain: Math.abs(found.gain) * (integrating ? samplePeriod : 1) };
  const theta = bestTheta(residualOf(pv, travel, first, settings), integrating);
  const fitted = fitProcess(travel, createTarget(pv, theta, settings), start, settings);
  if (!(fitted.gain > 0)) return null;
  const residual = residualOf(pv, travel, fitted, settings);
  const lags = [fitted.lag * samplePeriod, fitted.secondLag * samplePeriod].filter(
    (lag) => lag > 1e-3 * samplePeriod,
  );
  const gain = (settings.sign * fitted.gain) / (integrating ? samplePeriod : 1);
  const level = Math.min(noiseLevel(pv), noiseLevel(residual));
  const drift = driftOf(residual, level, period / samplePeriod, samplePeriod, integrating);
  return {
    valve,
    process: {
      response,
      gain,
      lags: integrating && lags.length > 1 ? [lags[0]! + lags[1]!] : lags,
      deadTime: Math.max(0, (fitted.delay - 1) * samplePeriod),
      restInput: mean(travel),
      restOutput: mean(pv),
    },
    controller: controllerOf(controller, mean(op)),
    scanPeriod: controller.scanPeriod,
    // The steps of a walk on PV show in the noise level too: a third of their mean square (second differences).
    noise: integrating ? level : Math.sqrt(Math.max(0, level ** 2 - (drift ** 2 * samplePeriod) / 3)),
    drift: integrating ? drift / Math.abs(gain) : drift,
    setPoint: record.sp === null ? (controller.constantSetPoint ?? mean(pv)) : mean(record.sp),
    push: source.pvSwing,
  };
}

function controllerOf(reading: ControllerReading, bias: number): LoopModel['controller'] {
  return {
    form: reading.form,
    gain: Math.abs(reading.gain),
    integralTime: reading.integralTime ?? 60,
    derivativeTime: reading.derivativeTime === null ? 0 : Math.max(0, reading.derivativeTime),
    action: reading.gain > 0 ? 'reverse' : 'direct',
    low: reading.limits.low ?? 0,
    high: reading.limits.high ?? 100,
    bias,
  };
}

/** Median size of a standard normal. */
const normalMedian = 0.6745;

/**
 * Random walk behind the residual: means over whole cycles lose what is left of the cycle in it. The difference of
 * neighbouring means of a walk that gains s per square root of a second has the variance 2/3 s^2 T; the second
 * difference of those of its integral has 11/20 s^2 T^3 (T: length of a cycle, s).
 */
function driftOf(
  residual: Float64Array,
  noise: number,
  period: number,
  samplePeriod: number,
  integrating: boolean,
): number {
  const length = Math.max(1, Math.round(period));
  const count = Math.floor(residual.length / length);
  const means = Array.from({ length: count }, (_, i) =>
    mean(residual.subarray(i * length, (i + 1) * length)),
  );
  const once = means.slice(1).map((value, i) => value - means[i]!);
  const changes = integrating ? once.slice(1).map((value, i) => value - once[i]!) : once;
  if (changes.length < 3) return 0;
  const spread = median(Float64Array.from(changes, Math.abs)) / normalMedian;
  const ofNoise = ((integrating ? 6 : 2) * noise ** 2) / length;
  const square = Math.max(0, spread ** 2 - ofNoise);
  const T = length * samplePeriod;
  return Math.sqrt(square / (integrating ? (11 / 20) * T ** 3 : (2 / 3) * T));
}

export interface Change {
  /** Factors on the controller's gain and integral time. Default 1. */
  readonly gain?: number;
  readonly integralTime?: number;
  /** Another form of controller; with `P` nothing is integrated. Default: the model's. */
  readonly form?: 'P' | 'PI' | 'PID' | 'I';
  /** Errors up to this, PV units, are not integrated. Default 0. */
  readonly integralDeadBand?: number;
  /** Default: the model's. null: OP and travel are one. */
  readonly valve?: ValveNumbers | null;
}

/** Runs the model for `cycles` of length `period` s. */
export function runModel(
  model: LoopModel,
  change: Change,
  { period, cycles, seed }: { readonly period: number; readonly cycles: number; readonly seed: number },
): LoopRun {
  const { process, scanPeriod, controller, setPoint, push } = model;
  const { gain = 1, integralTime = 1, valve = model.valve, integralDeadBand = 0 } = change;
  const samples = Math.ceil((cycles * period) / scanPeriod);
  const runIn = 5 * period;
  const drift: Disturbance = { kind: 'random-walk', spread: model.drift, seed: seed + 1 };
  const integrating = process.response === 'integrating';
  return simulateLoop({
    samples,
    runIn,
    scanPeriod,
    stepsPerScan: 2,
    setPoint: (time) => setPoint + (time < -0.8 * runIn ? push : 0),
    controller: {
      ...controller,
      form: change.form ?? controller.form,
      gain: controller.gain * gain,
      integralTime: controller.integralTime * integralTime,
      integralDeadBand,
    },
    valve: valve === null ? null : createTwoParameterValve({ ...valve, start: process.restInput }),
    process,
    outputDisturbances: integrating ? [] : [drift],
    inputDisturbances: integrating ? [drift] : [],
    noise: model.noise,
    seed,
  });
}
