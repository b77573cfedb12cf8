/**
 * Loops with a sticky stem for measuring forecasts: the record that the program gets, and the same true loop run again
 * at other settings and with the valve repaired. Plants and assemblies are drawn from the ranges of `plant.ts` and
 * `assembly.ts`; noise (0.02-0.15 % of PV range, times the service's factor) and drift as in `generate.ts`. Set point
 * constant, PI control, logged so that a cycle has 20 to 100 samples.
 */
import { findCycle } from '../../src/oscillation/find-cycle';
import { type LoopOptions, type LoopRun, simulateLoop } from '../../src/process/closed-loop';
import type { LoopRecord } from '../../src/record/loop-record';
import { equalPercentageFlow } from '../../src/valve/characteristic';
import { createStem } from '../../src/valve/stem';
import { type Assembly, drawAssembly } from './assembly';
import { createDraw } from './draw';
import { controllerOf, drawPlant, type Plant, processOf, type TestedService } from './plant';

const SERVICES: readonly TestedService[] = ['flow', 'pressure', 'temperature', 'level'];
const NOISE_OF_SERVICE = { flow: 1, pressure: 0.6, level: 0.4, temperature: 0.25 } as const;
const CYCLES = 30;
const MOST_SCANS = 60_000;
const MOST_ATTEMPTS = 200;

/** A change of the true loop, as the forecasts are asked for it. */
export interface TrueChange {
  readonly name: string;
  /** Factors on gain and integral time. */
  readonly gain: number;
  readonly integralTime: number;
  readonly repaired: boolean;
}

export const CHANGES: readonly TrueChange[] = [
  { name: 'gain halved', gain: 0.5, integralTime: 1, repaired: false },
  { name: 'gain x 1.4', gain: 1.4, integralTime: 1, repaired: false },
  { name: 'integral time doubled', gain: 1, integralTime: 2, repaired: false },
  { name: 'both slower', gain: 0.6, integralTime: 1.6, repaired: false },
  { name: 'repaired', gain: 1, integralTime: 1, repaired: true },
];

export interface ForecastLoop {
  readonly id: string;
  readonly service: TestedService;
  readonly plant: Plant;
  readonly assembly: Assembly;
  /** Period of the cycle, s. */
  readonly period: number;
  readonly record: LoopRecord;
  /** Standard deviation of the measurement noise, and what the drift gains in a second, in the long run. */
  readonly noise: number;
  readonly drift: number;
  /** The true loop changed, over four times the record's length so that what is counted is well known. */
  run(change: TrueChange): LoopRun;
}

/** Loop `index` of the set that begins at `seed`; equal arguments give equal loops. */
export function makeForecastLoop(seed: number, index: number): ForecastLoop {
  const service = SERVICES[index % SERVICES.length]!;
  for (let attempt = 0; attempt < MOST_ATTEMPTS; attempt++) {
    const made = tryLoop(service, seed + 1000 * index + attempt, `forecast-${seed}-${index}`);
    if (made !== null) return made;
  }
  throw new Error(`No ${service} loop came out of seed ${seed + 1000 * index}.`);
}

function tryLoop(service: TestedService, seed: number, id: string): ForecastLoop | null {
  const draw = createDraw(seed);
  const plant = drawPlant(draw, service);
  if (plant.form !== 'PI') return null;
  const assembly = drawAssembly(draw, service, 'sticky');
  if (assembly.sort === 'positioner') return null;
  const restFlow =
    assembly.equalPercentage === null
      ? plant.restOp
      : equalPercentageFlow(plant.restOp, assembly.equalPercentage);
  const flowGain =
    assembly.equalPercentage === null ? 1 : (restFlow * Math.log(assembly.equalPercentage)) / 100;
  const noise = draw.logBetween(0.02, 0.15) * NOISE_OF_SERVICE[service];
  const theta = draw.between(0, 0.6);
  const spread =
    (draw.logBetween(0.02, 0.3) * (plant.integrating ? flowGain : 1)) /
    (Math.sqrt(plant.speed) * (1 - theta));
  const kick = draw.between(2, 5) * (draw.chance(0.5) ? 1 : -1);
  const seeds = { drift: draw.seed(), noise: draw.seed() };
  const loop = (change: TrueChange | null, seedShift: number): LoopOptions => {
    const controller = controllerOf(plant);
    const drift = { kind: 'ima', spread, theta, every: 1, seed: seeds.drift + seedShift } as const;
    return {
      scanPeriod: plant.scanPeriod,
      stepsPerScan: 2,
      controller: {
        ...controller,
        gain: controller.gain! * (change?.gain ?? 1),
        integralTime: controller.integralTime! * (change?.integralTime ?? 1),
      },
      valve: change?.repaired
        ? createStem({ actuatorLag: assembly.lag, startOp: plant.restOp })
        : assembly.create(plant.restOp),
      equalPercentage: assembly.equalPercentage,
      process: processOf(plant, restFlow, flowGain),
      outputDisturbances: plant.integrating ? [] : [drift],
      inputDisturbances: plant.integrating ? [drift] : [],
      noise,
      seed: seeds.noise + seedShift,
    };
  };
  const setPoint = (runIn: number) => (time: number) =>
    plant.restPv + (time < 20 * plant.scanPeriod - runIn ? 0 : kick);

  const trialTime = Math.min(20_000 * plant.scanPeriod, Math.max(3000, 150 * plant.speed));
  const trial = simulateLoop({
    ...loop(null, 0),
    samples: Math.round(trialTime / plant.scanPeriod),
    setPoint: setPoint(0),
  });
  const settled = trial.op.subarray(Math.floor(trial.op.length / 3));
  const cycle = findCycle(Float64Array.from(settled), plant.scanPeriod);
  if (cycle.period === null || cycle.amplitude === null || cycle.amplitude < 0.5 * assembly.S) return null;
  if (settled.some((op) => op < 5 || op > 95)) return null;
  const { period } = cycle;
  const logged = plant.logPeriods.filter((one) => period / one >= 20);
  const logPeriod = logged.find((one) => period / one <= 100) ?? logged.at(-1);
  if (logPeriod === undefined) return null;
  const samples = Math.round((CYCLES * period) / logPeriod);
  const logEvery = Math.round(logPeriod / plant.scanPeriod);
  if (samples * logEvery > MOST_SCANS || samples < 600) return null;
  const runIn = 10 * period;
  const run = (change: TrueChange | null, length: number, seedShift: number): LoopRun =>
    simulateLoop({
      ...loop(change, seedShift),
      samples: length,
      logEvery,
      runIn,
      setPoint: setPoint(runIn),
    });
  const log = run(null, samples, 1);
  if (!findCycle(log.op, logPeriod).present) return null;
  return {
    id,
    service,
    plant,
    assembly,
    period,
    noise,
    drift: spread * (1 - theta),
    record: recordOf(id, service, plant, logPeriod, log),
    run: (change) => run(change, 4 * samples, 2),
  };
}

function recordOf(
  id: string,
  service: TestedService,
  plant: Plant,
  samplePeriod: number,
  { sp, pv, op }: LoopRun,
): LoopRecord {
  return {
    loop: `31-${service[0]!.toUpperCase()}C-300`,
    service,
    response: plant.integrating ? 'integrating' : 'self-regulating',
    source: `${id}.csv`,
    sha256: '0'.repeat(64),
    start: '2026-03-04T06:00:00.000Z',
    samplePeriod,
    pv,
    sp,
    op,
    travel: null,
    pvUnit: '%',
    pvRange: { low: 0, high: 100 },
    logging: {
      rows: op.length,
      duplicates: 0,
      gaps: 0,
      longestGap: samplePeriod,
      manualShare: 0,
      badShare: 0,
      filledShare: 0,
      skew: 0,
      modeLogged: true,
      keptShare: 1,
    },
    notes: [],
  };
}
