import { describe, expect, it } from 'vitest';
import { simulateLoop } from '../../src/process/closed-loop';
import { textbookStem } from '../../src/valve/stem';

describe('closed loop', () => {
  it('brings PV to SP after a step, OP to the value that gain and rest ask for', () => {
    const run = simulateLoop({
      samples: 600,
      setPoint: (time) => (time < 50 ? 60 : 66),
      controller: { gain: 0.4, integralTime: 10, bias: 50 },
      process: { gain: 1.2, lags: [8], deadTime: 2, restInput: 50, restOutput: 60 },
    });
    expect(run.pv[49]).toBeCloseTo(60, 9);
    expect(run.pv[599]).toBeCloseTo(66, 6);
    expect(run.op[599]).toBeCloseTo(55, 6);
    expect(run.time[599]).toBe(599);
  });

  it('logs one scan in so many and runs in before', () => {
    const options = {
      scanPeriod: 0.5,
      noise: 0.3,
      seed: 4,
      controller: { gain: 0.4, integralTime: 10 },
      process: { lags: [5], restInput: 50 },
    };
    const all = simulateLoop({ ...options, samples: 400 });
    const some = simulateLoop({ ...options, samples: 50, logEvery: 4, runIn: 100 });
    for (let k = 0; k < 50; k++) {
      expect(some.pv[k]).toBe(all.pv[200 + 4 * k]);
      expect(some.op[k]).toBe(all.op[200 + 4 * k]);
    }
    expect(some.time[1]).toBe(2);
  });

  it('a stem with stick band makes the loop cycle, a free one does not', () => {
    const loop = (S: number, J: number): number => {
      const { op } = simulateLoop({
        samples: 1200,
        runIn: 2000,
        setPoint: (time) => (time < -1900 ? 60 : 63),
        controller: { gain: 0.4, integralTime: 8 },
        process: { gain: 1.2, lags: [5], deadTime: 2, restInput: 50, restOutput: 60 },
        valve: textbookStem({ S, J }),
      });
      return Math.max(...op) - Math.min(...op);
    };
    expect(loop(3, 1)).toBeGreaterThan(2);
    expect(loop(0, 0)).toBeLessThan(1e-3);
  });

  it('rounds PV and OP to their steps, keeps OP inside its limits', () => {
    const run = simulateLoop({
      samples: 200,
      noise: 1,
      pvStep: 0.25,
      opStep: 0.1,
      controller: { gain: 3, integralTime: 5, high: 52 },
      process: { lags: [5], restInput: 50 },
    });
    expect(run.pv.every((value) => Math.abs(value / 0.25 - Math.round(value / 0.25)) < 1e-9)).toBe(true);
    expect(run.op.every((value) => Math.abs(value / 0.1 - Math.round(value / 0.1)) < 1e-6)).toBe(true);
    expect(Math.max(...run.op)).toBeCloseTo(52, 9);
  });

  it('an outside sine passes to PV; an input disturbance goes through the process', () => {
    const slow = { controller: { form: 'I' as const, gain: 1, integralTime: 1e7 }, samples: 400, runIn: 400 };
    const sine = { kind: 'sine' as const, amplitude: 2, period: 50 };
    const process = { lags: [50 / (2 * Math.PI)], restInput: 50, gain: 3 };
    const atOutput = simulateLoop({ ...slow, process, outputDisturbances: [sine] });
    const atInput = simulateLoop({ ...slow, process, inputDisturbances: [sine], stepsPerScan: 20 });
    expect(Math.max(...atOutput.pv)).toBeCloseTo(2, 1);
    // A lag of period/2 pi passes 1/sqrt(2) of a sine.
    expect(Math.max(...atInput.pv)).toBeCloseTo((2 * 3) / Math.SQRT2, 1);
  });

  it('a master moves the set point and brings its own PV home', () => {
    const run = simulateLoop({
      samples: 6000,
      controller: { gain: 0.4, integralTime: 8 },
      process: { gain: 1.2, lags: [4], restInput: 50, restOutput: 60 },
      master: {
        controller: { gain: 1, integralTime: 200, bias: 60, high: 120 },
        process: { gain: 0.5, lags: [60], restInput: 60, restOutput: 40 },
        setPoint: 45,
        every: 5,
      },
    });
    expect(run.masterPv?.[5999]).toBeCloseTo(45, 3);
    expect(run.sp[5999]).toBeCloseTo(70, 2);
    expect(run.sp[10]).toBe(run.sp[14]);
  });

  it('refuses what cannot be', () => {
    expect(() => simulateLoop({ samples: 1.5 })).toThrow(/whole number above 0 for "samples"/);
    expect(() => simulateLoop({ noise: -1 })).toThrow(/"noise" of 0 or more/);
    expect(() => simulateLoop({ ramp: 1 } as object)).toThrow(/no option "ramp"/);
  });
});
