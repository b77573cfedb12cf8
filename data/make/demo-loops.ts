/**
 * The demo loops of an invented water-recovery section (area 31 of an invented starch works). All of them come from
 * the stem and the loop simulator; the two-parameter element has no part in them.
 */
import { type LoopOptions, type LoopRun, simulateLoop } from '../../src/process/closed-loop';
import { seededRandom } from '../../src/signal/random';
import { textbookStem } from '../../src/valve/stem';
import type { ExportedLoop } from './export';

export type DemoName =
  | '31-FC-104'
  | '31-FC-104-with-travel'
  | '31-FC-104-after-repair'
  | '31-PC-122'
  | '31-FC-131'
  | '31-LC-140';

export interface DemoLoop extends ExportedLoop {
  readonly name: DemoName;
  /** What makes it cycle, as the program names causes. */
  readonly cause: 'stiction' | 'tight-tuning' | 'outside-disturbance' | 'lost-motion' | 'not-oscillating';
  /** One sentence on what was simulated. */
  readonly story: string;
  readonly pvUnit: string;
  readonly pvRange: { readonly low: number; readonly high: number };
  /** Seed of the copy kept in data/. */
  readonly seed: number;
  /** S and J with which stem and linkage were set up, % (the truth is fitted to the travel, see `truth.ts`). */
  readonly built: { readonly S: number; readonly J: number };
  readonly loop: (seed: number) => LoopOptions;
}

const stickyFlow = (seed: number): LoopOptions => ({
  samples: 3600,
  runIn: 1800,
  setPoint: (time) => (time < -1700 ? 60 : 63.5),
  controller: { gain: 0.45, integralTime: 7, bias: 52 },
  valve: textbookStem({ S: 3.4, J: 1.6, actuatorLag: 0.3, startOp: 52 }),
  process: { gain: 1.1, lags: [3], deadTime: 1, restInput: 52, restOutput: 60 },
  outputDisturbances: [{ kind: 'ima', spread: 0.02, theta: 0.5, every: 1, seed: seed + 1 }],
  noise: 0.05,
  seed,
  pvStep: 0.02,
  opStep: 0.01,
});

/** Set points of the record after the repair: s since its start, PV units. Uneven, so that they make no cycle. */
const movesAfterRepair: readonly (readonly [number, number])[] = [
  [300, 64],
  [420, 65],
  [660, 64.5],
  [1320, 64.9],
  [1440, 63.5],
  [1740, 62],
  [1920, 62.8],
  [2460, 62.2],
  [2640, 61.5],
  [3180, 63],
  [3300, 63.6],
];

export const DEMO_LOOPS: readonly DemoLoop[] = [
  {
    name: '31-FC-104',
    tag: '31-FC-104',
    cause: 'stiction',
    story: 'Condensate flow with a sticky valve under PI control: a stick-slip limit cycle.',
    pvUnit: 'm3/h',
    pvRange: { low: 0, high: 120 },
    samplePeriod: 1,
    start: '2026-03-04T06:00:00Z',
    seed: 104,
    logsTravel: false,
    pvDecimals: 2,
    built: { S: 3.4, J: 1.6 },
    loop: stickyFlow,
  },
  {
    name: '31-FC-104-with-travel',
    tag: '31-FC-104',
    cause: 'stiction',
    story: 'The same loop in another hour, with the travel logged by a position transmitter.',
    pvUnit: 'm3/h',
    pvRange: { low: 0, high: 120 },
    samplePeriod: 1,
    start: '2026-03-05T13:00:00Z',
    seed: 203,
    logsTravel: true,
    pvDecimals: 2,
    built: { S: 3.4, J: 1.6 },
    loop: stickyFlow,
  },
  {
    name: '31-FC-104-after-repair',
    tag: '31-FC-104',
    cause: 'not-oscillating',
    story:
      'The same loop after its valve was repacked: same tuning and load, set point moved by the operators eleven times.',
    pvUnit: 'm3/h',
    pvRange: { low: 0, high: 120 },
    samplePeriod: 1,
    start: '2026-03-26T06:00:00Z',
    seed: 326,
    logsTravel: false,
    pvDecimals: 2,
    built: { S: 0.12, J: 0.02 },
    loop: (seed) => ({
      ...stickyFlow(seed),
      setPoint: (time) =>
        movesAfterRepair.reduce((now, [from, to]) => (time >= from ? to : now), time < -1700 ? 60 : 63.5),
      valve: textbookStem({ S: 0.12, J: 0.02, actuatorLag: 0.3, startOp: 52 }),
    }),
  },
  {
    name: '31-PC-122',
    tag: '31-PC-122',
    cause: 'tight-tuning',
    story:
      'Flash vessel pressure with too high a controller gain: close to its stability limit it hardly dies out.',
    pvUnit: 'kPa',
    pvRange: { low: 0, high: 600 },
    samplePeriod: 1,
    start: '2026-03-04T06:00:00Z',
    seed: 122,
    logsTravel: false,
    pvDecimals: 2,
    built: { S: 0.15, J: 0.02 },
    loop: (seed) => ({
      samples: 5400,
      runIn: 1800,
      setPoint: 320,
      controller: { gain: 1.3, integralTime: 30, bias: 45 },
      valve: textbookStem({ S: 0.15, J: 0.02, actuatorLag: 1, startOp: 45 }),
      process: { gain: 4, lags: [25, 5], deadTime: 4, restInput: 45, restOutput: 320 },
      outputDisturbances: [{ kind: 'ima', spread: 0.25, theta: 0.5, every: 1, seed: seed + 1 }],
      noise: 0.3,
      seed,
      pvStep: 0.05,
      opStep: 0.01,
    }),
  },
  {
    name: '31-FC-131',
    tag: '31-FC-131',
    cause: 'outside-disturbance',
    story: 'Wash water flow with a good valve, shaken by the slow cycle of the level in the vessel upstream.',
    pvUnit: 'm3/h',
    pvRange: { low: 0, high: 80 },
    samplePeriod: 1,
    start: '2026-03-04T06:00:00Z',
    seed: 131,
    logsTravel: false,
    pvDecimals: 2,
    built: { S: 0.2, J: 0.04 },
    loop: (seed) => {
      const phase = 2 * Math.PI * seededRandom(seed + 7).uniform();
      return {
        samples: 5400,
        runIn: 600,
        setPoint: 42,
        controller: { gain: 0.5, integralTime: 12, bias: 55 },
        valve: textbookStem({ S: 0.2, J: 0.04, actuatorLag: 0.5, startOp: 55 }),
        process: { gain: 0.8, lags: [4], deadTime: 1, restInput: 55, restOutput: 42 },
        outputDisturbances: [
          { kind: 'sine', amplitude: 3, period: 210, phase },
          { kind: 'sine', amplitude: 0.25, period: 105, phase: 2 * phase + 0.8 },
          { kind: 'ima', spread: 0.04, theta: 0.5, every: 1, seed: seed + 1 },
        ],
        noise: 0.12,
        seed,
        pvStep: 0.02,
        opStep: 0.01,
      };
    },
  },
  {
    name: '31-LC-140',
    tag: '31-LC-140',
    cause: 'lost-motion',
    story:
      'Wash water tank level, outlet valve with a worn linkage: dead band without a slip jump makes an ' +
      'integrating process cycle under PI control.',
    pvUnit: '%',
    pvRange: { low: 0, high: 100 },
    samplePeriod: 5,
    start: '2026-03-04T06:00:00Z',
    seed: 140,
    logsTravel: false,
    pvDecimals: 2,
    built: { S: 4.0, J: 0.02 },
    loop: (seed) => ({
      samples: 2160,
      runIn: 5400,
      logEvery: 5,
      setPoint: (time) => (time < -5000 ? 50 : 55),
      controller: { gain: 4, integralTime: 60, action: 'direct', bias: 48 },
      valve: textbookStem({ S: 0.2, J: 0.02, actuatorLag: 1, backlash: 3.8, startOp: 48 }),
      process: {
        response: 'integrating',
        gain: -0.0033,
        lags: [6],
        deadTime: 2,
        restInput: 48,
        restOutput: 50,
      },
      inputDisturbances: [{ kind: 'ima', spread: 0.04, theta: 0.5, every: 1, seed: seed + 1 }],
      noise: 0.03,
      seed,
      pvStep: 0.02,
      opStep: 0.01,
    }),
  },
];

export interface MadeDemoLoop {
  readonly demo: DemoLoop;
  /** As logged, before the export rounds it. */
  readonly run: LoopRun;
}

/** One hour or more of a demo loop; equal seeds give equal data, another seed another stretch of the same loop. */
export function makeDemoLoop(name: DemoName, seed: number): MadeDemoLoop {
  const demo = DEMO_LOOPS.find((one) => one.name === name);
  if (demo === undefined) throw new Error(`There is no demo loop "${name}".`);
  return { demo, run: simulateLoop(demo.loop(seed)) };
}
