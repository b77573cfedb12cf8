import { describe, expect, it } from 'vitest';
import { type LoopOptions, simulateLoop } from '../../src/process/closed-loop';
import { type ControllerReading, readController } from '../../src/process/read-controller';
import { expectClose } from '../closeness';

/** A loop that is kept busy from outside, so that its controller has something to do. */
const busy: LoopOptions = {
  samples: 2400,
  setPoint: 50,
  controller: { form: 'PI', gain: 0.8, integralTime: 20, bias: 50 },
  process: { gain: 1, lags: [5], deadTime: 2, restInput: 50, restOutput: 50 },
  noise: 0.1,
  outputDisturbances: [
    { kind: 'sine', amplitude: 2, period: 120 },
    { kind: 'ima', spread: 0.1, theta: 0.5, every: 1, seed: 3 },
  ],
};

interface Logged {
  readonly sp: Float64Array | null;
  readonly pv: Float64Array;
  readonly op: Float64Array;
}

function read(options: LoopOptions, change: (run: Logged) => Logged = (run) => run): ControllerReading {
  const { sp, pv, op } = change(simulateLoop({ ...busy, ...options }));
  const reading = readController(sp, pv, op, (options.scanPeriod ?? 1) * (options.logEvery ?? 1));
  expect(reading).not.toBeNull();
  return reading!;
}

/** `signal` logged so many samples late (above 0) or early (below 0). */
const moved = (signal: Float64Array, by: number): Float64Array =>
  signal.map((_, i) => signal[Math.min(signal.length - 1, Math.max(0, i - by))]!);

/** The controller that made OP is known, so that each setting can be checked against it. */
describe('readController finds the settings that made OP', () => {
  it.each([
    ['P', { form: 'P', gain: 0.8 }, 0.8, null, null],
    ['PI', { form: 'PI', gain: 0.8, integralTime: 20 }, 0.8, 20, null],
    // The simulated controller filters PV behind a tenth of the derivative time: 0.05 s, nothing at a scan of 1 s.
    ['PID', { form: 'PID', gain: 0.8, integralTime: 20, derivativeTime: 0.5 }, 0.8, 20, 0.5],
  ] as const)('%s', (form, controller, gain, integralTime, derivativeTime) => {
    const reading = read({ controller: { ...controller, bias: 50 } });
    expect(reading.form).toBe(form);
    expectClose(reading.gain, gain, { relative: 1e-6 });
    if (integralTime === null) expect(reading.integralTime).toBeNull();
    else expectClose(reading.integralTime!, integralTime, { relative: 1e-6 });
    if (derivativeTime === null) expect(reading.derivativeTime).toBeNull();
    else expectClose(reading.derivativeTime!, derivativeTime, { relative: 1e-6 });
    expect(reading.explains).toBeGreaterThan(0.999999);
    expect(reading).toMatchObject({ scanSamples: 1, pvShift: 0, spShift: 0, interval: 1 });
  });

  it('integral action alone, as a rate', () => {
    const reading = read({ controller: { form: 'I', gain: 0.8, integralTime: 20, bias: 50 } });
    expect(reading.form).toBe('I');
    expectClose(reading.gain, 0.8 / 20, { relative: 1e-6 });
    expect(reading.integralTime).toBe(1);
  });

  it('direct action as a gain below 0', () => {
    const reading = read({
      controller: { ...busy.controller, action: 'direct' },
      process: { ...busy.process, gain: -1 },
    });
    expectClose(reading.gain, -0.8, { relative: 1e-6 });
    expectClose(reading.integralTime!, 20, { relative: 1e-6 });
  });

  it('derivative action behind a filter about right', () => {
    const reading = read({
      controller: { form: 'PID', gain: 0.8, integralTime: 20, derivativeTime: 3, bias: 50 },
    });
    expect(reading.form).toBe('PID');
    expectClose(reading.gain, 0.8, { relative: 0.2 });
    expectClose(reading.derivativeTime!, 3, { relative: 0.25 });
  });

  it.each([
    [0.1, 0.1],
    [0.5, 0.1],
  ])('OP in steps of %s and PV in steps of %s', (opStep, pvStep) => {
    const reading = read({ opStep, pvStep });
    expect(reading.form).toBe('PI');
    expectClose(reading.gain, 0.8, { relative: 0.03 });
    expectClose(reading.integralTime!, 20, { relative: 0.03 });
    expect(reading.interval).toBeGreaterThan(1);
    expect(reading.explains).toBeGreaterThan(0.9);
  });

  it('a controller that scans slower than the log', () => {
    const hold = (signal: Float64Array): Float64Array =>
      Float64Array.from(
        { length: signal.length * 4 },
        (_, i) => signal[Math.floor((i + 2) / 4)] ?? 0,
      ).subarray(0, -4);
    const slow = simulateLoop({ ...busy, scanPeriod: 4, controller: { ...busy.controller, gain: 0.4 } });
    const reading = readController(hold(slow.sp), hold(slow.pv), hold(slow.op), 1)!;
    expect(reading).toMatchObject({ form: 'PI', scanSamples: 4, scanPeriod: 4 });
    expectClose(reading.gain, 0.4, { relative: 1e-6 });
    expectClose(reading.integralTime!, 20, { relative: 1e-6 });
    expect(reading.explains).toBeGreaterThan(0.999999);
  });

  it.each([5, 20])('a log that takes one scan in %s', (logEvery) => {
    const reading = read({ logEvery });
    expect(reading.form).toBe('PI');
    expectClose(reading.gain, 0.8, { relative: 0.05 });
    expectClose(reading.integralTime!, 20, { relative: 0.08 });
    expect(reading.explains).toBeGreaterThan(0.9);
    expect(reading.explains).toBeLessThan(0.9999);
  });

  it('set-point steps, with proportional action on the error or on PV alone', () => {
    const steps = (time: number): number => 50 + 4 * (Math.floor(time / 300) % 2);
    expect(read({ setPoint: steps }).proportionalOn).toBe('error');
    // P on PV alone: the simulated P+I sum less the kick that each set-point step gave.
    const reading = read({ setPoint: steps }, ({ sp, pv, op }) => ({
      sp,
      pv,
      op: op.map((value, i) => value - 0.8 * (sp![i]! - sp![0]!)),
    }));
    expect(reading.proportionalOn).toBe('pv');
    expectClose(reading.gain, 0.8, { relative: 1e-6 });
  });

  it('limits at which OP was held, and none at mere turning points', () => {
    const clipped = read({ controller: { ...busy.controller, high: 51 } });
    expect(clipped.limits).toEqual({ low: null, high: 51 });
    expectClose(clipped.gain, 0.8, { relative: 0.05 });
    expect(read({ opStep: 0.5 }).limits).toEqual({ low: null, high: null });
  });
});

describe('readController and stamps that are off', () => {
  const slave = { setPoint: (time: number): number => 50 + 4 * Math.sin(time / 15) };

  it.each([-1, 0, 1])('finds SP logged %s samples late', (late) => {
    const reading = read(slave, ({ sp, pv, op }) => ({ sp: moved(sp!, late), pv, op }));
    expect(reading.spShift).toBe(late === 0 ? 0 : -late);
    expect(reading.pvShift).toBe(0);
    expectClose(reading.gain, 0.8, { relative: 1e-4 });
    expect(reading.explains).toBeGreaterThan(0.999);
  });

  it.each([-1, 1])('finds PV logged %s samples late', (late) => {
    const reading = read(slave, ({ sp, pv, op }) => ({ sp, pv: moved(pv, late), op }));
    expect(reading.pvShift).toBe(-late);
    expect(reading.spShift).toBe(0);
    expectClose(reading.integralTime!, 20, { relative: 1e-4 });
  });
});

describe('readController and what is missing', () => {
  it('reads the set point when it was not logged', () => {
    const reading = read({}, ({ pv, op }) => ({ sp: null, pv, op }));
    expectClose(reading.constantSetPoint!, 50, { absolute: 1e-6 });
    expectClose(reading.gain, 0.8, { relative: 1e-6 });
    expect(read({}).constantSetPoint).toBeNull();
  });

  it('gives OP one scan ahead', () => {
    const run = simulateLoop(busy);
    const { reproduced } = readController(run.sp, run.pv, run.op, 1)!;
    expect(reproduced.length).toBe(run.op.length);
    for (let i = 2; i < run.op.length - 2; i++) expectClose(reproduced[i]!, run.op[i]!, { absolute: 1e-6 });
  });

  it('does not claim an OP that another signal made', () => {
    const reading = read({}, ({ sp, pv, op }) => ({ sp, pv, op: op.map((_, i) => 50 + Math.sin(i / 10)) }));
    expect(reading.explains).toBeLessThan(0.05);
    expectClose(reading.residualShare, 1 - reading.explains, { absolute: 1e-12 });
  });

  it('does not explain integral action that would run away from the error', () => {
    // OP moves with PV but integrates the error with the other sign: no controller does.
    const reading = read({}, ({ sp, pv }) => {
      let sum = 0;
      const op = pv.map((value) => {
        sum -= 0.02 * (50 - value);
        return 50 + 0.4 * (50 - value) + sum;
      });
      return { sp, pv, op };
    });
    expect(reading.form).toBe('P');
    expect(reading.integralTime).toBeNull();
  });

  it('has no answer for an OP or PV that stands still, or for a handful of samples', () => {
    const { sp, pv, op } = simulateLoop({ ...busy, samples: 100 });
    const still = new Float64Array(100).fill(40);
    expect(readController(sp, pv, still, 1)).toBeNull();
    expect(readController(sp, still, op, 1)).toBeNull();
    expect(readController(sp.slice(0, 20), pv.slice(0, 20), op.slice(0, 20), 1)).toBeNull();
  });

  it('refuses lengths that differ and a sample period that is not above 0', () => {
    const ten = new Float64Array(10);
    expect(() => readController(null, ten, new Float64Array(9), 1)).toThrow(/one length/);
    expect(() => readController(null, ten, ten, 0)).toThrow(/above 0 s/);
  });
});

describe('readController keeps its answer', () => {
  it('when the unit of PV changes: only the gain follows', () => {
    const { sp, pv, op } = simulateLoop({ ...busy, opStep: 0.1, pvStep: 0.1 });
    const one = readController(sp, pv, op, 1)!;
    const other = readController(
      sp.map((v) => 1.8 * v + 32),
      pv.map((v) => 1.8 * v + 32),
      op,
      1,
    )!;
    expectClose(other.gain, one.gain / 1.8, { relative: 1e-9 });
    expectClose(other.integralTime!, one.integralTime!, { relative: 1e-9 });
    expectClose(other.explains, one.explains, { absolute: 1e-9 });
  });
});
