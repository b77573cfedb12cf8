import { describe, expect, it } from 'vitest';
import { filterTravel } from '../../src/estimate/objective';
import { type TrackSettings, trackTravel } from '../../src/estimate/track-travel';
import { seededRandom } from '../../src/signal/random';
import { textbookStem } from '../../src/valve/stem';
import { runValve } from '../../src/valve/steppable-valve';
import { twoParameterValve } from '../../src/valve/two-parameter';

const samples = 1500;
const op = Float64Array.from(
  { length: samples },
  (_, k) => 50 + 3 * Math.sin(k / 22) + 1.2 * Math.sin(k / 130),
);
const noise = 0.02;

function settingsFor(S: number, J: number, change: Partial<TrackSettings> = {}): TrackSettings {
  return {
    S,
    J,
    gain: 1.2,
    lag: 3,
    secondLag: 0,
    delay: 2,
    theta: 0.5,
    secondTheta: null,
    variance: noise ** 2,
    ...change,
  };
}

/** What PV shows of a travel, with noise, as the disturbance filter leaves it. */
function targetOf(travel: Float64Array, settings: TrackSettings, seed = 1): Float64Array {
  const random = seededRandom(seed);
  const { gain, theta, secondTheta } = settings;
  return filterTravel(travel, settings, theta, secondTheta !== null).map(
    (value) => gain * value + noise * random.normal(),
  );
}

/** Share of the true travel's variance that another misses, the first tenth not counted. */
function missed(found: Float64Array, truth: Float64Array): number {
  const off = found.map((value, k) => value - truth[k]);
  const squares = (values: Float64Array): number => {
    const counted = values.subarray(samples / 10);
    const mean = counted.reduce((sum, value) => sum + value, 0) / counted.length;
    return counted.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  };
  return squares(off) / squares(truth);
}

describe('trackTravel', () => {
  for (const model of ['slides-on', 'sticks-again'] as const) {
    it(`follows the element that made PV: ${model}`, () => {
      for (const [S, J] of [
        [3, 1],
        [3, 3],
        [2, 0.4],
      ]) {
        const travel = twoParameterValve(op, { S, J, model });
        const settings = settingsFor(S, J);
        const found = trackTravel(targetOf(travel, settings), op, settings);
        expect(missed(found.travel, travel), `S ${S}, J ${J}`).toBeLessThan(0.01);
      }
    });
  }

  it('finds out where the travel stood at the beginning, also where OP swings by S but not by S + J', () => {
    const cycle = Float64Array.from({ length: samples }, (_, k) => 50 + 1.75 * Math.sin(k / 11 + 0.4));
    for (const [S, J] of [
      [3, 3],
      [3.2, 1.6],
    ]) {
      for (const start of [48.2, 51.8]) {
        const travel = twoParameterValve(cycle, { S, J, start });
        const settings = settingsFor(S, J);
        const found = trackTravel(targetOf(travel, settings), cycle, settings);
        expect(missed(found.travel, travel), `S ${S}, J ${J}, from ${start}`).toBeLessThan(0.02);
      }
    }
  });

  it('follows the stem of a real valve better than the element that it is like', () => {
    for (const seed of [1, 2, 3]) {
      const random = seededRandom(seed);
      const shaken = op.map((value) => value + 0.03 * random.normal());
      const travel = runValve(
        textbookStem({ S: 3, J: 1.4, actuatorLag: 0.4, startOp: shaken[0] }),
        shaken,
        1,
      );
      const settings = settingsFor(3, 1.4);
      const { travel: found } = trackTravel(targetOf(travel, settings, seed), shaken, settings);
      const element = twoParameterValve(shaken, { S: 3, J: 1.4 });
      expect(missed(found, travel)).toBeLessThan(missed(element, travel));
      expect(missed(found, travel)).toBeLessThan(0.05);
    }
  });

  it('follows behind an integrator too', () => {
    const travel = twoParameterValve(op, { S: 3, J: 1 });
    const settings = settingsFor(3, 1, { gain: 0.1, secondTheta: 0.47, theta: 0.5, variance: noise ** 2 });
    const found = trackTravel(targetOf(travel, settings), op, settings);
    expect(missed(found.travel, travel)).toBeLessThan(0.05);
  });

  it('charges liberties only where it takes some', () => {
    const settings = settingsFor(3, 1);
    const free = trackTravel(targetOf(twoParameterValve(op, { S: 3, J: 1 }), settings), op, settings);
    const other = twoParameterValve(op, { S: 3.4, J: 1.3 });
    const dear = trackTravel(targetOf(other, settings), op, settings);
    expect(free.penalty).toBeGreaterThanOrEqual(0);
    expect(free.penalty).toBeLessThan(5);
    expect(dear.penalty).toBeGreaterThan(free.penalty + 5);
  });

  it('gives one finite travel a sample, the same each time, and leaves its input alone', () => {
    const settings = Object.freeze(settingsFor(3, 1, { delay: 2.4, secondLag: 1 }));
    const target = targetOf(twoParameterValve(op, { S: 3, J: 1 }), settings);
    const before = [Array.from(target), Array.from(op)];
    const one = trackTravel(target, op, settings);
    expect(one.travel.length).toBe(samples);
    expect(one.travel.every(Number.isFinite)).toBe(true);
    expect(trackTravel(target, op, settings)).toEqual(one);
    expect([Array.from(target), Array.from(op)]).toEqual(before);
  });
});
