import { describe, expect, it } from 'vitest';
import { simulateProcess, whiten } from '../../src/estimate/objective';
import {
  bestTheta,
  createTarget,
  fitGain,
  fitProcess,
  lagged,
  residualOf,
  swingOf,
} from '../../src/estimate/process-fit';
import { disturbanceValues } from '../../src/process/disturbance';
import { seededRandom } from '../../src/signal/random';
import { twoParameterValve } from '../../src/valve/two-parameter';
import { expectAllClose, expectClose } from '../closeness';
import { processSettings } from './loops';

const samples = 1200;
const op = Float64Array.from({ length: samples }, (_, k) => 50 + 3 * Math.sin(k / 9) + Math.sin(k / 71));
const travel = twoParameterValve(op, { S: 2.5, J: 1 });
const theta = 0.6;

function pvFor(
  process: { lag: number; secondLag: number; delay: number },
  gain: number,
  integrating: boolean,
  noise = 0,
): Float64Array {
  const random = seededRandom(2);
  return simulateProcess(travel, process, integrating).map(
    (value) => 40 + gain * value + noise * random.normal(),
  );
}

describe('fitGain', () => {
  const process = { lag: 6, secondLag: 2, delay: 3 };

  it('gives the gain that made PV, whatever its sign, and leaves nothing', () => {
    for (const integrating of [false, true]) {
      for (const sign of [1, -1] as const) {
        const settings = processSettings({ integrating, sign });
        const target = createTarget(pvFor(process, 1.4 * sign, integrating), theta, settings);
        const { gain, misfit } = fitGain(travel, target, process, settings);
        expectClose(gain, 1.4, { relative: 1e-6 });
        expectClose(misfit, 0, { absolute: 1e-9 });
      }
    }
  });

  it('takes no gain of the other sign', () => {
    const settings = processSettings({ sign: -1 });
    const target = createTarget(pvFor(process, 1.4, false), theta, settings);
    expect(fitGain(travel, target, process, settings)).toMatchObject({ gain: 0, misfit: 1 });
  });

  it('stays within stated bounds of the gain, and its misfit is that of the gain taken', () => {
    for (const [gainLow, gainHigh, want] of [
      [0.5, 1.1, 1.1],
      [1.7, 2.3, 1.7],
    ]) {
      const settings = processSettings({ gainLow, gainHigh });
      const target = createTarget(pvFor(process, 1.4, false), theta, settings);
      const { gain, misfit } = fitGain(travel, target, process, settings);
      expect(gain).toBe(want);
      // What is left of PV is the part of the gain that is missing.
      expectClose(misfit, ((1.4 - want) / 1.4) ** 2, { absolute: 1e-6 });
    }
  });
});

describe('fitProcess', () => {
  it('finds lag, dead time and gain from a start nearby', () => {
    for (const integrating of [false, true]) {
      const settings = processSettings({ integrating });
      const made = { lag: 6, secondLag: 0, delay: 4 };
      const target = createTarget(pvFor(made, 1.4, integrating, 0.01), 0.9, settings);
      const start = { lag: 4, secondLag: 0, delay: 3 };
      const found = fitProcess(travel, target, start, settings);
      expect(found.misfit).toBeLessThan(fitGain(travel, target, start, settings).misfit);
      expectClose(found.delay, 4, { absolute: 0.5 }, 'dead time');
      expectClose(found.lag + found.secondLag, 6, { absolute: 0.7 }, 'lag');
      expectClose(found.gain, 1.4, { relative: 0.05 }, 'gain');
    }
  });

  it('leaves a stated dead time as it is', () => {
    const settings = processSettings({ deadTime: 2 });
    const target = createTarget(pvFor({ lag: 6, secondLag: 0, delay: 5 }, 1.4, false), theta, settings);
    const found = fitProcess(travel, target, { lag: 4, secondLag: 0, delay: 2 }, settings);
    expect(found.delay).toBe(2);
  });

  it('lets the dead time be no shorter than a sample and no longer than a sixth of the cycle', () => {
    const settings = processSettings({ period: 36 });
    const long = createTarget(pvFor({ lag: 1, secondLag: 0, delay: 9 }, 1.4, false), theta, settings);
    const start = { lag: 1, secondLag: 0, delay: 5 };
    expect(fitProcess(travel, long, start, settings).delay).toBeLessThanOrEqual(6);
    const none = createTarget(pvFor({ lag: 0, secondLag: 0, delay: 0 }, 1.4, false), theta, settings);
    expect(fitProcess(travel, none, start, settings).delay).toBeGreaterThanOrEqual(1);
  });
});

describe('residualOf', () => {
  it('is what the travel has no part in', () => {
    for (const sign of [1, -1] as const) {
      const process = { lag: 6, secondLag: 2, delay: 3.5, gain: 1.4 };
      const left = residualOf(pvFor(process, sign * 1.4, false), travel, process, processSettings({ sign }));
      expectAllClose(left, new Float64Array(samples).fill(40), { absolute: 1e-9 });
    }
  });
});

describe('bestTheta', () => {
  it('is near the coefficient of the disturbance, 0 for a random walk, near 1 for white noise', () => {
    for (const made of [0, 0.4, 0.85]) {
      const drift = disturbanceValues({ kind: 'ima', spread: 1, theta: made, every: 1, seed: 11 }, 4000, 1);
      expectClose(bestTheta(drift, false), made, { absolute: 0.1 }, `theta ${made}`);
    }
    const random = seededRandom(3);
    expect(
      bestTheta(
        new Float64Array(4000).map(() => random.normal()),
        false,
      ),
    ).toBeGreaterThan(0.9);
  });

  it('leaves smaller shocks than its neighbours', () => {
    const drift = disturbanceValues({ kind: 'ima', spread: 1, theta: 0.7, every: 1, seed: 4 }, 2000, 1);
    const power = (theta: number): number =>
      whiten(drift, theta, false).reduce((sum, value) => sum + value * value, 0);
    const best = bestTheta(drift, false);
    for (const other of [0.1, 0.4, 0.95]) expect(power(best)).toBeLessThanOrEqual(power(other));
  });
});

describe('lagged', () => {
  it('starts at rest and closes on a step by 1 - exp(-t/lag)', () => {
    const step = Float64Array.from({ length: 20 }, (_, k) => (k < 5 ? 30 : 31));
    const want = step.map((_, k) => (k < 5 ? 30 : 31 - Math.exp(-(k - 4) / 2)));
    expectAllClose(lagged(step, 2), want, { absolute: 1e-12 });
    expectAllClose(lagged(step, 0), step, { absolute: 0 });
  });
});

describe('swingOf', () => {
  it('is the range without rare spikes', () => {
    const values = Float64Array.from({ length: 1000 }, (_, k) => 5 * Math.sin(k / 30));
    const clean = swingOf(values);
    expectClose(clean, 10, { absolute: 0.01 });
    values[300] = 90;
    values[700] = -90;
    expectClose(swingOf(values), clean, { absolute: 0.02 });
  });

  it('is 0 for a signal that stands', () => {
    expect(swingOf(new Float64Array(300).fill(50))).toBe(0);
  });
});
