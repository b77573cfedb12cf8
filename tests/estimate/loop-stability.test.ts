import { describe, expect, it } from 'vitest';
import { gainMargin, type LoopController } from '../../src/estimate/loop-stability';
import { simulateLoop } from '../../src/process/closed-loop';
import { expectClose } from '../closeness';

const pi = (gain: number, integralTime: number): LoopController => ({
  form: 'PI',
  gain,
  integralTime,
  explains: 1,
});

/** Whether a linear loop of this gain, given a push, swings more and more. */
function grows(
  times: number,
  { gain, integralTime }: LoopController,
  process: { gain: number; lags: number[]; deadTime: number; response?: 'integrating' },
): boolean {
  const { pv } = simulateLoop({
    samples: 6000,
    scanPeriod: 0.1,
    stepsPerScan: 1,
    setPoint: (time) => (time < 5 ? 0.001 : 0),
    controller: {
      form: integralTime === null ? 'P' : 'PI',
      gain: times * gain,
      ...(integralTime === null ? {} : { integralTime }),
      bias: 0,
      low: -1e9,
      high: 1e9,
    },
    process,
  });
  const swing = (from: number, to: number): number =>
    pv.subarray(from, to).reduce((most, value) => Math.max(most, Math.abs(value)), 0);
  return swing(5000, 6000) > swing(2000, 3000);
}

describe('gainMargin', () => {
  it('is pi/2 over gain times dead time under P control of an integrator with dead time', () => {
    // Phase -pi where w deadTime = pi/2; there the loop gain is K/w.
    const p: LoopController = { form: 'P', gain: 0.3, integralTime: null, explains: 1 };
    const margin = gainMargin(p, { lag: 0, secondLag: 0, delay: 5 }, 0.2, true, 1);
    expectClose(margin, Math.PI / 2 / (0.3 * 0.2 * 5), { relative: 1e-4 });
  });

  it('is endless where no dead time and fewer than three lags turn the phase', () => {
    expect(gainMargin(pi(0.4, 20), { lag: 9, secondLag: 0, delay: 0 }, 3, false, 1)).toBe(
      Number.POSITIVE_INFINITY,
    );
  });

  it('falls in proportion to the gains of process and controller, and does not depend on their sign', () => {
    const process = { lag: 6, secondLag: 2, delay: 3 };
    const one = gainMargin(pi(0.4, 20), process, 1.5, false, 1);
    expectClose(gainMargin(pi(0.4, 20), process, 3, false, 1), one / 2, { relative: 1e-9 });
    expectClose(gainMargin(pi(1.2, 20), process, 1.5, false, 1), one / 3, { relative: 1e-9 });
    expectClose(gainMargin(pi(-0.4, 20), process, 1.5, false, 1), one, { relative: 1e-12 });
  });

  it('is the same for the same loop logged at another period', () => {
    const one = gainMargin(pi(0.4, 20), { lag: 6, secondLag: 2, delay: 4 }, 1.5, false, 1);
    expectClose(gainMargin(pi(0.4, 20), { lag: 3, secondLag: 1, delay: 2 }, 1.5, false, 2), one, {
      relative: 1e-6,
    });
  });

  it('tells where a simulated loop begins to swing up by itself', () => {
    const self = pi(0.5, 12);
    const margin = gainMargin(self, { lag: 60, secondLag: 20, delay: 30 }, 1.4, false, 0.1);
    const plant = { gain: 1.4, lags: [6, 2], deadTime: 3 };
    expect(grows(0.94 * margin, self, plant)).toBe(false);
    expect(grows(1.06 * margin, self, plant)).toBe(true);

    const level = pi(0.5, 60);
    const margin2 = gainMargin(level, { lag: 40, secondLag: 0, delay: 30 }, 0.01, true, 0.1);
    const tank = { response: 'integrating' as const, gain: 0.1, lags: [4], deadTime: 3 };
    expect(grows(0.94 * margin2, level, tank)).toBe(false);
    expect(grows(1.06 * margin2, level, tank)).toBe(true);
  });
});
