/**
 * Tests of the sticky valve of 31-FC-104 as they would be logged: a manual hold, the steps of a plan, a slow stroke with
 * actuator pressure, and strokes at several speeds. All with the stem of `src/valve`; the two-parameter element has no
 * part in them.
 */
import { planValveTest } from '../../src/field-test/plan-valve-test';
import type { TypedValve, ValveTestLimits } from '../../src/field-test/valve-test-plan';
import { createController } from '../../src/process/controller';
import { disturbanceValues } from '../../src/process/disturbance';
import { createLinearProcess } from '../../src/process/linear-process';
import { seededRandom } from '../../src/signal/random';
import { TEXTBOOK_VALVE, textbookStem } from '../../src/valve/stem';

export type ValveTestName =
  | '31-FC-104-hold-test'
  | '31-FC-104-step-test'
  | '31-FC-104-stroke'
  | '31-FC-104-strokes-at-seven-speeds';

export interface ValveTestFile {
  readonly name: ValveTestName;
  readonly story: string;
  readonly csv: string;
}

/** The valve of the demo loop, and what drives it: 0.3 s of lag, 645 cm2, spring from 0.2 bar on. */
export const testedValve = { S: 3.4, J: 1.6, actuatorLag: 0.3, area: 0.0645, springFrom: 0.2 } as const;
/** What is known of the loop beforehand, and what operations agree to. */
export const testedLoop: TypedValve = {
  loop: '31-FC-104',
  S: testedValve.S,
  J: testedValve.J,
  op: 54.4,
  pv: 63.5,
  pvSwing: 1.9,
  pvUnit: 'm3/h',
  period: 128,
  process: { response: 'self-regulating', gain: 1.1, lag: 3, deadTime: 1 },
};
export const agreedLimits: ValveTestLimits = {
  opBand: { low: 45, high: 75 },
  pvBand: { low: 50, high: 85 },
  largestStep: 5,
  longestHold: 700,
  hasSafetyFunction: false,
  isInTripPath: false,
};

const noises = { pv: 0.05, travel: 0.05, pressure: 0.0005 };
const springRange = (TEXTBOOK_VALVE.spring * TEXTBOOK_VALVE.stroke) / testedValve.area / 1e5;
/** Steps of stem and process a second. */
const perSecond = 20;

interface Logged {
  readonly time: number;
  readonly op: number;
  readonly travel: number;
  readonly pv: number;
  readonly pressure: number;
  readonly automatic: boolean;
}

/** Runs the loop; `manual` gives OP at a time, s, or null while the controller is in automatic. */
function run(
  manual: (time: number, lastOp: number) => number | null,
  from: number,
  to: number,
  period: number,
  seed: number,
): Logged[] {
  const random = seededRandom(seed);
  const startOp = from < 0 ? 52 : (manual(0, 52) ?? 52);
  const stem = textbookStem({
    S: testedValve.S,
    J: testedValve.J,
    actuatorLag: testedValve.actuatorLag,
    startOp,
  });
  const process = createLinearProcess(
    { gain: 1.1, lags: [3], deadTime: 1, restInput: 52, restOutput: 60 },
    1 / perSecond,
  );
  const controller = createController({ gain: 0.45, integralTime: 7, bias: 52 }, 1);
  const steps = Math.round(period * perSecond);
  const disturbance = disturbanceValues(
    { kind: 'ima', spread: 0.02, theta: 0.5, every: 1, seed: seed + 1 },
    Math.ceil((to - from + 2) * perSecond),
    1 / perSecond,
  );
  const rows: Logged[] = [];
  let done = 0;
  let op = startOp;
  let drive = startOp;
  let pv = process.output;
  for (let k = Math.round(from / period); k * period <= to; k++) {
    const time = k * period;
    const stated = manual(time, op);
    if (stated !== null) op = stated;
    else if (Number.isInteger(time)) {
      // Loops are begun with a step of the set point, which sets the cycle off.
      op =
        Math.round(100 * controller.scan(time < from + 100 ? 60 : 63.5, pv + noises.pv * random.normal())) /
        100;
    }
    for (let i = 0; i < steps; i++) {
      const travel = stem.advance(op, 1 / perSecond);
      pv = process.advance(travel) + disturbance[Math.min(done++, disturbance.length - 1)]!;
      drive = op + (drive - op) * Math.exp(-1 / perSecond / testedValve.actuatorLag);
    }
    if (time < 0) continue;
    rows.push({
      time,
      op,
      travel: stem.travel + noises.travel * random.normal(),
      pv: pv + noises.pv * random.normal(),
      pressure: testedValve.springFrom + (springRange * drive) / 100 + noises.pressure * random.normal(),
      automatic: stated === null,
    });
  }
  return rows;
}

function csv(
  rows: readonly Logged[],
  start: string,
  columns: readonly ('op' | 'travel' | 'pv' | 'pressure' | 'mode')[],
): string {
  const names = { op: 'OP', travel: 'TRAVEL', pv: 'PV [m3/h]', pressure: 'PRESSURE [bar]', mode: 'MODE' };
  const begin = Date.parse(start);
  const written = (row: Logged, column: (typeof columns)[number]): string => {
    if (column === 'mode') return row.automatic ? 'AUTO' : 'MAN';
    return row[column].toFixed({ op: 2, travel: 2, pv: 2, pressure: 4 }[column]);
  };
  const lines = rows.map((row) => {
    const stamp = new Date(begin + Math.round(1000 * row.time)).toISOString().replace('.000Z', 'Z');
    return [stamp, ...columns.map((column) => written(row, column))].join(',');
  });
  return `${[['time', ...columns.map((column) => `31-FC-104.${names[column]}`)].join(','), ...lines].join('\n')}\n`;
}

/** OP along ramps between `points` at rates in %/s, resting `rest` s at each. */
function ramps(
  points: readonly { op: number; rate: number }[],
  start: number,
  rest: number,
): { at: (time: number) => number; seconds: number } {
  const knots = [
    { time: 0, op: start },
    { time: rest, op: start },
  ];
  for (const { op, rate } of points) {
    const last = knots[knots.length - 1]!;
    const time = last.time + Math.abs(op - last.op) / rate;
    knots.push({ time, op }, { time: time + rest, op });
  }
  const at = (time: number): number => {
    const next = knots.findIndex((knot) => knot.time >= time);
    if (next <= 0) return next === 0 ? start : knots[knots.length - 1]!.op;
    const [a, b] = [knots[next - 1]!, knots[next]!];
    const value = b.time > a.time ? a.op + ((b.op - a.op) * (time - a.time)) / (b.time - a.time) : b.op;
    return Math.round(1000 * value) / 1000;
  };
  return { at, seconds: knots[knots.length - 1]!.time };
}

/** The four files; equal on every machine. */
export function makeValveTests(): ValveTestFile[] {
  const holdFrom = 1300;
  const hold = run((time, op) => (time < holdFrom ? null : op), -1800, holdFrom + 640, 1, 41);

  const planned = planValveTest(testedLoop, agreedLimits).tests.find(({ kind }) => kind === 'step')!;
  const dwell = planned.moves[0]!.hold;
  const opAt = (time: number): number => {
    const done = Math.floor(time / dwell) - 1;
    return done < 0 ? planned.startOp : planned.moves[Math.min(done, planned.moves.length - 1)]!.op;
  };
  const steps = run(opAt, 0, (planned.moves.length + 1) * dwell - 1, 1, 42);

  const slow = ramps(
    [65, 45, 65, 45, 55].map((op) => ({ op, rate: 0.1 })),
    55,
    10,
  );
  const stroke = run(slow.at, 0, slow.seconds, 0.5, 43);

  const rates = [1, 1.5, 2, 3, 4, 6, 8];
  const fast = ramps(
    rates.flatMap((rate) => [80, 20, 80, 20].map((op) => ({ op, rate }))),
    20,
    3,
  );
  const strokes = run(fast.at, 0, fast.seconds, 0.1, 44);
  return [
    {
      name: '31-FC-104-hold-test',
      story: 'Twenty-two minutes in automatic, then ten in manual at constant OP: the cycle dies.',
      csv: csv(hold, '2026-03-10T09:00:00Z', ['op', 'pv', 'mode']),
    },
    {
      name: '31-FC-104-step-test',
      story: 'The steps of a plan, in manual, with travel.',
      csv: csv(steps, '2026-03-10T10:00:00Z', ['op', 'travel', 'pv', 'mode']),
    },
    {
      name: '31-FC-104-stroke',
      story: 'Slow strokes of 20 % with the line shut down, travel and actuator pressure logged every 0.5 s.',
      csv: csv(stroke, '2026-03-11T07:00:00Z', ['op', 'travel', 'pressure']),
    },
    {
      name: '31-FC-104-strokes-at-seven-speeds',
      story: 'Strokes of 60 % at seven speeds, logged every 0.1 s.',
      csv: csv(strokes, '2026-03-11T08:00:00Z', ['op', 'travel', 'pressure']),
    },
  ];
}
