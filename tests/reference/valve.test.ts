/**
 * src/valve and src/process against facts from outside the project. Each check names its source; "value from memory"
 * marks what was recalled and not read.
 */
import { describe, expect, it } from 'vitest';
import { simulateLoop } from '../../src/process/closed-loop';
import { simulateProcess } from '../../src/process/linear-process';
import { describingFunction } from '../../src/valve/describing-function';
import { type FrictionLaw, stepDownFriction, stribeckFriction } from '../../src/valve/friction-law';
import { createStem, simulateStem, TEXTBOOK_VALVE, textbookStem } from '../../src/valve/stem';
import { twoParameterValve } from '../../src/valve/two-parameter';
import { createTwoParameterValve } from '../../src/valve/two-parameter-steps';
import { expectAllClose, expectClose } from '../closeness';
import numpy from './two-parameter-numpy.json';

describe('two-parameter element against an independent NumPy version (two-parameter-numpy.py)', () => {
  for (const [number, one] of numpy.cases.entries()) {
    it(`case ${number + 1}: S = ${one.S}, J = ${one.J}`, () => {
      const op = Float64Array.from(one.op);
      const { S, J } = one;
      const rounding = { absolute: 1e-9 };
      expectAllClose(twoParameterValve(op, { S, J, tolerance: 0 }), one.slidesOn, rounding, 'slides-on');
      expectAllClose(twoParameterValve(op, { S, J }), one.slidesOnTolerant, rounding, 'slides-on, tolerant');
      const sticky = twoParameterValve(op, { S, J, model: 'sticks-again' });
      expectAllClose(sticky, one.sticksAgain, rounding, 'sticks-again');
    });
  }
});

describe('describing function (Choudhury, Thornhill, Shah 2005, CEP 13:641-658, formula from memory)', () => {
  it("is the element's numerical Fourier term", () => {
    const samples = 40_000;
    for (const [X, S, J] of [
      [2, 3, 1],
      [5, 3, 1],
      [5, 3, 3],
      [5, 3, 0],
      [1.7, 3, 2.5],
      [20, 4, 0.5],
    ]) {
      const op = Float64Array.from(
        { length: 3 * samples },
        (_, k) => X * Math.sin((2 * Math.PI * k) / samples),
      );
      // Begun where the steady cycle has its lowest point.
      const travel = twoParameterValve(op, { S, J, tolerance: 0, start: (S - J) / 2 - X });
      let re = 0;
      let im = 0;
      for (let k = 2 * samples; k < 3 * samples; k++) {
        const angle = (2 * Math.PI * k) / samples;
        re += (2 * travel[k] * Math.sin(angle)) / (samples * X);
        im += (2 * travel[k] * Math.cos(angle)) / (samples * X);
      }
      const N = describingFunction(X, S, J);
      // The element moves at samples only, hence 4 digits.
      expectClose(N.re, re, { absolute: 3e-4 }, `real part for X ${X} S ${S} J ${J}`);
      expectClose(N.im, im, { absolute: 3e-4 }, `imaginary part for X ${X} S ${S} J ${J}`);
    }
  });

  it('tends to 1 for large sines and to -j 4J/(pi S) where the valve just moves', () => {
    const large = describingFunction(1e6, 3, 1);
    expectClose(large.re, 1, { absolute: 1e-5 });
    expectClose(large.im, 0, { absolute: 1e-5 });
    for (const J of [0, 1, 3]) {
      const edge = describingFunction(1.5, 3, J);
      expectClose(edge.re, 0, { absolute: 1e-12 });
      expectClose(edge.im, (-4 * J) / (Math.PI * 3), { absolute: 1e-12 });
    }
  });
});

/** Swings of OP and PV at the end of a long run after a set-point step, and the period by OP's crossings, s. */
function endOfRun(
  loop: 'concentration' | 'level',
  S: number,
  J: number,
): { swing: number; pvSwing: number; period: number } {
  const concentration = loop === 'concentration';
  const scanPeriod = concentration ? 0.5 : 0.05;
  const samples = 12_000;
  const { op, pv } = simulateLoop({
    samples,
    runIn: samples * scanPeriod,
    scanPeriod,
    stepsPerScan: 1,
    setPoint: (time) => (time < -0.99 * samples * scanPeriod ? 0 : 10),
    controller: concentration
      ? { gain: 0.2, integralTime: 10, low: -1000, high: 1000, bias: 0 }
      : { gain: 0.4, integralTime: 2, low: -1000, high: 1000, bias: 0 },
    process: concentration ? { gain: 3, lags: [10], deadTime: 10 } : { response: 'integrating', gain: 1 },
    valve: createTwoParameterValve({ S, J, tolerance: 0, start: 0 }),
  });
  const middle = op.reduce((sum, value) => sum + value, 0) / samples;
  const rises: number[] = [];
  for (let k = 1; k < samples; k++) if (op[k - 1] < middle && op[k] >= middle) rises.push(k);
  const last = rises.length - 1;
  return {
    swing: Math.max(...op) - Math.min(...op),
    pvSwing: Math.max(...pv) - Math.min(...pv),
    period: last > 0 ? ((rises[last] - rises[0]) * scanPeriod) / last : 0,
  };
}

describe('published loops (Choudhury et al. 2005; plants, tunings and S from memory)', () => {
  it('self-regulating concentration loop with PI: dead band alone does not cycle, a slip jump does', () => {
    // What is left without a jump is ever slower creep of OP through the dead band; PV swings less and less.
    expect(endOfRun('concentration', 5, 0).pvSwing).toBeLessThan(0.3);
    for (const J of [0.5, 2, 5]) {
      const { swing, pvSwing } = endOfRun('concentration', 5, J);
      expect(swing).toBeGreaterThan(4.9);
      expect(pvSwing).toBeGreaterThan(0.98 * 3 * J);
    }
  });

  it('integrating level loop with PI: dead band alone cycles already, with a slip jump too', () => {
    for (const J of [0, 1, 3]) expect(endOfRun('level', 3, J).swing).toBeGreaterThan(2.9);
  });

  it('the describing function predicts the level cycle within a tenth or so, as far as it is meant to', () => {
    for (const J of [0, 1]) {
      // Harmonic balance N(X) L(jw) = -1 with L = 0.4 (1 + 1/(2 jw)) / jw; amplitude X and frequency w by bisection.
      const phaseOf = (re: number, im: number): number => Math.atan2(im, re);
      const loopGain = (w: number): { re: number; im: number } => ({ re: -0.2 / w ** 2, im: -0.4 / w });
      const frequencyFor = (X: number): number => {
        // Phase of L is -pi + atan(2 w): it has to be -pi minus the phase of N.
        const N = describingFunction(X, 3, J);
        return Math.tan(-phaseOf(N.re, N.im)) / 2;
      };
      const excess = (X: number): number => {
        const N = describingFunction(X, 3, J);
        const L = loopGain(frequencyFor(X));
        return Math.hypot(N.re, N.im) * Math.hypot(L.re, L.im) - 1;
      };
      let low = 1.52;
      let high = 200;
      expect(excess(low) * excess(high)).toBeLessThan(0);
      for (let i = 0; i < 80; i++) {
        const middle = (low + high) / 2;
        if (excess(low) * excess(middle) <= 0) high = middle;
        else low = middle;
      }
      const seen = endOfRun('level', 3, J);
      expectClose(seen.swing, 2 * low, { relative: 0.15 }, `swing for J = ${J}`);
      expectClose(seen.period, (2 * Math.PI) / frequencyFor(low), { relative: 0.15 }, `period for J = ${J}`);
    }
  });

  it('a fast loop with PI: the period is at least 4 Ti (S/(Kc Kp J) - 1) and PV swings by about Kp J (derived)', () => {
    for (const [S, J, gain] of [
      [4, 2, 0.3],
      [3, 1, 0.5],
      [2, 2, 0.4],
    ]) {
      const { op, pv } = simulateLoop({
        samples: 20_000,
        runIn: 2000,
        scanPeriod: 0.1,
        stepsPerScan: 1,
        setPoint: (time) => (time < -1990 ? 0 : 1.3),
        controller: { gain, integralTime: 10, bias: 0, low: -100 },
        process: { gain: 1.5, lags: [0.05] },
        valve: createTwoParameterValve({ S, J, tolerance: 0, start: 0 }),
      });
      const middle = op.reduce((sum, value) => sum + value, 0) / op.length;
      const rises = [...op.keys()].filter((k) => k > 0 && op[k - 1] < middle && op[k] >= middle);
      const period = (0.1 * (rises[rises.length - 1] - rises[0])) / (rises.length - 1);
      const bound = 4 * 10 * (S / (gain * 1.5 * J) - 1);
      expect(period).toBeGreaterThan(0.98 * bound);
      expectClose(Math.max(...pv) - Math.min(...pv), 1.5 * J, { relative: 0.1 }, 'PV swing');
    }
  });
});

describe('response times (ANSI/ISA-75.25.01: 63.2 % = 1 - 1/e, 86.5 % = 1 - 1/e^2 of the change, dead time in)', () => {
  it('a lag behind a dead time reaches them after dead time plus one and two time constants', () => {
    const output = simulateProcess(new Float64Array(400).fill(1), 0.05, { lags: [4], deadTime: 1 });
    expectClose(output[99], 1 - Math.exp(-1), { absolute: 1e-12 });
    expectClose(output[179], 1 - Math.exp(-2), { absolute: 1e-12 });
    expectClose(output[99], 0.632, { absolute: 5e-4 });
    expectClose(output[179], 0.865, { absolute: 5e-4 });
  });

  it('so does a good stem behind the lag of its actuator', () => {
    const op = Float64Array.from({ length: 600 }, (_, k) => (k === 0 ? 40 : 50));
    const travel = simulateStem(op, 0.02, { actuatorLag: 3 });
    const after = (share: number): number => 0.02 * travel.findIndex((value) => value >= 40 + 10 * share);
    // Mass, spring and viscous friction add c/k = 12 ms.
    expectClose(after(0.632), 3, { absolute: 0.04 });
    expectClose(after(0.865), 6, { absolute: 0.04 });
  });
});

const { mass, spring, stroke, stribeckSpeed, viscous } = TEXTBOOK_VALVE;
const newtonPerPercent = (spring * stroke) / 100;

/**
 * A mass at rest, pulled through a spring at a constant speed (m/s), seen every `dt` seconds: share of the second
 * half of the time in which it stands still, and the number of times that it does.
 */
function pulled(
  friction: FrictionLaw,
  speed: number,
  seconds: number,
  dt: number,
): { still: number; stops: number } {
  // A drive that rises along a straight line: the OP steps of a fine ramp.
  const stem = createStem({ friction, startOp: 0 });
  const rate = (100 * speed) / stroke;
  let before = stem.travel;
  let still = 0;
  let stops = 0;
  let wasStill = false;
  const count = Math.round(seconds / dt);
  for (let k = 1; k <= count; k++) {
    const travel = stem.advance(rate * (k - 0.5) * dt, dt);
    const isStill = travel === before;
    if (k > count / 2) {
      if (isStill) still++;
      if (isStill && !wasStill) stops++;
    }
    wasStill = isStill;
    before = travel;
  }
  return { still: still / (count / 2), stops };
}

describe('a mass pulled through a spring at constant speed (stick-slip as in any text on machine friction, from memory)', () => {
  it('sticks and jumps at low speed; with Stribeck plus viscous friction it glides above a critical speed', () => {
    const excess = 60;
    const law = { static: 200 + excess, coulomb: 200, viscous, stribeckSpeed };
    // Steady gliding is stable where the friction curve rises: viscous > 2 excess v/vs^2 exp(-(v/vs)^2).
    let critical = stribeckSpeed;
    while (
      viscous <
      ((2 * excess * critical) / stribeckSpeed ** 2) * Math.exp(-((critical / stribeckSpeed) ** 2))
    ) {
      critical *= 1.001;
    }
    const friction = stribeckFriction(law);
    const slow = pulled(friction, 0.2 * critical, 150, 0.005);
    expect(slow.still).toBeGreaterThan(0.5);
    expect(slow.stops).toBeGreaterThan(2);
    expect(pulled(friction, 3 * critical, 10, 0.002)).toEqual({ still: 0, stops: 0 });
  });

  it('with an undamped step-down it never stops sticking, and its period is the closed-form one', () => {
    const excess = 60;
    const friction = stepDownFriction({ static: 200 + excess, coulomb: 200 });
    const omega = Math.sqrt(spring / mass);
    for (const speed of [0.001, 0.01, 0.05]) {
      const reach = excess / (spring * speed);
      // Stuck while the spring gains twice the drop; then free swinging until the speed is zero again.
      const stick = 2 * reach;
      const slip = (2 / omega) * (Math.PI - Math.atan(reach * omega));
      const seconds = 60 * (stick + slip);
      const dt = Math.min(stick, slip) / 40;
      const { still, stops } = pulled(friction, speed, seconds, dt);
      expectClose(stops, 30, { absolute: 1.5 }, `stops at ${speed} m/s`);
      expectClose(still, stick / (stick + slip), { absolute: 0.05 }, `share at rest at ${speed} m/s`);
    }
  });
});

describe('textbook valve (Kayihan, Doyle 2000, CEP 8:799-812; values from memory) with its friction scaled down', () => {
  it('3-15 psi on its diaphragm is the force of its spring over the stroke (arithmetic)', () => {
    const psi = 6894.757;
    expectClose(12 * psi * 0.06452, spring * stroke, { relative: 1e-3 });
  });

  it('shows S = (Fs + Fc)/span and J = (Fs - Fc)/span in a slow stroke', () => {
    for (const share of [0.02, 0.05, 0.1]) {
      const Fs = share * TEXTBOOK_VALVE.static;
      const Fc = share * TEXTBOOK_VALVE.coulomb;
      const S = (Fs + Fc) / newtonPerPercent;
      const J = (Fs - Fc) / newtonPerPercent;
      const stem = textbookStem({ S, J, startOp: 50 });
      const step = J / 200;
      let op = 50;
      const strokeTo = (sign: number): { op: number; jump: number } => {
        const from = stem.travel;
        while (Math.abs(stem.travel - from) < J / 2) {
          op += sign * step;
          stem.advance(op, 1);
        }
        return { op, jump: Math.abs(stem.travel - from) };
      };
      strokeTo(1);
      const up = strokeTo(1);
      const down = strokeTo(-1);
      // Friction rises again at a few Stribeck speeds: a slip ends some viscous speed / spring = 0.01 % early.
      expectClose(up.jump, J, { relative: 0.01, absolute: 0.01 }, 'slip jump up');
      expectClose(down.jump, J, { relative: 0.01, absolute: 0.01 }, 'slip jump down');
      expectClose(up.op - down.op, S, { relative: 0.01 }, 'dead band as tested on reversal');
    }
  });
});
