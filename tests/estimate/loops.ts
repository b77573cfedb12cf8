/** Small closed loops whose valve is known, as loop records, for the tests of estimate, cause and assessment. */
import type { ProcessSettings } from '../../src/estimate/process-fit';
import { type LoopOptions, simulateLoop } from '../../src/process/closed-loop';
import type { LoopRecord, Response, Service } from '../../src/record/loop-record';
import type { SteppableValve } from '../../src/valve/steppable-valve';
import { record } from '../evidence/loops';

export interface LoopSettings {
  /** Default null: a linear loop, travel is OP. */
  readonly valve?: SteppableValve | null;
  readonly samples?: number;
  readonly seed?: number;
  /** Standard deviation of the measurement noise, PV units. */
  readonly noise?: number;
  readonly travelLogged?: boolean;
  /** Replaces or adds to the options of the loop itself. */
  readonly loop?: Partial<LoopOptions>;
}

/** Flow of gain 1.1, lag 3 s and dead time 1 s under PI control, logged every second. */
export function flowLoop(settings: LoopSettings = {}): LoopRecord {
  const { valve = null, samples = 1500, seed = 1, noise = 0.05, loop } = settings;
  return recordOf(
    {
      samples,
      runIn: 900,
      stepsPerScan: 1,
      setPoint: (time) => (time < -850 ? 60 : 63.5),
      controller: { gain: 0.45, integralTime: 7, bias: 52 },
      valve,
      process: { gain: 1.1, lags: [3], deadTime: 1, restInput: 52, restOutput: 60 },
      outputDisturbances: [{ kind: 'ima', spread: 0.02, theta: 0.5, every: 1, seed: seed + 100 }],
      noise,
      seed,
      ...loop,
    },
    'flow',
    'self-regulating',
    settings.travelLogged,
  );
}

/** Level of a tank with the valve in its outlet under PI control, logged every 5 s. */
export function levelLoop(settings: LoopSettings = {}): LoopRecord {
  const { valve = null, samples = 1500, seed = 1, noise = 0.05, loop } = settings;
  return recordOf(
    {
      samples,
      runIn: 5400,
      logEvery: 5,
      stepsPerScan: 1,
      setPoint: (time) => (time < -5000 ? 50 : 55),
      controller: { gain: 4, integralTime: 60, action: 'direct', bias: 48 },
      valve,
      process: {
        response: 'integrating',
        gain: -0.0033,
        lags: [6],
        deadTime: 2,
        restInput: 48,
        restOutput: 50,
      },
      inputDisturbances: [{ kind: 'ima', spread: 0.02, theta: 0.5, every: 1, seed: seed + 100 }],
      noise,
      seed,
      ...loop,
    },
    'level',
    'integrating',
    settings.travelLogged,
  );
}

/** Runs a loop and takes what is logged as a record. */
function recordOf(loop: LoopOptions, service: Service, response: Response, travelLogged = false): LoopRecord {
  const { sp, pv, op, travel } = simulateLoop(loop);
  const samplePeriod = (loop.scanPeriod ?? 1) * (loop.logEvery ?? 1);
  return {
    ...record({ op, pv, sp, service, response, samplePeriod }),
    travel: travelLogged ? travel : null,
  };
}

/** The numbers of a record, to see whether something changed them. */
export function numbersOf({ pv, sp, op, travel }: LoopRecord): number[][] {
  return [pv, sp ?? [], op, travel ?? []].map((values) => [...values]);
}

/** Settings of a process fit with nothing known but the period, in samples. */
export function processSettings(change: Partial<ProcessSettings> = {}): ProcessSettings {
  return {
    integrating: false,
    sign: 1,
    period: 60,
    deadTime: null,
    gainLow: 0,
    gainHigh: Number.POSITIVE_INFINITY,
    controller: null,
    samplePeriod: 1,
    ...change,
  };
}
