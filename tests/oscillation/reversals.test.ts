import { expect, test } from 'vitest';
import { countReversals } from '../../src/oscillation/reversals';
import { seededRandom } from '../../src/signal/random';

test('turns are counted at the extremes, wiggles up to the tolerance are not', () => {
  const values = Float64Array.of(0, 1, 2, 1.8, 3, 2, 1, 1.2, 0, 2);
  expect(countReversals(values, 0.5)).toEqual({ count: 2, at: [4, 8] });
  expect(countReversals(values, 0.1)).toEqual({ count: 6, at: [2, 3, 4, 6, 7, 8] });
});

test('ten sine cycles under noise turn twenty times, whatever the first direction', () => {
  const random = seededRandom(2);
  for (const sign of [1, -1]) {
    const values = new Float64Array(1000).map(
      (_, i) => sign * Math.sin((2 * Math.PI * i) / 100) + 0.05 * random.normal(),
    );
    expect(countReversals(values, 0.5).count).toBe(20);
  }
});

test('a ramp, a constant, a single sample and nothing never turn', () => {
  for (const values of [
    Float64Array.of(1, 2, 3),
    new Float64Array(5),
    Float64Array.of(4),
    new Float64Array(0),
  ]) {
    expect(countReversals(values, 0)).toEqual({ count: 0, at: [] });
  }
});

test('a turn of exactly the tolerance does not count', () => {
  expect(countReversals(Float64Array.of(0, 1, 0.5, 2), 0.5).count).toBe(0);
});

test('a tolerance below zero is refused', () => {
  expect(() => countReversals(new Float64Array(3), -1)).toThrow('at least 0. Received -1.');
});
