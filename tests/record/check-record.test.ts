import { join } from 'node:path';
import { beforeAll, describe, expect, it } from 'vitest';
import { type LoopOptions, simulateLoop } from '../../src/process/closed-loop';
import { checkRecord } from '../../src/record/check-record';
import type { Fitness, FitnessCheck } from '../../src/record/fitness';
import type { LoggingFacts, LoopRecord } from '../../src/record/loop-record';
import { readLoop } from '../../src/record/read-loop';
import { seededRandom } from '../../src/signal/random';
import type { SteppableValve } from '../../src/valve/steppable-valve';

const logging: LoggingFacts = {
  rows: 3600,
  duplicates: 0,
  gaps: 0,
  longestGap: 0,
  manualShare: 0,
  badShare: 0,
  filledShare: 0,
  skew: 0,
  modeLogged: true,
  keptShare: 1,
};

/** A flow loop with a sticky valve, as a historian logs it: 1 s, OP and PV rounded. */
const sticky: LoopOptions = {
  samples: 3600,
  setPoint: 50,
  controller: { form: 'PI', gain: 0.5, integralTime: 12, bias: 50 },
  process: { gain: 1, lags: [3], deadTime: 1, restInput: 50, restOutput: 50 },
  noise: 0.1,
  pvStep: 0.01,
  opStep: 0.01,
};

function record(options: LoopOptions = {}, change: Partial<LoopRecord> = {}): LoopRecord {
  const settings = { ...sticky, ...options };
  const run = simulateLoop({ valve: stickyValve(4, 1.5), ...settings });
  return {
    loop: '31-FC-104',
    service: 'flow',
    response: 'self-regulating',
    source: '31-FC-104.csv',
    sha256: '0'.repeat(64),
    start: '2026-03-04T06:00:00.000Z',
    samplePeriod: (settings.scanPeriod ?? 1) * (settings.logEvery ?? 1),
    pv: run.pv,
    sp: run.sp,
    op: run.op,
    travel: null,
    pvUnit: 'm3/h',
    pvRange: { low: 0, high: 100 },
    logging,
    notes: [],
    ...change,
  };
}

const check = (fitness: Fitness, code: string): FitnessCheck =>
  fitness.checks.find((one) => one.code === code)!;
const failed = (fitness: Fitness): string[] =>
  fitness.checks.filter(({ passed }) => !passed).map(({ code }) => code);
const logged = (facts: Partial<LoggingFacts>): Fitness =>
  checkRecord({ ...whole, logging: { ...logging, ...facts } });

let whole: LoopRecord;
beforeAll(() => {
  whole = record();
});

describe('checkRecord lets sound records pass', () => {
  it.each([
    ['as simulated', {}],
    ['with OP rounded to 0.1 % and PV to 0.1', { opStep: 0.1, pvStep: 0.1 }],
    ['without rounding', { opStep: 0, pvStep: 0 }],
    ['with hardly any noise, so that a stuck valve gives honest ramps', { noise: 0.002, pvStep: 0.05 }],
    ['with much noise', { noise: 0.4 }],
    ['logged at every fifth scan', { logEvery: 5, samples: 1800 }],
    [
      'under integral action alone',
      { controller: { form: 'I' as const, gain: 0.5, integralTime: 12, bias: 50 } },
    ],
    ['with set-point steps', { setPoint: (time: number) => 50 + 2 * (Math.floor(time / 900) % 2) }],
  ])('%s', (_, options) => {
    const fitness = checkRecord(record(options));
    expect(failed(fitness)).toEqual([]);
    expect(fitness.allows).toEqual({ cycle: true, cause: true, numbers: true });
  });

  it.each(['31-FC-104', '31-FC-104-with-travel', '31-FC-131', '31-LC-140', '31-PC-122'])(
    'and the demo loop %s',
    (name) => {
      const fitness = checkRecord(readLoop(join(__dirname, '../../data', `${name}.csv`)));
      expect(fitness.allows).toEqual({ cycle: true, cause: true, numbers: true });
    },
  );

  it('and a slave whose SP moves at every scan and is logged a sample late', () => {
    const slave = record({
      setPoint: (time) => 50 + 3 * Math.sin(time / 20),
      controller: { form: 'PI', gain: 0.8, integralTime: 6, bias: 50 },
    });
    const late = slave.sp!.map((_, i) => slave.sp![Math.max(0, i - 1)]!);
    const fitness = checkRecord({ ...slave, sp: late });
    expect(check(fitness, 'op-explained')).toMatchObject({ passed: true });
    expect(check(fitness, 'op-explained').value).toBeGreaterThan(0.9);
    // SP is an input: that it moves most of OP is said, and forbids nothing.
    expect(check(fitness, 'sp-movement')).toMatchObject({ passed: false, forbids: [] });
    expect(fitness.allows.numbers).toBe(true);
  });

  it('says of every check where its limit is from, in words that stand alone', () => {
    for (const { source, text, title, limit } of checkRecord(whole).checks) {
      expect(source).toMatch(/^own choice: .{20}|\d{4}, .*value from memory/);
      expect(text).toMatch(/^[\p{L}\d].*\.$/u);
      expect(title.length * limit.length).toBeGreaterThan(0);
    }
    expect(checkRecord(whole).recordToAskFor).toMatch(/20 samples in a cycle.*20 cycles/);
  });
});

describe('checkRecord forbids everything', () => {
  it.each([
    [
      'a short record',
      'samples',
      () => ({ ...whole, pv: whole.pv.slice(0, 20), op: whole.op.slice(0, 20), sp: whole.sp!.slice(0, 20) }),
    ],
    ['a constant OP', 'op-constant', () => ({ ...whole, op: whole.op.map(() => 42) })],
    ['a frozen PV', 'pv-frozen', () => ({ ...whole, pv: whole.pv.map(() => 42) })],
    ['a loop in manual', 'manual', () => ({ ...whole, logging: { ...logging, manualShare: 1 } })],
  ])('for %s', (_, code, make) => {
    const fitness = checkRecord(make());
    expect(failed(fitness)).toContain(code);
    expect(fitness.allows).toEqual({ cycle: false, cause: false, numbers: false });
  });
});

describe('checkRecord forbids cause or numbers', () => {
  it('when a cycle has too few samples', () => {
    const fast = (size: number, phase: number): Float64Array =>
      whole.op.map((_, i) => 50 + size * Math.sin((2 * Math.PI * i) / 5 + phase));
    expect(
      check(checkRecord({ ...whole, op: fast(3, 0), pv: fast(1, 2) }), 'samples-per-cycle'),
    ).toMatchObject({
      passed: false,
      forbids: ['cause', 'numbers'],
      text: 'A cycle has 5 samples; below 7 its shape is lost.',
    });
    expect(check(checkRecord(whole), 'samples-per-cycle').value).toBeGreaterThan(20);
  });

  it('when OP turns round fewer than ten times', () => {
    const short = {
      ...whole,
      pv: whole.pv.slice(0, 150),
      op: whole.op.slice(0, 150),
      sp: whole.sp!.slice(0, 150),
    };
    expect(check(checkRecord(short), 'reversals')).toMatchObject({ passed: false, forbids: ['numbers'] });
  });

  it.each([
    ['filled', { filledShare: 0.15 }, ['numbers']],
    ['filled', { filledShare: 0.4 }, ['cause', 'numbers']],
    ['skew', { skew: 20 }, ['numbers']],
  ] as const)('for too much %s', (code, facts, forbids) => {
    expect(check(logged(facts), code)).toMatchObject({ passed: false, forbids });
  });

  it.each([
    ['filled', { filledShare: 0.05 }],
    ['skew', { skew: 0.5 }],
    ['kept', { keptShare: 0.6 }],
  ] as const)('but not for a little %s', (code, facts) => {
    expect(check(logged(facts), code).passed).toBe(true);
  });

  it.each([
    ['kept', { keptShare: 0.3 }],
    ['gaps', { gaps: 100, longestGap: 7 }],
    ['duplicates', { duplicates: 400 }],
    ['bad-samples', { badShare: 0.2 }],
  ] as const)('and only warns of %s', (code, facts) => {
    const fitness = logged(facts);
    expect(check(fitness, code)).toMatchObject({ passed: false, forbids: [] });
    expect(fitness.allows.numbers).toBe(true);
  });

  it('when OP or PV is rounded to a few steps a swing', () => {
    const coarse = (values: Float64Array, step: number): Float64Array =>
      values.map((v) => Math.round(v / step) * step);
    expect(check(checkRecord({ ...whole, op: coarse(whole.op, 1.2) }), 'op-quantised')).toMatchObject({
      passed: false,
      forbids: ['numbers'],
    });
    expect(check(checkRecord({ ...whole, op: coarse(whole.op, 3) }), 'op-quantised').forbids).toEqual([
      'cause',
      'numbers',
    ]);
    expect(check(checkRecord({ ...whole, pv: coarse(whole.pv, 1.5) }), 'pv-quantised').passed).toBe(false);
  });

  it('when OP stands at a limit, its own or that of the signal', () => {
    const shaken = {
      outputDisturbances: [{ kind: 'sine' as const, amplitude: 6, period: 100 }],
      valve: null,
    };
    const own = checkRecord(record({ ...shaken, controller: { ...sticky.controller, high: 52 } }));
    expect(check(own, 'op-clipped')).toMatchObject({ passed: false });
    expect(check(own, 'op-clipped').text).toContain('high limit of 52 %');
    const end = checkRecord(
      record({
        ...shaken,
        controller: { ...sticky.controller, bias: 2 },
        process: { ...sticky.process, restInput: 2 },
      }),
    );
    expect(check(end, 'op-clipped').text).toContain('low limit of 0 %');
    expect(end.allows.numbers).toBe(false);
    expect(check(checkRecord(record(shaken)), 'op-clipped').passed).toBe(true);
  });

  it('when PV keeps one value for longer than a cycle', () => {
    const stuck = whole.pv.map((value, i) => (i > 1000 && i < 2000 ? 50 : value));
    expect(check(checkRecord({ ...whole, pv: stuck }), 'pv-frozen')).toMatchObject({
      passed: false,
      forbids: ['cause', 'numbers'],
    });
  });

  it('when another column stands for OP', () => {
    const random = seededRandom(8);
    let wander = 50;
    const other = whole.op.map(() => {
      wander += 0.1 * random.normal();
      return Math.round(100 * wander) / 100;
    });
    expect(check(checkRecord({ ...whole, op: other }), 'op-explained')).toMatchObject({
      passed: false,
      forbids: ['cause', 'numbers'],
    });
  });

  it('when the historian compressed OP and PV, rounded or not', () => {
    for (const step of [0, 0.01]) {
      const drawn = (values: Float64Array): Float64Array =>
        swingingDoor(values, 0.5).map((v) => (step > 0 ? Math.round(v / step) * step : v));
      const fitness = checkRecord({ ...whole, op: drawn(whole.op), pv: drawn(whole.pv) });
      expect(failed(fitness)).toEqual(expect.arrayContaining(['pv-compressed', 'op-compressed']));
      expect(fitness.allows).toEqual({ cycle: true, cause: false, numbers: false });
    }
  });
});

describe('checkRecord stays the same', () => {
  it('when the unit of PV changes', () => {
    const inOther = (values: Float64Array): Float64Array => values.map((v) => 1.8 * v + 32);
    const other = checkRecord({ ...whole, pv: inOther(whole.pv), sp: inOther(whole.sp!), pvUnit: 'degF' });
    const one = checkRecord(whole);
    expect(other.allows).toEqual(one.allows);
    for (const [i, { code, value }] of one.checks.entries()) {
      expect(other.checks[i]!.code).toBe(code);
      if (value === null) expect(other.checks[i]!.value).toBeNull();
      else expect(other.checks[i]!.value!).toBeCloseTo(value, 4);
    }
  });
});

/** Sticks again after every slip (He, Wang, Pottmann, Qin 2007, Ind. Eng. Chem. Res. 46:4549-4560; value from memory). */
function stickyValve(S: number, J: number): SteppableValve {
  let travel = 48;
  return {
    get travel() {
      return travel;
    },
    advance(op) {
      if (Math.abs(op - travel) > (S + J) / 2) travel = op - Math.sign(op - travel) * ((S - J) / 2);
      return travel;
    },
  };
}

/** The longest lines from the last kept point that pass every value within `deviation`. */
function swingingDoor(values: Float64Array, deviation: number): Float64Array {
  const out = Float64Array.from(values);
  let from = 0;
  let low = -Infinity;
  let high = Infinity;
  for (let i = 1; i < values.length; i++) {
    low = Math.max(low, (values[i]! - deviation - values[from]!) / (i - from));
    high = Math.min(high, (values[i]! + deviation - values[from]!) / (i - from));
    if (low <= high && i < values.length - 1) continue;
    const to = low <= high ? i : i - 1;
    for (let k = from + 1; k < to; k++) {
      out[k] = values[from]! + ((values[to]! - values[from]!) * (k - from)) / (to - from);
    }
    from = to;
    low = (values[i]! - deviation - values[from]!) / Math.max(1, i - from);
    high = (values[i]! + deviation - values[from]!) / Math.max(1, i - from);
  }
  return out;
}
