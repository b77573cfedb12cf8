/**
 * Makes the closed loops of the accuracy suite. Written before the estimator was brought to its targets and kept as it
 * was: loosening it to reach a number is not a way. The ranges of processes and tunings stand in `plant.ts`, those of
 * valves in `assembly.ts`; here are the rest:
 *
 * - services: every second case is flow, the others pressure, temperature, level in turn;
 * - measurement noise, whatever the kind, in three strengths (standard deviation, % of PV range): low 0.02-0.05,
 *   middle 0.08-0.15, high 0.25-0.45 (log), times 1 for flow, 0.6 pressure, 0.4 level, 0.25 temperature;
 * - drift: an IMA(1,1) of theta 0-0.6 at each second that wanders 0.02-0.3 % (log) within one closed-loop time
 *   constant, on PV when self-regulating, on the load when integrating;
 * - a fifth of the flow loops are slaves of a cascade (level or temperature master, one in five with a P-only slave;
 *   SP moves at each scan or each 2nd or 5th, and half of them have it logged one sample late);
 * - a fifth of the others have 1 to 4 set-point steps of 1-4 %;
 * - rounding of PV: none, 1/4096 or 1/1000 of range; of OP: none, 0.025 % or 0.1 %;
 * - one in twelve is compressed (PV and OP; exception or swinging door, 0.1-0.6 % of range);
 * - logged at 0.5-20 s, scanned at 0.5-2 s; 1800-7200 samples; 20-200 samples and 8-60 cycles aimed at, never below
 *   12 and 6;
 * - kinds: see {@link KINDS}. A case of stiction or lost motion is drawn again until OP swings by more than 0.6 S again
 *   and again in a trial run without measurement noise.
 */
import { createHash } from 'node:crypto';
import { fitTruth, type ValveTruth } from '../../data/make/truth';
import type { Verdict } from '../../src/assessment/assessment';
import { type LoopOptions, type MasterOptions, simulateLoop } from '../../src/process/closed-loop';
import type { ControllerOptions } from '../../src/process/controller';
import type { Disturbance } from '../../src/process/disturbance';
import type { LoopRecord, Range } from '../../src/record/loop-record';
import { equalPercentageFlow } from '../../src/valve/characteristic';
import { type Assembly, drawAssembly } from './assembly';
import { compressByException, compressBySwingingDoor } from './compress';
import { createDraw, type Draw } from './draw';
import { controllerOf, drawPlant, type Plant, processOf, type TestedService } from './plant';

/** Kinds and what the answer should be; `share` is the number of cases in a round of its group. */
export const KINDS = {
  stiction: { group: 'stiction', cause: 'stiction', share: 6 },
  /** A sine or square wave from outside shakes the sticky loop as well. */
  'stiction-disturbed': { group: 'stiction', cause: 'stiction', share: 1 },
  /** Good valve; gain at 0.88-0.98 of the stability limit, or (one in four) the integral time near its limit. */
  'tight-tuning': { group: 'other', cause: 'tight-tuning', share: 5 },
  /** Good valve; sine of 0.7-5 % on PV (1-8 % of flow on the load when integrating). */
  'outside-sine': { group: 'other', cause: 'outside-disturbance', share: 5 },
  'outside-square': { group: 'other', cause: 'outside-disturbance', share: 3 },
  /** Worn linkage of 0.8-6 % on an integrating process under PI control. */
  'lost-motion': { group: 'other', cause: 'lost-motion', share: 4 },
  /** Good valve, moderate tuning, noise and drift alone. */
  'healthy-noise': { group: 'other', cause: 'not-oscillating', share: 4 },
  /** An outside sine so large that OP stands at one of its limits for part of each cycle. */
  'clipped-op': { group: 'other', cause: 'outside-disturbance', share: 2 },
} as const satisfies Record<string, { group: 'stiction' | 'other'; cause: Verdict; share: number }>;

export type Kind = keyof typeof KINDS;
export type NoiseStrength = 'low' | 'middle' | 'high';

export interface AccuracyCase {
  /** Group and seed, e.g. `stiction-100017`. */
  readonly id: string;
  readonly kind: Kind;
  readonly cause: Verdict;
  readonly service: TestedService;
  readonly noise: NoiseStrength;
  readonly form: Plant['form'];
  readonly cascade: boolean;
  readonly compressed: boolean;
  readonly setPointSteps: boolean;
  /** As built; see `assembly.ts`. */
  readonly valve: Pick<Assembly, 'sort' | 'S' | 'J' | 'lag' | 'equalPercentage'>;
  /** PV units per % of travel (per % and second when integrating) where the loop works, with its sign; s. */
  readonly processGain: number;
  readonly deadTime: number;
  /** Period of the cycle as expected from a trial run or the disturbance, s. */
  readonly period: number;
  /** S and J of the two-parameter element that fits the true travel; null for good valves and where it does not move. */
  readonly truth: ValveTruth | null;
  /** Slip in PV over the standard deviation of its noise: median true travel jump times process gain. */
  readonly slipOverNoise: number;
  /** Stiction that the record shows: S of at least 0.5 % and a slip of at least three times the noise. */
  readonly visible: boolean;
  /** Without travel, as the program gets it. */
  readonly record: LoopRecord;
  /** True travel at the samples of the record, %. */
  readonly trueTravel: Float64Array;
}

const SERVICES: readonly TestedService[] = ['pressure', 'temperature', 'level'];
const NOISE: Record<NoiseStrength, Range> = {
  low: { low: 0.02, high: 0.05 },
  middle: { low: 0.08, high: 0.15 },
  high: { low: 0.25, high: 0.45 },
};
const NOISE_OF_SERVICE = { flow: 1, pressure: 0.6, level: 0.4, temperature: 0.25 } as const;
const PV_RANGES: Record<TestedService, { range: Range; unit: string; letter: string }> = {
  flow: { range: { low: 0, high: 120 }, unit: 'm3/h', letter: 'F' },
  pressure: { range: { low: 0, high: 600 }, unit: 'kPa', letter: 'P' },
  temperature: { range: { low: 20, high: 140 }, unit: 'degC', letter: 'T' },
  level: { range: { low: 0, high: 100 }, unit: '%', letter: 'L' },
};
const FEWEST_SAMPLES = 1800;
const MOST_SAMPLES = 7200;
const FEWEST_SAMPLES_A_CYCLE = 12;
const FEWEST_CYCLES = 6;
/** Scans of a case, so that none takes long to make. */
const MOST_SCANS = 60_000;
const MOST_ATTEMPTS = 400;

/**
 * Case number `index` of its group in the set that begins at `seed`. Equal arguments give equal cases.
 */
export function makeCase(group: 'stiction' | 'other', seed: number, index: number): AccuracyCase {
  const kind = kindOf(group, index);
  const caseSeed = seed + 1000 * index + (group === 'stiction' ? 0 : 500_000_000);
  for (let attempt = 0; attempt < MOST_ATTEMPTS; attempt++) {
    const made = tryCase(kind, index, createDraw(caseSeed + attempt), `${group}-${seed}-${index}`);
    if (made !== null) return made;
  }
  throw new Error(`No loop of kind ${kind} came out of seed ${caseSeed}.`);
}

function kindOf(group: 'stiction' | 'other', index: number): Kind {
  const round = Object.entries(KINDS).flatMap(([kind, facts]) =>
    facts.group === group
      ? Array.from({ length: facts.share }, (_, i) => ({ kind: kind as Kind, at: (i + 0.5) / facts.share }))
      : [],
  );
  // Kinds are spread over the round so that each service meets each of them.
  round.sort((a, b) => a.at - b.at || (a.kind < b.kind ? -1 : 1));
  return round[index % round.length].kind;
}

/** A loop that may not turn out as its kind asks: then null, and it is drawn again. */
function tryCase(kind: Kind, index: number, draw: Draw, id: string): AccuracyCase | null {
  let service: TestedService = index % 2 === 0 ? 'flow' : SERVICES[Math.floor(index / 2) % SERVICES.length];
  if (kind === 'lost-motion') service = draw.oneOf(['level', 'pressure'], [0.7, 0.3]);
  let plant = drawPlant(draw, service, kind === 'lost-motion');
  const sticky = KINDS[kind].group === 'stiction';
  const assembly = drawAssembly(
    draw,
    service,
    sticky ? 'sticky' : kind === 'lost-motion' ? 'worn-linkage' : 'good',
  );
  const cascade = service === 'flow' && kind !== 'clipped-op' && draw.chance(0.2);
  if (cascade && draw.chance(0.2))
    plant = { ...plant, form: 'P', controllerGain: draw.between(0.4, 1.2) / plant.gain };
  if (kind === 'lost-motion' && plant.form !== 'PI') return null;

  const noise = draw.oneOf(['low', 'middle', 'high'] as const);
  const noiseSd = draw.logBetween(NOISE[noise].low, NOISE[noise].high) * NOISE_OF_SERVICE[service];
  const restFlow =
    assembly.equalPercentage === null
      ? plant.restOp
      : equalPercentageFlow(plant.restOp, assembly.equalPercentage);
  const flowGain =
    assembly.equalPercentage === null ? 1 : (restFlow * Math.log(assembly.equalPercentage)) / 100;
  const theta = draw.between(0, 0.6);
  const drift: Disturbance = {
    kind: 'ima',
    spread:
      (draw.logBetween(0.02, 0.3) * (plant.integrating ? flowGain : 1)) /
      (Math.sqrt(plant.speed) * (1 - theta)),
    theta,
    every: 1,
    seed: draw.seed(),
  };
  const outside = drawOutside(draw, kind, plant, flowGain);
  let controller: ControllerOptions = controllerOf(plant);
  if (kind === 'tight-tuning') {
    const tight = tightened(draw, plant, assembly.lag);
    if (tight === null) return null;
    controller = tight;
  }
  const master = cascade ? drawMaster(draw, plant) : null;
  const kick = draw.between(2, 5) * (draw.chance(0.5) ? 1 : -1);
  const disturbances = outside === null ? [drift] : [drift, outside];
  const base: LoopOptions = {
    scanPeriod: plant.scanPeriod,
    stepsPerScan: 2,
    controller,
    equalPercentage: assembly.equalPercentage,
    process: processOf(plant, restFlow, flowGain),
    outputDisturbances: plant.integrating ? [] : disturbances,
    inputDisturbances: plant.integrating ? disturbances : [],
    noise: noiseSd,
    seed: draw.seed(),
    pvStep: draw.oneOf([0, 100 / 4096, 0.1], [0.4, 0.4, 0.2]),
    opStep: draw.oneOf([0, 0.025, 0.1], [0.4, 0.4, 0.2]),
    master,
  };

  const trialTime = Math.min(20_000 * plant.scanPeriod, Math.max(3000, 150 * plant.speed));
  const knownPeriod = outside?.period ?? 15 * plant.speed;
  const showsItsPeriod = sticky || kind === 'lost-motion' || kind === 'tight-tuning';
  const trial = (): Float64Array =>
    simulateLoop({
      ...base,
      samples: Math.round(trialTime / plant.scanPeriod),
      noise: sticky || kind === 'lost-motion' ? 0 : noiseSd,
      valve: assembly.create(plant.restOp),
      setPoint: (time) => plant.restPv + (time < 20 * plant.scanPeriod ? 0 : kick),
    }).op;
  const period = showsItsPeriod ? periodOf(kind, plant, assembly, trial()) : knownPeriod;
  if (period === null) return null;
  const logging = drawLogging(draw, plant, period);
  if (logging === null) return null;

  const runIn = Math.max(trialTime / 4, 5 * period);
  const length = logging.samples * logging.period;
  const steps = !cascade && draw.chance(0.2) ? drawSetPointSteps(draw, length) : [];
  const run = simulateLoop({
    ...base,
    controller: kind === 'clipped-op' ? clipped(draw, controller, trial()) : controller,
    samples: logging.samples,
    logEvery: Math.round(logging.period / plant.scanPeriod),
    runIn,
    valve: assembly.create(plant.restOp),
    setPoint: (time) =>
      plant.restPv +
      (time < 20 * plant.scanPeriod - runIn ? 0 : kick) +
      steps.reduce((sum, step) => sum + (time >= step.time ? step.size : 0), 0),
  });
  if (kind !== 'clipped-op' && touchesLimits(run.op, 1, 99)) return null;

  const compression = draw.chance(1 / 12) ? draw.oneOf([compressByException, compressBySwingingDoor]) : null;
  const deviation = draw.between(0.1, 0.6);
  const thin = (values: Float64Array): Float64Array =>
    compression === null ? values : compression(values, deviation);
  const spLate = cascade && draw.chance(0.5);
  const { range, unit, letter } = PV_RANGES[service];
  const toUnit = (value: number): number => range.low + (value * (range.high - range.low)) / 100;
  const sp = run.sp.map((_, k) => toUnit(run.sp[spLate ? Math.max(0, k - 1) : k]));

  const truth =
    sticky || kind === 'lost-motion' ? fitTruth(run.op, run.travel, { S: assembly.S, J: assembly.J }) : null;
  const jump = medianJump(run.travel, assembly, logging.period) ?? assembly.J;
  const slip = jump * plant.gain * (plant.integrating ? period / 4 : 1);
  const pvPerPercent = (range.high - range.low) / 100;
  return {
    id,
    kind,
    cause: KINDS[kind].cause,
    service,
    noise,
    form: plant.form,
    cascade,
    compressed: compression !== null,
    setPointSteps: steps.length > 0,
    valve: {
      sort: assembly.sort,
      S: assembly.S,
      J: assembly.J,
      lag: assembly.lag,
      equalPercentage: assembly.equalPercentage,
    },
    processGain: plant.sign * plant.gain * pvPerPercent,
    deadTime: plant.deadTime,
    period,
    truth,
    slipOverNoise: slip / noiseSd,
    visible: sticky && (truth?.S ?? 0) >= 0.5 && slip >= 3 * noiseSd,
    record: recordOf({
      id,
      loop: `31-${letter}C-${200 + (index % 700)}`,
      service,
      integrating: plant.integrating,
      samplePeriod: logging.period,
      pv: thin(run.pv).map(toUnit),
      sp,
      op: thin(run.op),
      unit,
      range,
    }),
    trueTravel: run.travel,
  };
}

/** The wave from outside that a kind asks for; null without one. */
function drawOutside(
  draw: Draw,
  kind: Kind,
  plant: Plant,
  flowGain: number,
): (Disturbance & { period: number; amplitude: number }) | null {
  const shape =
    kind === 'outside-sine' || kind === 'clipped-op'
      ? 'sine'
      : kind === 'outside-square'
        ? 'square'
        : kind === 'stiction-disturbed'
          ? draw.oneOf(['sine', 'square'] as const)
          : null;
  if (shape === null) return null;
  const period = plant.speed * (plant.integrating ? draw.logBetween(3, 30) : draw.logBetween(5, 50));
  const strongest = kind === 'stiction-disturbed' ? 2 : 5;
  const amplitude = plant.integrating
    ? draw.logBetween(1, 1.6 * strongest) * flowGain
    : draw.logBetween(kind === 'stiction-disturbed' ? 0.3 : 0.7, strongest);
  return { kind: shape, amplitude, period, phase: draw.between(0, 2 * Math.PI) };
}

/** A master whose closed loop is several times slower than its slave. */
function drawMaster(draw: Draw, slave: Plant): MasterOptions {
  const every = draw.oneOf([1, 2, 5], [0.6, 0.2, 0.2]);
  const deadTime = draw.between(0, 10);
  const integrating = draw.chance(0.6);
  const delay = deadTime + 2 * slave.speed + every * slave.scanPeriod;
  const speed = Math.max(4 * delay, draw.logBetween(40, 300));
  const lag = draw.logBetween(20, 120);
  const gain = integrating ? draw.logBetween(0.001, 0.008) : draw.between(0.5, 1.5);
  const restPv = draw.between(40, 60);
  return {
    controller: {
      form: integrating && slave.form !== 'P' && draw.chance(0.3) ? 'P' : 'PI',
      gain: integrating ? Math.min(5, 2 / (gain * speed)) : lag / (gain * (0.5 * speed + delay)),
      integralTime: integrating ? 2 * Math.max(speed, 2 / (gain * 5)) : lag,
      bias: slave.restPv,
    },
    process: {
      response: integrating ? 'integrating' : 'self-regulating',
      gain,
      lags: integrating ? [] : [lag],
      deadTime,
      restInput: slave.restPv,
      restOutput: restPv,
    },
    setPoint: restPv + draw.between(1, 3) * (draw.chance(0.5) ? 1 : -1),
    every,
    noise: draw.logBetween(0.01, 0.1),
  };
}

/** The controller with its gain (or its integral time) taken close to the stability limit; null without such a limit. */
function tightened(draw: Draw, plant: Plant, actuatorLag: number): ControllerOptions | null {
  const base = controllerOf(plant);
  const byIntegral = plant.form === 'PI' && draw.chance(0.25);
  const at = (factor: number): ControllerOptions =>
    byIntegral
      ? { ...base, integralTime: (base.integralTime ?? 60) / factor }
      : { ...base, gain: (base.gain ?? 1) * factor };
  const delay = plant.deadTime + actuatorLag + plant.scanPeriod;
  const scans = Math.min(6000, Math.round((60 * (delay + plant.speed)) / plant.scanPeriod));
  const grows = (factor: number): boolean => {
    const { pv } = simulateLoop({
      samples: scans,
      scanPeriod: plant.scanPeriod,
      stepsPerScan: 2,
      setPoint: (time) => plant.restPv + (time < 2 * plant.scanPeriod ? 0 : 1),
      controller: { ...at(factor), low: -1e6, high: 1e6 },
      process: { ...processOf(plant, plant.restOp, 1), deadTime: plant.deadTime + actuatorLag },
    });
    const third = Math.floor(scans / 3);
    return swing(pv.subarray(2 * third)) > swing(pv.subarray(third, 2 * third));
  };
  let calm = 0.5;
  let wild = 60;
  if (grows(calm) || !grows(wild)) return null;
  while (wild / calm > 1.005) {
    const middle = Math.sqrt(calm * wild);
    if (grows(middle)) wild = middle;
    else calm = middle;
  }
  return at(calm * draw.between(0.88, 0.98));
}

/** Output limits so near that the disturbance drives OP against one of them for part of its cycle. */
function clipped(draw: Draw, controller: ControllerOptions, trialOp: Float64Array): ControllerOptions {
  const sorted = trialOp.slice(Math.floor(trialOp.length / 3)).sort();
  const share = draw.between(0.1, 0.35);
  const at = (quantile: number): number => sorted[Math.floor(quantile * (sorted.length - 1))];
  return draw.chance(0.5) ? { ...controller, high: at(1 - share) } : { ...controller, low: at(share) };
}

/** Period of the cycle that a trial run shows, s; null when it does not do what its kind asks. */
function periodOf(kind: Kind, plant: Plant, assembly: Assembly, trialOp: Float64Array): number | null {
  const op = trialOp.subarray(Math.floor(trialOp.length / 3));
  const time = op.length * plant.scanPeriod;
  if (touchesLimits(op, 2, 98)) return null;
  if (kind === 'tight-tuning') {
    if (swing(op) > 40 || swing(op) < 5 * assembly.S) return null;
    const turns = reversals(op, 0.3 * swing(op));
    return turns >= 8 ? (2 * time) / turns : null;
  }
  const turns = reversals(op, 0.6 * assembly.S);
  return turns >= 5 ? (2 * time) / turns : null;
}

/** A logging period and length that give the record enough samples a cycle and cycles; null when none does. */
function drawLogging(draw: Draw, plant: Plant, cycle: number): { period: number; samples: number } | null {
  const aim = draw.logBetween(20, 200);
  const cycles = draw.logBetween(8, 60);
  const off = (period: number): number => Math.abs(Math.log(cycle / period / aim));
  const fitting = plant.logPeriods.filter(
    (period) => cycle / period >= FEWEST_SAMPLES_A_CYCLE && (MOST_SAMPLES * period) / cycle >= FEWEST_CYCLES,
  );
  if (fitting.length === 0) return null;
  const period = fitting.reduce((best, one) => (off(one) < off(best) ? one : best));
  const wanted = Math.max(FEWEST_SAMPLES, Math.round((cycles * cycle) / period));
  const samples = Math.min(MOST_SAMPLES, Math.floor((MOST_SCANS * plant.scanPeriod) / period), wanted);
  const enough = samples >= FEWEST_SAMPLES && (samples * period) / cycle >= FEWEST_CYCLES;
  return enough ? { period, samples } : null;
}

function drawSetPointSteps(draw: Draw, length: number): { time: number; size: number }[] {
  return Array.from({ length: draw.oneOf([1, 2, 3, 4]) }, (_, i) => ({
    time: draw.between(0.05, 0.95) * length,
    size: draw.between(1, 4) * (i % 2 === 0 ? 1 : -1),
  }));
}

/** Number of turns of a signal that go back by more than `least`. */
function reversals(values: Float64Array, least: number): number {
  let turns = 0;
  let direction = 0;
  let extreme = values[0];
  for (const value of values) {
    const back = direction === 0 ? Math.abs(value - extreme) : direction * (extreme - value);
    if (back > least) {
      direction = direction === 0 ? Math.sign(value - extreme) : -direction;
      turns++;
      extreme = value;
    } else if (direction * (value - extreme) > 0) extreme = value;
  }
  return turns;
}

/** Median size of the moves that begin from rest and take no longer than a few samples; null without any. */
function medianJump(travel: Float64Array, assembly: Assembly, samplePeriod: number): number | null {
  const longest = Math.ceil((4 * assembly.lag) / samplePeriod) + 2;
  const jumps: number[] = [];
  let start = -1;
  for (let k = 1; k < travel.length; k++) {
    const moves = Math.abs(travel[k] - travel[k - 1]) > 1e-3 * assembly.S;
    if (moves && start === -1) start = k - 1;
    if (!moves && start !== -1) {
      const size = Math.abs(travel[k - 1] - travel[start]);
      if (k - 1 - start <= longest && size > 0.2 * assembly.J) jumps.push(size);
      start = -1;
    }
  }
  jumps.sort((a, b) => a - b);
  return jumps.length === 0 ? null : jumps[Math.floor(jumps.length / 2)];
}

function touchesLimits(op: Float64Array, low: number, high: number): boolean {
  return op.some((value) => value < low || value > high);
}

function swing(values: Float64Array): number {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const value of values) {
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  return high - low;
}

function recordOf(made: {
  id: string;
  loop: string;
  service: TestedService;
  integrating: boolean;
  samplePeriod: number;
  pv: Float64Array;
  sp: Float64Array;
  op: Float64Array;
  unit: string;
  range: Range;
}): LoopRecord {
  const hash = createHash('sha256');
  for (const column of [made.sp, made.pv, made.op]) hash.update(new Uint8Array(column.buffer));
  return {
    loop: made.loop,
    service: made.service,
    response: made.integrating ? 'integrating' : 'self-regulating',
    source: `${made.id}.csv`,
    sha256: hash.digest('hex'),
    start: '2026-03-04T06:00:00.000Z',
    samplePeriod: made.samplePeriod,
    pv: made.pv,
    sp: made.sp,
    op: made.op,
    travel: null,
    pvUnit: made.unit,
    pvRange: made.range,
    logging: {
      rows: made.op.length,
      duplicates: 0,
      gaps: 0,
      longestGap: made.samplePeriod,
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
