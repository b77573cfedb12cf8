import { expect, test } from 'vitest';
import { seededRandom } from '../../src/signal/random';
import { mean, standardDeviation } from '../../src/signal/statistics';

test('equal seeds give equal numbers, other seeds others', () => {
  const draw = (seed: number): number[] => {
    const random = seededRandom(seed);
    return Array.from({ length: 5 }, (_, i) => (i % 2 === 0 ? random.normal() : random.uniform()));
  };
  expect(draw(7)).toEqual(draw(7));
  expect(draw(7)).not.toEqual(draw(8));
});

test('moments are those of the uniform and the normal distribution, within four standard errors', () => {
  const random = seededRandom(1);
  const n = 40_000;
  const uniform = new Float64Array(n).map(() => random.uniform());
  const normal = new Float64Array(n).map(() => random.normal());
  expect(Math.abs(mean(uniform) - 0.5)).toBeLessThan(4 / Math.sqrt(12 * n));
  expect(Math.abs(standardDeviation(uniform) - Math.sqrt(1 / 12))).toBeLessThan(0.003);
  expect(Math.abs(mean(normal))).toBeLessThan(4 / Math.sqrt(n));
  expect(Math.abs(standardDeviation(normal) - 1)).toBeLessThan(4 / Math.sqrt(2 * n));
  const beyond = normal.filter((value) => Math.abs(value) > 1.959964).length / n;
  expect(Math.abs(beyond - 0.05)).toBeLessThan(4 * Math.sqrt((0.05 * 0.95) / n));
});

test('a seed that is not an integer is refused', () => {
  expect(() => seededRandom(1.5)).toThrow('A seed must be an integer. Received 1.5.');
});
