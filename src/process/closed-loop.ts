/**
 * A control loop simulated from set point to logged record: controller, valve, process, disturbances from outside,
 * measurement noise, rounding, a scan period and a logging period; on request a master controller that moves SP.
 *
 * At each scan PV is measured and OP set; OP is then held over the scan while valve and process move on in finer
 * steps. A row of the log holds the SP, PV and OP of its scan and the travel at the end of that scan, just before
 * the next OP: the valve's answer to the OP beside it.
 */
import { refuseUnknownOptions, WrongUse } from '../errors';
import { seededRandom } from '../signal/random';
import { equalPercentageFlow } from '../valve/characteristic';
import type { SteppableValve } from '../valve/steppable-valve';
import { type ControllerOptions, createController } from './controller';
import { type Disturbance, disturbanceValues } from './disturbance';
import { createLinearProcess, type LinearProcessOptions } from './linear-process';

/** A master loop: its process follows the slave's PV (without noise), its OP becomes the slave's SP. */
export interface MasterOptions {
  /** Its OP, limits and bias are in PV units of the slave, its PV in units of its own. */
  readonly controller: ControllerOptions;
  /** From the slave's PV to the master's. */
  readonly process: LinearProcessOptions;
  /** Set point of the master. */
  readonly setPoint: number;
  /** The master scans once in so many scans of the slave. Default 1. */
  readonly every?: number;
  /** Standard deviation of the master's measurement noise. Default 0. */
  readonly noise?: number;
}

export interface LoopOptions {
  /** Rows to log. Default 3600. */
  readonly samples?: number;
  /** Seconds that the loop runs before logging begins. Default 0. */
  readonly runIn?: number;
  /** s between scans. Default 1. */
  readonly scanPeriod?: number;
  /** The log takes one scan in so many. Default 1. */
  readonly logEvery?: number;
  /** Steps of valve and process in a scan. Default 4. */
  readonly stepsPerScan?: number;
  /** PV units, or a function of the time in s since logging began. Default 0. Not used with a master. */
  readonly setPoint?: number | ((time: number) => number);
  readonly controller?: ControllerOptions;
  /** Default null: travel is OP. */
  readonly valve?: SteppableValve | null;
  /** Rangeability of an equal-percentage valve; default null: flow through the valve is its travel. */
  readonly equalPercentage?: number | null;
  readonly process?: LinearProcessOptions;
  /** Added to PV, PV units. */
  readonly outputDisturbances?: readonly Disturbance[];
  /** Added to what enters the process, % of flow. */
  readonly inputDisturbances?: readonly Disturbance[];
  /** Standard deviation of the white noise of the measurement, PV units. Default 0. */
  readonly noise?: number;
  /** Seed of the noise. Default 1. */
  readonly seed?: number;
  /** PV is measured in steps of this size, PV units. Default 0: not rounded. */
  readonly pvStep?: number;
  /** OP is sent out in steps of this size, %. Default 0: not rounded. */
  readonly opStep?: number;
  readonly master?: MasterOptions | null;
}

const LOOP_OPTIONS = [
  'samples',
  'runIn',
  'scanPeriod',
  'logEvery',
  'stepsPerScan',
  'setPoint',
  'controller',
  'valve',
  'equalPercentage',
  'process',
  'outputDisturbances',
  'inputDisturbances',
  'noise',
  'seed',
  'pvStep',
  'opStep',
  'master',
] as const;

/** What was logged: one value a row in every array. */
export interface LoopRun {
  /** s since logging began. */
  readonly time: Float64Array;
  readonly sp: Float64Array;
  readonly pv: Float64Array;
  readonly op: Float64Array;
  /** Travel, %. */
  readonly travel: Float64Array;
  /** PV of the master as measured; null without one. */
  readonly masterPv: Float64Array | null;
}

/**
 * Runs a loop and gives its log.
 *
 * @throws WrongUse for counts that are not whole and positive, negative noise or rounding, an unknown option, and as
 *   the controller, process and disturbances that it is made of
 */
export function simulateLoop(options: LoopOptions = {}): LoopRun {
  refuseUnknownOptions('simulateLoop', options, LOOP_OPTIONS);
  const {
    samples = 3600,
    runIn = 0,
    scanPeriod = 1,
    logEvery = 1,
    stepsPerScan = 4,
    setPoint = 0,
    controller = {},
    valve = null,
    equalPercentage = null,
    process = {},
    outputDisturbances = [],
    inputDisturbances = [],
    noise = 0,
    seed = 1,
    pvStep = 0,
    opStep = 0,
    master = null,
  } = options;
  for (const [name, value] of Object.entries({
    samples,
    logEvery,
    stepsPerScan,
    every: master?.every ?? 1,
  })) {
    if (!(Number.isInteger(value) && value > 0)) {
      throw new WrongUse(`simulateLoop needs a whole number above 0 for "${name}". Received ${value}.`);
    }
  }
  for (const [name, value] of Object.entries({
    noise,
    pvStep,
    opStep,
    runIn,
    ofMaster: master?.noise ?? 0,
  })) {
    if (!(value >= 0)) {
      throw new WrongUse(`simulateLoop needs a "${name}" of 0 or more. Received ${value}.`);
    }
  }

  const scansBefore = Math.round(runIn / scanPeriod);
  const scans = scansBefore + (samples - 1) * logEvery + 1;
  const step = scanPeriod / stepsPerScan;
  const random = seededRandom(seed);
  const slave = createController(controller, scanPeriod);
  const plant = createLinearProcess(process, step);
  const atOutput = total(outputDisturbances, scans * stepsPerScan, step);
  const atInput = total(inputDisturbances, scans * stepsPerScan, step);
  const cascade = master && {
    every: master.every ?? 1,
    noise: master.noise ?? 0,
    controller: createController(master.controller, scanPeriod * (master.every ?? 1)),
    process: createLinearProcess(master.process, scanPeriod),
  };
  const spAt = typeof setPoint === 'function' ? setPoint : () => setPoint;

  const run = {
    time: new Float64Array(samples),
    sp: new Float64Array(samples),
    pv: new Float64Array(samples),
    op: new Float64Array(samples),
    travel: new Float64Array(samples),
    masterPv: cascade === null ? null : new Float64Array(samples),
  };
  let sp = 0;
  let masterPv = 0;
  let clean = plant.output;
  let travel = valve?.travel ?? 0;
  for (let scan = 0; scan < scans; scan++) {
    const time = (scan - scansBefore) * scanPeriod;
    if (cascade !== null && master !== null) {
      const followed = cascade.process.advance(clean);
      if (scan % cascade.every === 0) {
        masterPv = followed + cascade.noise * random.normal();
        sp = cascade.controller.scan(master.setPoint, masterPv);
      }
    } else {
      sp = spAt(time);
    }
    const pv = rounded(clean + noise * random.normal(), pvStep);
    const op = rounded(slave.scan(sp, pv), opStep);
    for (let i = 0; i < stepsPerScan; i++) {
      travel = valve === null ? op : valve.advance(op, step);
      const flow = equalPercentage === null ? travel : equalPercentageFlow(travel, equalPercentage);
      const k = scan * stepsPerScan + i;
      clean = plant.advance(flow + atInput[k]) + atOutput[k];
    }
    const row = (scan - scansBefore) / logEvery;
    if (row >= 0 && Number.isInteger(row)) {
      run.time[row] = time;
      run.sp[row] = sp;
      run.pv[row] = pv;
      run.op[row] = op;
      run.travel[row] = travel;
      if (run.masterPv !== null) run.masterPv[row] = masterPv;
    }
  }
  return run;
}

/** `value` to the nearest whole number of `step`; unchanged when the step is 0. */
function rounded(value: number, step: number): number {
  return step > 0 ? Math.round(value / step) * step : value;
}

function total(disturbances: readonly Disturbance[], count: number, step: number): Float64Array {
  const sum = new Float64Array(count);
  for (const disturbance of disturbances) {
    const values = disturbanceValues(disturbance, count, step);
    for (let k = 0; k < count; k++) sum[k] += values[k];
  }
  return sum;
}
