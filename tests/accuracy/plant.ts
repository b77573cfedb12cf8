/**
 * Draws a loop of the accuracy suite: process, tuning, scan. All PVs are in % of range here.
 *
 * Ranges (time in s; "log" is evenly spread over logarithms):
 *
 * | service     | process                                                           | scan     | logged every     |
 * |-------------|-------------------------------------------------------------------|----------|------------------|
 * | flow        | lag 0.8-8 log, dead time 0.2-3 log                                 | 0.5, 1   | 0.5, 1, 2, 5     |
 * | pressure    | lag 5-60 log (half with a second one), dead time 0.5-5 log; a fifth | 1        | 1, 2, 5, 10      |
 * |             | integrating, 0.002-0.02 1/s log                                     |          |                  |
 * | temperature | lags 30-200 log and 5-30 log, dead time 5-40 log                    | 1, 2     | 2, 4, 10, 20     |
 * | level       | integrating, 0.001-0.01 1/s log, lag 1-10 log, dead time 0.5-5 log  | 1, 2     | 2, 4, 10, 20     |
 *
 * Process gain 0.5-2.5 log % of PV range per % of travel, a third of the loops direct acting. Tuning by closed-loop
 * time constant: 0.7-5 log times the process time constant (self-regulating) or 25-250 log s (integrating, at least
 * four dead times, and slow enough for a controller gain of at most 3), with the integral time 0.6 to 1.5 times the
 * usual one.
 */
import type { ControllerOptions } from '../../src/process/controller';
import type { LinearProcessOptions } from '../../src/process/linear-process';
import type { Service } from '../../src/record/loop-record';
import type { Draw } from './draw';

/** Highest controller gain on integrating processes, % of OP per % of PV range. */
const HIGHEST_GAIN = 3;

export type TestedService = Exclude<Service, 'other'>;

export interface Plant {
  readonly service: TestedService;
  readonly integrating: boolean;
  /** 1 when PV rises with travel, -1 when it falls (direct-acting controller). */
  readonly sign: 1 | -1;
  /** % of PV per % of travel (and second, when integrating), without sign. */
  readonly gain: number;
  readonly lags: readonly number[];
  readonly deadTime: number;
  readonly scanPeriod: number;
  /** Logging periods to choose from, each a whole number of scans. */
  readonly logPeriods: readonly number[];
  /** Closed-loop time constant that the tuning aims at, s. */
  readonly speed: number;
  readonly form: 'P' | 'PI' | 'PID' | 'I';
  readonly controllerGain: number;
  readonly integralTime: number;
  readonly derivativeTime: number;
  /** OP and PV at rest, %. */
  readonly restOp: number;
  readonly restPv: number;
}

export function drawPlant(draw: Draw, service: TestedService, mustIntegrate = false): Plant {
  const integrating = mustIntegrate || service === 'level' || (service === 'pressure' && draw.chance(0.2));
  const sign = draw.chance(1 / 3) ? -1 : 1;
  let gain = draw.logBetween(0.5, 2.5);
  let lags: number[];
  let deadTime: number;
  let scanPeriod = 1;
  let logPeriods: number[];
  switch (service) {
    case 'flow':
      lags = [draw.logBetween(0.8, 8)];
      deadTime = draw.logBetween(0.2, 3);
      scanPeriod = draw.oneOf([0.5, 1], [1, 2]);
      logPeriods = scanPeriod === 0.5 ? [0.5, 1, 2, 5] : [1, 2, 5];
      break;
    case 'pressure':
      lags = [draw.logBetween(5, 60)];
      if (draw.chance(0.5)) lags.push(lags[0] * draw.between(0.1, 0.4));
      deadTime = draw.logBetween(0.5, 5);
      logPeriods = [1, 2, 5, 10];
      break;
    case 'temperature':
      lags = [draw.logBetween(30, 200), draw.logBetween(5, 30)];
      deadTime = draw.logBetween(5, 40);
      scanPeriod = draw.oneOf([1, 2]);
      logPeriods = [2, 4, 10, 20];
      break;
    case 'level':
      lags = [draw.logBetween(1, 10)];
      deadTime = draw.logBetween(0.5, 5);
      scanPeriod = draw.oneOf([1, 2]);
      logPeriods = [2, 4, 10, 20];
      break;
  }
  if (integrating) {
    gain = service === 'level' ? draw.logBetween(0.001, 0.01) : draw.logBetween(0.002, 0.02);
    lags = lags.map((lag) => Math.min(lag, 15)).slice(0, 1);
  }

  const form = drawForm(draw, service);
  const lag = lags.reduce((sum, value) => sum + value, 0);
  const delay = deadTime + scanPeriod;
  let speed: number;
  let controllerGain: number;
  let integralTime: number;
  if (integrating) {
    const slowest = delay + lag;
    speed = Math.max(4 * slowest, draw.logBetween(25, 250), (form === 'P' ? 1 : 2) / (gain * HIGHEST_GAIN));
    controllerGain =
      form === 'P' ? 1 / (gain * speed) : (2 * speed + slowest) / (gain * (speed + slowest) ** 2);
    integralTime = (2 * speed + slowest) * draw.between(0.6, 1.3);
  } else {
    speed = Math.max(lag, delay) * draw.logBetween(0.7, 5);
    controllerGain = lag / (gain * (speed + delay));
    integralTime = lag * draw.between(0.6, 1.5);
    if (form === 'P') controllerGain = Math.min(2, 1.5 * controllerGain * gain) / gain;
    if (form === 'I') {
      // The output moves at controllerGain/integralTime times the error.
      controllerGain = 1 / gain;
      integralTime = speed + lag + delay;
    }
  }
  return {
    service,
    integrating,
    sign,
    gain,
    lags,
    deadTime,
    scanPeriod,
    logPeriods,
    speed,
    form,
    controllerGain,
    integralTime,
    derivativeTime: form === 'PID' ? draw.between(0.1, 0.25) * Math.min(integralTime, lag) : 0,
    restOp: draw.between(35, 70),
    restPv: draw.between(35, 65),
  };
}

/** P alone cycles only where something else integrates: level here, slaves of a cascade in `generate.ts`. */
function drawForm(draw: Draw, service: TestedService): Plant['form'] {
  switch (service) {
    case 'flow':
      return draw.oneOf(['PI', 'I'], [0.9, 0.1]);
    case 'pressure':
      return 'PI';
    case 'temperature':
      return draw.oneOf(['PI', 'PID'], [0.7, 0.3]);
    case 'level':
      return draw.oneOf(['PI', 'P'], [0.75, 0.25]);
  }
}

/** The process of a plant for the loop simulator; `flowGain` is % of flow per % of travel where the valve works. */
export function processOf(plant: Plant, restFlow: number, flowGain: number): LinearProcessOptions {
  return {
    response: plant.integrating ? 'integrating' : 'self-regulating',
    gain: (plant.sign * plant.gain) / flowGain,
    lags: plant.lags,
    deadTime: plant.deadTime,
    restInput: restFlow,
    restOutput: plant.restPv,
  };
}

/** The controller of a plant for the loop simulator. */
export function controllerOf(plant: Plant): ControllerOptions {
  return {
    form: plant.form,
    gain: plant.controllerGain,
    integralTime: plant.integralTime,
    derivativeTime: plant.derivativeTime,
    action: plant.sign === 1 ? 'reverse' : 'direct',
    bias: plant.restOp,
  };
}
