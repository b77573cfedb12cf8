import { describe, expect, it } from 'vitest';
import { createObjective, simulateProcess } from '../../src/estimate/objective';
import { openingOf } from '../../src/estimate/opening';
import { swingOf } from '../../src/estimate/process-fit';
import { firstTheta, gridSteps, PairTrial, processGrid, searchGrid } from '../../src/estimate/search';
import { seededRandom } from '../../src/signal/random';
import { twoParameterValve } from '../../src/valve/two-parameter';
import { expectClose } from '../closeness';
import { processSettings } from './loops';

const samples = 1000;
const op = Float64Array.from(
  { length: samples },
  (_, k) => 50 + 2.5 * Math.sin(k / 8) + 1.5 * Math.sin(k / 37 + 1),
);
const largest = swingOf(op);
const opening = openingOf(op, 50);
const smallest = 0.1;
const anyGain = { sign: 1, gainLow: 0, gainHigh: Number.POSITIVE_INFINITY } as const;

function pvBehind(travel: Float64Array, integrating: boolean, noise: number): Float64Array {
  const random = seededRandom(6);
  return simulateProcess(travel, { lag: 3, secondLag: 0, delay: 2 }, integrating).map(
    (value) => (integrating ? 0.05 : 1.3) * value + noise * random.normal(),
  );
}

describe('processGrid', () => {
  it('tries no lag at all and lags up to the cycle, dead times from a sample to a sixth of the cycle', () => {
    for (const period of [8, 40, 300, 1200]) {
      const { lags, delays } = processGrid(processSettings({ period }));
      expect(lags[0]).toBe(0);
      expect(Math.max(...lags)).toBeCloseTo(period, 6);
      expect(delays[0]).toBe(1);
      expect(Math.max(...delays)).toBeLessThanOrEqual(Math.max(2, period / 6));
      for (const list of [lags, delays]) {
        for (let i = 1; i < list.length; i++) expect(list[i]).toBeGreaterThan(list[i - 1]);
      }
      for (const delay of delays) expect(Number.isInteger(delay)).toBe(true);
    }
  });

  it('takes a stated dead time as the only one', () => {
    expect(processGrid(processSettings({ deadTime: 7 })).delays).toEqual([7]);
    expect(processGrid(processSettings({ deadTime: 0 })).delays).toEqual([1]);
  });
});

describe('searchGrid', () => {
  const grid = { lags: [0, 1.5, 3, 6], delays: [1, 2, 3, 5] };
  for (const model of ['slides-on', 'sticks-again'] as const) {
    for (const integrating of [false, true]) {
      it(`finds the pair behind PV as well as trying every pair does: ${model}, ${integrating ? 'integrating' : 'self-regulating'}`, () => {
        const [S, J] = [3.2, 1.3];
        const pv = pvBehind(twoParameterValve(op, { S, J, model }), integrating, 0.02);
        const objective = createObjective(pv, op, { ...anyGain, ...grid, theta: 0.8, integrating });
        const points = searchGrid(objective, op, model, smallest, largest, opening);

        const trial = new PairTrial(objective, op, model, 1, opening);
        const everyLag = grid.lags.map((_, i) => i);
        let least = Number.POSITIVE_INFINITY;
        let at = { S: 0, J: 0 };
        for (let s = 1; s <= gridSteps; s++) {
          for (let j = 0; j < gridSteps; j++) {
            const pair = {
              S: (s / gridSteps) * largest,
              J: ((s / gridSteps) * largest * j) / (gridSteps - 1),
            };
            const [misfit] = trial.of(pair.S, pair.J, everyLag).misfit;
            if (misfit < least) {
              least = misfit;
              at = pair;
            }
          }
        }
        const step = (1.01 * largest) / gridSteps;
        const [best] = points;
        expectClose(best.S, at.S, { absolute: step }, 'S of the best pair');
        expectClose(best.misfit, least, { absolute: 0.01 }, 'misfit');
        expectClose(best.S, S, { absolute: 2 * step }, 'S');
        expect(best.delay).toBe(2);
      });
    }
  }

  it('finds a valve with a large jump in the middle of its cycle, where OP swings by S but not by S + J', () => {
    // Started at the first OP such a valve would never break loose, and the true pair would explain nothing.
    const cycle = Float64Array.from({ length: samples }, (_, k) => 50 + 1.75 * Math.sin(k / 9));
    for (const [S, J] of [
      [3, 2.9],
      [3.2, 1.6],
    ]) {
      const travel = twoParameterValve(cycle, { S, J, start: 48 });
      const pv = pvBehind(travel, false, 0.02);
      const objective = createObjective(pv, cycle, { ...anyGain, ...grid, theta: 0.8, integrating: false });
      const [best] = searchGrid(objective, cycle, 'slides-on', smallest, 3.5, openingOf(cycle, 57));
      expect(best.misfit).toBeLessThan(0.15);
      expectClose(best.S, S, { absolute: 0.15 }, `S for J = ${J}`);
      expectClose(best.J, J, { absolute: 0.25 * S }, `J for J = ${J}`);
      expectClose(best.gain, 1.3, { relative: 0.4 }, `gain for J = ${J}`);
    }
  });

  it('gives its points best first, within the bounds, each with the misfit of its own pair', () => {
    const pv = pvBehind(twoParameterValve(op, { S: 3.2, J: 1.3 }), false, 0.05);
    const objective = createObjective(pv, op, { ...anyGain, ...grid, theta: 0.8, integrating: false });
    const points = searchGrid(objective, op, 'slides-on', 1, 4, opening);
    for (let i = 0; i < points.length; i++) {
      const { S, J, misfit, lag, delay, gain } = points[i];
      if (i > 0) expect(misfit).toBeGreaterThanOrEqual(points[i - 1].misfit);
      expect(S).toBeGreaterThanOrEqual(1);
      expect(S).toBeLessThanOrEqual(4 + 1e-12);
      expect(J).toBeLessThanOrEqual(S + 1e-12);
      expect(grid.lags).toContain(lag);
      expect(grid.delays).toContain(delay);
      expect(misfit < 1 === gain > 0).toBe(true);
    }
    const [{ S, J, misfit }] = points;
    const everyLag = grid.lags.map((_, i) => i);
    const again = new PairTrial(objective, op, 'slides-on', 1, opening).of(S, J, everyLag);
    expectClose(again.misfit[0], misfit, { absolute: 1e-12 });
    expect(searchGrid(objective, op, 'slides-on', 1, 4, opening)).toEqual(points);
  });
});

describe('firstTheta', () => {
  it('is lower under drift than under white noise of the same strength', () => {
    const travel = twoParameterValve(op, { S: 3.2, J: 1.3 });
    const random = seededRandom(9);
    let drift = 0;
    const drifting = pvBehind(travel, false, 0).map((value) => {
      drift += 0.3 * random.normal();
      return value + drift;
    });
    const white = pvBehind(travel, false, 0.3);
    const settings = processSettings({ period: 50 });
    const thetas = [drifting, white].map((pv) => firstTheta(pv, op, smallest, largest, settings));
    expect(thetas[0]).toBeLessThan(thetas[1]);
    for (const theta of thetas) expect(theta >= 0 && theta < 1).toBe(true);
  });
});
