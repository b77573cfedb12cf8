/**
 * Reads a step test: which steps moved the valve, and from that dead band and resolution by their definitions; the
 * response to each; hysteresis from the levels that were reached from below and from above.
 */
import type { Estimate } from '../estimate/stiction-fit';
import type { Note } from '../record/loop-record';
import { quantile } from '../signal/statistics';
import { threeDigits } from '../signal/three-digits';
import { commandSteps } from './command';
import { meanOf } from './means';
import { restNoise } from './stem-motion';
import { stepResponse } from './step-response';
import { average, slopeIn } from './straight-line';
import type { TestRecord } from './test-record';
import type { StepRead } from './valve-test-reading';

/** Where a movement bounds dead band (on reversal) or resolution (in one direction), % of command. */
export interface MovementBracket {
  readonly reversal: boolean;
  /** Step that moved it: index into the steps. */
  readonly step: number;
  /** Command at the movement before, %. */
  readonly reference: number;
  /** The largest range since then that did not move it in this direction, and the one that did. */
  readonly low: number;
  readonly high: number;
  /** Size of the step that made the movement before. */
  readonly stepBefore: number;
}

export interface StepsFindings {
  readonly deadBand: Estimate | null;
  readonly resolution: Estimate | null;
  readonly hysteresis: Estimate | null;
  readonly steps: readonly StepRead[];
  readonly brackets: readonly MovementBracket[];
  /** Level of what was watched before each step and at the end of its dwell. */
  readonly levels: readonly { readonly before: number; readonly after: number }[];
  /** Over all steps that gave them. */
  readonly overall: {
    readonly deadTime: Estimate | null;
    readonly T63: Estimate | null;
    readonly T86: Estimate | null;
    readonly overshoot: Estimate | null;
  };
  readonly watched: 'travel' | 'PV';
  readonly notes: readonly Note[];
}

/** A level has moved when it is off by this many times what levels scatter by themselves (one in a thousand). */
const clearOfScatter = 3.3;
/** Samples of a dwell that a level needs. */
const fewest = 3;
const band = '% of span';

export function readSteps(record: TestRecord): StepsFindings {
  const { op, samplePeriod, response } = record;
  const watched = record.travel ? 'travel' : 'PV';
  const signal = record.travel ?? record.pv!;
  const unit = record.travel ? '%' : record.pvUnit;
  const ramps = !record.travel && response === 'integrating';
  const commands = commandSteps(op);
  const noise = restNoise(op, signal);
  const notes: Note[] = [];

  // Level at the end of every dwell, the one before the first step included; for an integrating PV its slope.
  const dwells = [{ from: 0, to: commands[0]?.at ?? op.length }].concat(
    commands.map(({ at, until }) => ({ from: at, to: until })),
  );
  const level = ramps ? slopeIn : meanIn;
  const ends = dwells.map(({ from, to }) => level(signal, from + Math.floor((2 * (to - from)) / 3), to));
  const middles = dwells.map(({ from, to }) =>
    level(signal, from + Math.floor((to - from) / 3), from + Math.floor((2 * (to - from)) / 3)),
  );
  const long = dwells.map(({ from, to }) => to - from >= 3 * fewest);
  const lastThird = Math.max(1, Math.min(...dwells.map(({ from, to }) => (to - from) / 3)));
  const wanders = dwells.map((_, i) => Math.abs(ends[i]! - middles[i]!)).filter((_, i) => long[i]);
  const own = ramps ? (noise * Math.sqrt(12)) / lastThird ** 1.5 : noise / Math.sqrt(lastThird);
  const scatter = Math.max(own, wanders.length > 0 ? quantile(Float64Array.from(wanders), 0.5) / 0.954 : 0);

  const steps: StepRead[] = [];
  const brackets: MovementBracket[] = [];
  const levels: { before: number; after: number }[] = [];
  let lastMoved: { command: number; direction: number; size: number } | null = null;
  let reached = { up: 0, down: 0 };
  let lastDirection = 0;
  commands.forEach(({ at, until, from, to }, i) => {
    const direction = Math.sign(to - from);
    const before = ends[i]!;
    const after = ends[i + 1]!;
    levels.push({ before, after });
    const change = after - before;
    const gainSign = signOfGain(commands, ends);
    const moved = long[i + 1]! && direction * gainSign * change > clearOfScatter * Math.SQRT2 * scatter;
    if (lastMoved) {
      const range = direction * (to - lastMoved.command);
      const way = direction > 0 ? 'up' : 'down';
      if (moved) {
        brackets.push({
          reversal: direction !== lastMoved.direction,
          step: i,
          reference: lastMoved.command,
          low: Math.max(0, Math.min(reached[way], range)),
          high: range,
          stepBefore: lastMoved.size,
        });
      } else {
        reached[way] = Math.max(reached[way], range);
      }
    }
    if (moved) {
      lastMoved = { command: to, direction, size: Math.abs(to - from) };
      reached = { up: 0, down: 0 };
    }
    const response_ = moved && !ramps;
    const settled = Math.abs(after - middles[i + 1]!) < Math.max(0.1 * Math.abs(change), 3 * scatter);
    const read = response_
      ? stepResponse({ signal, before, after, at, until, noise, settled, samplePeriod })
      : { deadTime: null, T63: null, T86: null, overshoot: null, note: '' };
    const error = 1.645 * Math.SQRT2 * scatter;
    const changeUnit = ramps ? `${unit}/s`.trim() : unit;
    steps.push({
      time: at * samplePeriod,
      from,
      to,
      reversal: lastDirection !== 0 && direction !== lastDirection,
      moved,
      change: long[i + 1]
        ? { value: change, low: change - error, high: change + error, unit: changeUnit }
        : null,
      deadTime: read.deadTime,
      T63: read.T63,
      T86: read.T86,
      overshoot: read.overshoot,
      note: !long[i + 1]
        ? 'The command stood still for too few samples.'
        : !moved
          ? 'No movement that noise does not explain.'
          : ramps
            ? 'PV integrates, so that there is no lasting level to time.'
            : read.note,
    });
    lastDirection = direction;
  });

  const deadBand = bracketed(
    brackets.filter(({ reversal }) => reversal),
    'dead-band',
    'dead band',
    'reversal of the command that moved it',
    notes,
  );
  const resolution = bracketed(
    brackets.filter(({ reversal }) => !reversal),
    'resolution',
    'resolution',
    'second step in one direction that moved it',
    notes,
  );
  const hysteresis = record.travel
    ? stepHysteresis(commands, ends, steps, deadBand, scatter, notes)
    : withoutTravel(notes);
  const all = (of: (step: StepRead) => Estimate | null): Estimate | null => overallOf(steps.map(of));
  return {
    deadBand,
    resolution,
    hysteresis,
    steps,
    brackets,
    levels,
    overall: {
      deadTime: all((step) => step.deadTime),
      T63: all((step) => step.T63),
      T86: all((step) => step.T86),
      overshoot: all((step) => step.overshoot),
    },
    watched,
    notes,
  };
}

function withoutTravel(notes: Note[]): null {
  notes.push({
    code: 'no-hysteresis',
    text: 'Hysteresis is not read from PV: the process stands between it and the valve.',
  });
  return null;
}

/** Whether what was watched rises (1) or falls (-1) with the command. */
function signOfGain(commands: readonly { from: number; to: number }[], ends: readonly number[]): number {
  const sum = commands.reduce((total, { from, to }, i) => total + (to - from) * (ends[i + 1]! - ends[i]!), 0);
  return sum < 0 ? -1 : 1;
}

/** The range that all brackets share, or the mean of their ends where they contradict each other. */
function bracketed(
  brackets: readonly MovementBracket[],
  code: string,
  name: string,
  what: string,
  notes: Note[],
): Estimate | null {
  if (brackets.length === 0) {
    notes.push({ code: `no-${code}`, text: `The ${name} is not resolved: there is no ${what}.` });
    return null;
  }
  // The stem may have moved early in the step before and stopped again, as behind a slow actuator: the interval takes in
  // that the range may count from anywhere in that step. The value is the middle of what the steps say as they stand.
  const low = Math.max(...brackets.map((one) => one.low));
  const high = Math.min(...brackets.map((one) => one.high));
  const widest = {
    low: Math.max(...brackets.map((one) => Math.max(0, one.low - (one.reversal ? one.stepBefore : 0)))),
    high: Math.min(...brackets.map((one) => one.high + (one.reversal ? 0 : one.stepBefore))),
  };
  if (widest.low < widest.high) {
    if (low === 0) {
      notes.push({
        code: `${code}-below-steps`,
        text: `The ${name} is below the smallest step that shows it: it is known only to be at most ${threeDigits(widest.high)} %.`,
      });
    }
    const middle = low < high ? (low + high) / 2 : (widest.low + widest.high) / 2;
    return { value: middle, low: low === 0 ? 0 : widest.low, high: widest.high, unit: band };
  }
  notes.push({
    code: `${code}-scatters`,
    text: `The ${name} differs from one movement to the next: ${brackets.length} brackets have no range in common; their mean is given.`,
  });
  const n = brackets.length;
  const lows = brackets.reduce((sum, one) => sum + one.low, 0) / n;
  const highs = brackets.reduce((sum, one) => sum + one.high, 0) / n;
  const middles = meanOf(
    brackets.map((one) => (one.low + one.high) / 2),
    { each: (highs - lows) / Math.sqrt(12) },
    band,
  );
  return { ...middles, low: Math.min(middles.low, lows), high: Math.max(middles.high, highs) };
}

/** Largest distance between levels at one command, reached in moves down and in moves up, less the dead band. */
function stepHysteresis(
  commands: readonly { to: number }[],
  ends: readonly number[],
  steps: readonly StepRead[],
  deadBand: Estimate | null,
  scatter: number,
  notes: Note[],
): Estimate | null {
  const up = new Map<string, number[]>();
  const down = new Map<string, number[]>();
  commands.forEach(({ to }, i) => {
    const step = steps[i]!;
    if (!step.moved) return;
    const side = step.to > step.from ? up : down;
    const key = to.toFixed(2);
    side.set(key, [...(side.get(key) ?? []), ends[i + 1]!]);
  });
  const separations = [...up].flatMap(([key, levels]) => {
    const others = down.get(key);
    return others ? [average(others) - average(levels)] : [];
  });
  if (separations.length === 0 || deadBand === null) {
    notes.push({
      code: 'no-hysteresis',
      text: deadBand
        ? 'Hysteresis is not resolved: no command was reached both from below and from above with a movement.'
        : 'Hysteresis is not resolved without the dead band, which has to be taken off.',
    });
    return null;
  }
  const largest = Math.max(...separations);
  const error = 1.645 * Math.SQRT2 * scatter;
  return {
    value: Math.max(0, largest - deadBand.value),
    low: Math.max(0, largest - error - deadBand.high),
    high: Math.max(0, largest + error - deadBand.low),
    unit: '% of travel',
  };
}

/** Steps tend to meet the sampling in step, so what one interval leaves open, many leave open too: only scatter averages out. */
function overallOf(found: readonly (Estimate | null)[]): Estimate | null {
  const read = found.filter((one) => one !== null);
  if (read.length === 0) return null;
  const scattered = meanOf(
    read.map(({ value }) => value),
    { each: 0 },
    read[0]!.unit,
  );
  return {
    ...scattered,
    low: Math.min(scattered.low, average(read.map(({ low }) => low))),
    high: Math.max(scattered.high, average(read.map(({ high }) => high))),
  };
}

function meanIn(values: Float64Array, from: number, to: number): number {
  return average(values.subarray(from, to));
}
