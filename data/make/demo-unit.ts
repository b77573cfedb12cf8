/**
 * A demo unit of many loops, all in the invented area 31: healthy ones and one or more of each cause of a cycle. The
 * valve of 31-FC-201 sticks and shakes three neighbours through the process; two more loops are shaken by something
 * that nobody logs. As with the single demo loops, stem and loop simulator make them.
 */
import type { Verdict } from '../../src/assessment/assessment';
import { type LoopOptions, type LoopRun, simulateLoop } from '../../src/process/closed-loop';
import type { Disturbance } from '../../src/process/disturbance';
import { firstOrderLag } from '../../src/signal/filter';
import { mean } from '../../src/signal/statistics';
import { type TextbookStemOptions, textbookStem } from '../../src/valve/stem';
import type { ExportedLoop } from './export';

/** How the PV of another loop reaches this one. */
export interface Shaking {
  readonly tag: string;
  /** To this loop's PV, or to what enters its process. */
  readonly at: 'output' | 'input';
  /** PV units (or % of flow) for each PV unit by which the other one is off its mean. */
  readonly coupling: number;
  /** s */
  readonly lag: number;
  /** s */
  readonly deadTime: number;
}

export interface UnitLoop extends ExportedLoop {
  /** What makes it cycle, as the program names causes; `cannot-tell` where the log is too poor to say. */
  readonly cause: Verdict;
  readonly story: string;
  readonly service: 'flow' | 'pressure' | 'level' | 'temperature';
  readonly response: 'self-regulating' | 'integrating';
  readonly pvUnit: string;
  readonly pvRange: readonly [number, number];
  readonly samples: number;
  readonly seed: number;
  /** S and J with which stem and linkage were set up, %. */
  readonly built: { readonly S: number; readonly J: number };
  readonly shakenBy: Shaking | null;
  /**
   * Without what other loops add; `samples` and run-in are set when it is made. A valve remembers where it stands, so
   * that each making needs one of its own.
   */
  readonly options: (stretch: number) => LoopOptions;
}

/** s that each loop runs before its log begins. */
const runIn = 1800;
const start = '2026-03-10T06:00:00Z';

/** What loops of one service have in common; the rest is stated where they are listed. */
interface Plan {
  readonly tag: string;
  readonly cause: Verdict;
  readonly story: string;
  readonly samplePeriod?: number;
  readonly samples?: number;
  readonly logEvery?: number;
  readonly S: number;
  readonly J: number;
  readonly backlash?: number;
  readonly setPoint: number;
  /** PV at the beginning; off the set point it wakes a valve that sticks. Default: the set point. */
  readonly from?: number;
  readonly gain: number;
  readonly integralTime: number;
  readonly bias?: number;
  readonly process: NonNullable<LoopOptions['process']>;
  readonly pvUnit: string;
  readonly pvRange: readonly [number, number];
  readonly noise: number;
  /** Spread of the slow disturbance that every loop has, PV units a scan. */
  readonly drift: number;
  readonly sines?: readonly {
    readonly amplitude: number;
    readonly period: number;
    readonly phase?: number;
  }[];
  readonly shakenBy?: Shaking;
}

const services = { F: 'flow', P: 'pressure', L: 'level', T: 'temperature' } as const;

function unitLoop(plan: Plan): UnitLoop {
  const { tag, setPoint, from = setPoint, bias = 50, gain, process } = plan;
  const { samplePeriod = 2, samples = 1400, logEvery = 1, S, J, backlash = 0 } = plan;
  const seed = Number(tag.replaceAll(/\D/g, '').slice(-3));
  const integrating = process.response === 'integrating';
  const direct = (process.gain ?? 1) < 0;
  const drift = (stretch: number): Disturbance => ({
    kind: 'ima',
    spread: plan.drift,
    theta: 0.5,
    every: samplePeriod / logEvery,
    seed: seed + 1 + 1000 * stretch,
  });
  const valve: TextbookStemOptions = { S, J, backlash, actuatorLag: 0.5, startOp: bias };
  const step = (plan.pvRange[1] - plan.pvRange[0]) / 8192;
  return {
    tag,
    cause: plan.cause,
    story: plan.story,
    service: services[tag[3] as keyof typeof services],
    response: integrating ? 'integrating' : 'self-regulating',
    pvUnit: plan.pvUnit,
    pvRange: plan.pvRange,
    samplePeriod,
    samples,
    seed,
    start,
    logsTravel: false,
    pvDecimals: 2,
    built: { S: S + backlash, J },
    shakenBy: plan.shakenBy ?? null,
    options: (stretch) => ({
      scanPeriod: samplePeriod / logEvery,
      logEvery,
      setPoint,
      controller: {
        gain,
        integralTime: plan.integralTime,
        bias,
        ...(direct && { action: 'direct' as const }),
      },
      valve: textbookStem(valve),
      process: { ...process, restInput: bias, restOutput: from },
      outputDisturbances: [
        ...(plan.sines ?? []).map((sine) => ({ kind: 'sine' as const, ...sine })),
        ...(integrating ? [] : [drift(stretch)]),
      ],
      inputDisturbances: integrating ? [drift(stretch)] : [],
      noise: plan.noise,
      seed: seed + 1000 * stretch,
      pvStep: step,
      opStep: 0.01,
    }),
  };
}

/** Flow of 0 to 100 m3/h behind a short pipe. */
const flow = { pvUnit: 'm3/h', pvRange: [0, 100], noise: 0.08, drift: 0.03 } as const;
const pressure = { pvUnit: 'kPa', pvRange: [0, 600], noise: 0.4, drift: 0.2 } as const;
const level = { pvUnit: '%', pvRange: [0, 100], noise: 0.03, drift: 0.03, samplePeriod: 5 } as const;
const temperature = { pvUnit: 'degC', pvRange: [0, 150], noise: 0.05, drift: 0.03, samplePeriod: 5 } as const;

export const DEMO_UNIT: readonly UnitLoop[] = (
  [
    {
      ...flow,
      tag: '31-FC-201',
      cause: 'stiction',
      story: 'Condensate return with a sticky valve; header, flash vessel and preheater downstream feel it.',
      samplePeriod: 3,
      S: 4,
      J: 1.8,
      setPoint: 55,
      from: 50,
      gain: 0.4,
      integralTime: 6,
      process: { gain: 1.1, lags: [7], deadTime: 2 },
    },
    {
      ...pressure,
      tag: '31-PC-202',
      cause: 'outside-disturbance',
      story: 'Condensate header pressure, shaken by 31-FC-201.',
      samplePeriod: 3,
      S: 0.1,
      J: 0.02,
      setPoint: 310,
      gain: 0.05,
      integralTime: 60,
      process: { gain: 3, lags: [15], deadTime: 3 },
      shakenBy: { tag: '31-FC-201', at: 'output', coupling: -3, lag: 8, deadTime: 2 },
    },
    {
      ...level,
      tag: '31-LC-203',
      cause: 'outside-disturbance',
      story: 'Flash vessel level, shaken by what 31-FC-201 sends in.',
      samplePeriod: 3,
      S: 0.1,
      J: 0.02,
      setPoint: 45,
      gain: 1.5,
      integralTime: 400,
      process: { response: 'integrating', gain: -0.008, lags: [4], deadTime: 3 },
      shakenBy: { tag: '31-FC-201', at: 'input', coupling: -0.8, lag: 5, deadTime: 3 },
    },
    {
      ...temperature,
      tag: '31-TC-204',
      cause: 'outside-disturbance',
      story: 'Preheater outlet temperature, shaken by the condensate flow of 31-FC-201.',
      samplePeriod: 3,
      S: 0.1,
      J: 0.02,
      setPoint: 82,
      gain: 0.8,
      integralTime: 120,
      process: { gain: 0.9, lags: [30, 8], deadTime: 5 },
      shakenBy: { tag: '31-FC-201', at: 'output', coupling: 0.35, lag: 20, deadTime: 8 },
    },
    {
      ...flow,
      tag: '31-FC-211',
      cause: 'stiction',
      story: 'Wash water to the screens with a sticky valve and a faster cycle of its own.',
      S: 2.6,
      J: 1.2,
      setPoint: 42,
      from: 38,
      gain: 0.5,
      integralTime: 3,
      process: { gain: 0.9, lags: [4], deadTime: 1 },
    },
    {
      ...pressure,
      tag: '31-PC-212',
      cause: 'stiction',
      story: 'Filter feed pressure with a sticky valve.',
      S: 3,
      J: 1.2,
      setPoint: 240,
      from: 228,
      gain: 0.15,
      integralTime: 5,
      process: { gain: 4, lags: [9], deadTime: 2 },
    },
    {
      ...level,
      tag: '31-LC-221',
      cause: 'lost-motion',
      logEvery: 5,
      samples: 1800,
      story: 'Wash water tank level, outlet valve with a worn linkage.',
      S: 0.2,
      J: 0.02,
      noise: 0.05,
      drift: 0.1,
      backlash: 3,
      setPoint: 55,
      from: 51,
      gain: 5,
      integralTime: 80,
      process: { response: 'integrating', gain: -0.0033, lags: [6], deadTime: 2 },
    },
    {
      ...pressure,
      tag: '31-PC-231',
      cause: 'tight-tuning',
      story: 'Evaporator feed pressure, controller gain near the limit of stability.',
      S: 0.12,
      J: 0.02,
      setPoint: 320,
      gain: 1.25,
      integralTime: 30,
      process: { gain: 4, lags: [25, 5], deadTime: 4 },
    },
    {
      ...temperature,
      tag: '31-TC-232',
      cause: 'tight-tuning',
      story: 'Wash water heater, controller gain near the limit of stability.',
      S: 0.05,
      J: 0.01,
      noise: 0.02,
      setPoint: 65,
      gain: 6.8,
      integralTime: 140,
      process: { gain: 0.8, lags: [80, 20], deadTime: 12 },
    },
    {
      ...flow,
      tag: '31-FC-241',
      cause: 'outside-disturbance',
      story: 'Fresh water to the wash, shaken by a supply pressure that nobody logs.',
      S: 0.1,
      J: 0.02,
      setPoint: 60,
      gain: 0.4,
      integralTime: 14,
      process: { gain: 1, lags: [5], deadTime: 1 },
      sines: [
        { amplitude: 2.5, period: 170 },
        { amplitude: 0.2, period: 85, phase: 0.8 },
      ],
    },
    {
      ...pressure,
      tag: '31-PC-242',
      cause: 'outside-disturbance',
      story: 'Spray header pressure, shaken by the same supply pressure.',
      S: 0.1,
      J: 0.02,
      setPoint: 400,
      gain: 0.06,
      integralTime: 40,
      process: { gain: 3, lags: [12], deadTime: 2 },
      sines: [
        { amplitude: 9, period: 170, phase: -0.6 },
        { amplitude: 0.6, period: 85, phase: 0.1 },
      ],
    },
    {
      ...flow,
      tag: '31-FC-251',
      cause: 'cannot-tell',
      story: 'Sludge flow with a sticky valve, logged so seldom that the shape of its cycle is lost.',
      samplePeriod: 20,
      logEvery: 10,
      samples: 240,
      S: 3,
      J: 1.2,
      setPoint: 36,
      from: 32,
      gain: 0.5,
      integralTime: 4,
      process: { gain: 0.9, lags: [5], deadTime: 1 },
    },
    ...(
      [
        ['31-FC-301', 'Fresh water intake', 48, flow, 0.35, 14, { gain: 1, lags: [6], deadTime: 1 }],
        ['31-FC-302', 'Wash water to the tables', 30, flow, 0.3, 12, { gain: 0.8, lags: [5], deadTime: 2 }],
        ['31-FC-303', 'Condensate to storage', 71, flow, 0.25, 16, { gain: 1.2, lags: [8], deadTime: 1 }],
        ['31-FC-304', 'Filter backwash', 22, flow, 0.2, 12, { gain: 0.9, lags: [4], deadTime: 1 }],
        [
          '31-PC-305',
          'Steam to the flash vessel',
          280,
          pressure,
          0.1,
          25,
          { gain: 3, lags: [14], deadTime: 3 },
        ],
        [
          '31-PC-306',
          'Wash water ring main',
          450,
          pressure,
          0.08,
          30,
          { gain: 3.5, lags: [12], deadTime: 2 },
        ],
        ['31-PC-307', 'Vacuum filter', 120, pressure, 0.08, 30, { gain: 2.5, lags: [20], deadTime: 4 }],
        ['31-TC-308', 'Process water', 58, temperature, 1, 120, { gain: 0.9, lags: [60, 15], deadTime: 10 }],
        [
          '31-TC-309',
          'Clean condensate',
          91,
          temperature,
          1.2,
          90,
          { gain: 0.7, lags: [50, 10], deadTime: 8 },
        ],
        [
          '31-LC-310',
          'Process water tank',
          60,
          level,
          3,
          700,
          { response: 'integrating', gain: -0.004, lags: [5], deadTime: 3 },
        ],
        [
          '31-LC-311',
          'Seal water tank',
          35,
          level,
          2.5,
          900,
          { response: 'integrating', gain: -0.005, lags: [5], deadTime: 3 },
        ],
        ['31-FC-312', 'Rinse water', 64, flow, 0.2, 11, { gain: 1.1, lags: [5], deadTime: 1 }],
      ] as const
    ).map(([tag, what, setPoint, service, gain, integralTime, process]) => ({
      ...service,
      tag,
      cause: 'not-oscillating' as const,
      story: `${what}: a good valve, sound tuning.`,
      S: 0.08,
      J: 0.01,
      setPoint,
      gain,
      integralTime,
      process,
    })),
  ] satisfies readonly Plan[]
).map(unitLoop);

/** Where the records of the unit and their list lie in data/. */
export const unitFolder = 'unit';
export const unitListFile = 'unit-loops.csv';

/** The list of the unit's loops as an audit reads it. */
export function unitList(): string {
  const rows = DEMO_UNIT.map(({ tag, service, response, pvRange: [low, high], pvUnit }) =>
    [
      `${unitFolder}/${tag}.csv`,
      tag,
      service,
      response,
      ...(pvUnit === '%' ? [low, high] : [`${low} ${pvUnit}`, `${high} ${pvUnit}`]),
    ].join(','),
  );
  return `${['file,tag,service,response,pv_low,pv_high', ...rows].join('\n')}\n`;
}

export interface MadeUnitLoop {
  readonly demo: UnitLoop;
  readonly run: LoopRun;
}

/**
 * All loops of the unit over the same hours. The loops that shake others come first in {@link DEMO_UNIT}.
 *
 * @param stretch 0 for the hours kept in data/, another whole number for other hours of the same unit
 */
export function makeDemoUnit(stretch = 0): MadeUnitLoop[] {
  const whole = new Map<string, LoopRun>();
  return DEMO_UNIT.map((demo) => {
    const options = demo.options(stretch);
    const { scanPeriod = 1, logEvery = 1 } = options;
    const before = Math.round(runIn / scanPeriod / logEvery);
    const shaken = demo.shakenBy === null ? {} : shakenOptions(options, demo.shakenBy, whole);
    const run = simulateLoop({ ...options, ...shaken, samples: before + demo.samples });
    whole.set(demo.tag, run);
    return { demo, run: cut(run, before, demo.samplePeriod) };
  });
}

function shakenOptions(options: LoopOptions, by: Shaking, whole: ReadonlyMap<string, LoopRun>): LoopOptions {
  const every = DEMO_UNIT.find(({ tag }) => tag === by.tag)!.samplePeriod;
  const { pv } = whole.get(by.tag)!;
  const middle = mean(pv);
  const lagged = firstOrderLag(
    pv.map((value) => by.coupling * (value - middle)),
    every,
    by.lag,
  );
  const late = Math.round(by.deadTime / every);
  const values = lagged.map((_, k) => lagged[Math.max(0, k - late)]!);
  const disturbance: Disturbance = { kind: 'signal', values, every };
  const name = by.at === 'output' ? 'outputDisturbances' : 'inputDisturbances';
  return { [name]: [...(options[name] ?? []), disturbance] };
}

function cut({ sp, pv, op, travel }: LoopRun, before: number, samplePeriod: number): LoopRun {
  return {
    time: sp.slice(before).map((_, k) => k * samplePeriod),
    sp: sp.slice(before),
    pv: pv.slice(before),
    op: op.slice(before),
    travel: travel.slice(before),
    masterPv: null,
  };
}
