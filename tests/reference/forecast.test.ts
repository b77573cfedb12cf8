/**
 * Forecasts against control textbooks and published loops. Formulas of describing functions and of the relay experiment
 * stand in any text on nonlinear control (Gelb, Vander Velde 1968; Astrom, Hagglund 1984, Automatica 20:645-651); they
 * are from memory and re-derived, as are the published loops (Choudhury, Thornhill, Shah 2005, Control Eng. Practice
 * 13:641-658: values from memory).
 */
import { describe, expect, it } from 'vitest';
import { measureCycle } from '../../src/forecast/cycle-measure';
import { type BalanceLoop, balanceCycle, processResponse } from '../../src/forecast/harmonic-balance';
import { type LoopModel, runModel } from '../../src/forecast/loop-model';
import { simulateLoop } from '../../src/process/closed-loop';
import { describingFunction } from '../../src/valve/describing-function';
import { createTwoParameterValve } from '../../src/valve/two-parameter-steps';
import { expectClose } from '../closeness';

describe('describing functions of control textbooks', () => {
  it('backlash: the valve without a jump', () => {
    const gap = 2;
    for (const X of [1.2, 2, 5, 40]) {
      const r = 1 - gap / X;
      const re = (Math.PI / 2 + Math.asin(r) + r * Math.sqrt(1 - r * r)) / Math.PI;
      const im = -(gap / (Math.PI * X)) * (2 - gap / X);
      const N = describingFunction(X, gap, 0);
      expectClose(N.re, re, { absolute: 1e-12 }, `real part at ${X}`);
      expectClose(N.im, im, { absolute: 1e-12 }, `imaginary part at ${X}`);
    }
  });

  it('relay with hysteresis: the valve that only hops, at the smallest swing that moves it', () => {
    // A swing of just S throws the stem by J to and fro: a relay of height J/2 that switches at its input's extremes.
    const [S, J] = [3, 1.2];
    const X = S / 2;
    const [height, switchesAt] = [J / 2, X];
    const size = (4 * height) / (Math.PI * X);
    const N = describingFunction(X, S, J);
    expectClose(N.re, size * Math.sqrt(1 - (switchesAt / X) ** 2), { absolute: 1e-9 });
    expectClose(N.im, -size * (switchesAt / X), { absolute: 1e-9 });
  });
});

describe('the frequency response of the process', () => {
  it('gives the period and gain of the relay experiment', () => {
    // exp(-s)/(s + 1): phase -pi at w + atan(w) = pi, w = 2.0288 (solved by bisection here).
    let [low, high] = [1, 3];
    for (let i = 0; i < 60; i++) {
      const w = (low + high) / 2;
      if (w + Math.atan(w) < Math.PI) low = w;
      else high = w;
    }
    const loop: BalanceLoop = {
      response: 'self-regulating',
      gain: 1,
      lags: [1],
      deadTime: 1,
      scanPeriod: 1e-6,
      controller: { form: 'P', gain: 1, integralTime: 1 },
    };
    const { re, im } = processResponse(loop, low);
    expectClose(re, -1 / Math.hypot(1, low), { relative: 1e-6 });
    expectClose(im, 0, { absolute: 1e-5 });
    expectClose(Math.hypot(re, im), 1 / Math.hypot(1, low), { relative: 1e-9 });
  });
});

interface Published {
  readonly loop: BalanceLoop;
  readonly S: number;
  readonly scanPeriod: number;
}

const concentration: Published = {
  loop: {
    response: 'self-regulating',
    gain: 3,
    lags: [10],
    deadTime: 10,
    scanPeriod: 0.5,
    controller: { form: 'PI', gain: 0.2, integralTime: 10 },
  },
  S: 5,
  scanPeriod: 0.5,
};
const level: Published = {
  loop: {
    response: 'integrating',
    gain: 1,
    lags: [],
    deadTime: 0,
    scanPeriod: 0.05,
    controller: { form: 'PI', gain: 0.4, integralTime: 2 },
  },
  S: 3,
  scanPeriod: 0.05,
};

function simulated({ loop, S, scanPeriod }: Published, J: number) {
  const samples = 12_000;
  const { response, gain, lags, deadTime } = loop;
  const { pv, op } = simulateLoop({
    samples,
    runIn: samples * scanPeriod,
    scanPeriod,
    stepsPerScan: 1,
    setPoint: (time) => (time < -0.99 * samples * scanPeriod ? 0 : 10),
    controller: { ...loop.controller, low: -1000, high: 1000, bias: 0 },
    process: { response, gain, lags, deadTime },
    valve: createTwoParameterValve({ S, J, tolerance: 0, start: 0 }),
  });
  return measureCycle(pv, op, scanPeriod)!;
}

describe('published loops by the describing function', () => {
  it('level: within about 10 % of the simulation, with and without a jump', () => {
    for (const J of [0, 1, 1.5]) {
      const balance = balanceCycle(level.loop, level.S, J)!;
      const truth = simulated(level, J);
      expectClose(balance.period, truth.period, { relative: 0.12 }, `period, J ${J}`);
      expectClose(balance.opSwing, truth.opSwing, { relative: 0.13 }, `OP swing, J ${J}`);
      expectClose(balance.pvSwing, truth.pvSwing, { relative: 0.15 }, `PV swing, J ${J}`);
    }
  });

  it('concentration: OP swing 13-18 % low and period 14-40 % long, as stated of its roughness', () => {
    for (const J of [2, 3, 4, 5]) {
      const balance = balanceCycle(concentration.loop, concentration.S, J)!;
      const truth = simulated(concentration, J);
      const period = balance.period / truth.period;
      const swing = balance.opSwing / truth.opSwing;
      expect(period).toBeGreaterThan(1.1);
      expect(period).toBeLessThan(1.42);
      expect(swing).toBeGreaterThan(0.8);
      expect(swing).toBeLessThan(0.89);
    }
  });

  it('no cycle without a jump where the process regulates itself, and none without integral action on level', () => {
    expect(balanceCycle(concentration.loop, concentration.S, 0)).toBeNull();
    const proportional = { ...level.loop.controller, form: 'P' as const };
    expect(balanceCycle({ ...level.loop, controller: proportional }, level.S, 0)).toBeNull();
  });
});

describe('a fast self-regulating loop with PI control', () => {
  // Derived: with no lag the stem hops by J, PV by Kp J, and OP has to ramp S - Kc Kp J at Kc Kp J / (2 Ti) on either
  // side of the set point: a period of 4 Ti (S/(Kc Kp J) - 1), a lower bound, as unequal halves take longer.
  const model = (J: number): LoopModel => ({
    valve: { model: 'slides-on', S: 4, J },
    process: { response: 'self-regulating', gain: 1.2, lags: [], deadTime: 0, restInput: 50, restOutput: 60 },
    controller: { form: 'PI', gain: 0.4, integralTime: 20, action: 'reverse', bias: 50 },
    scanPeriod: 0.5,
    noise: 0,
    drift: 0.004,
    setPoint: 60,
    push: 3,
  });

  it.each([1, 1.6])('has at least the derived period and the swing Kp J, J = %f', (J) => {
    const period = 4 * 20 * (4 / (0.4 * 1.2 * J) - 1);
    const run = runModel(model(J), {}, { period, cycles: 60, seed: 4 });
    const found = measureCycle(run.pv, run.op, 0.5)!;
    expect(found.period).toBeGreaterThan(0.97 * period);
    expect(found.period).toBeLessThan(1.5 * period);
    expectClose(found.pvSwing, 1.2 * J, { relative: 0.2 });
  });

  it('is slower in proportion to the integral time', () => {
    const period = 4 * 20 * (4 / (0.4 * 1.2 * 1.6) - 1);
    const at = (integralTime: number): number => {
      const run = runModel(
        model(1.6),
        { integralTime },
        { period: period * integralTime, cycles: 60, seed: 4 },
      );
      return measureCycle(run.pv, run.op, 0.5)!.period;
    };
    expectClose(at(2) / at(1), 2, { relative: 0.15 });
  });
});
