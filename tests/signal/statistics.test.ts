import { expect, test } from 'vitest';
import { seededRandom } from '../../src/signal/random';
import {
  mean,
  median,
  noiseLevel,
  quantile,
  rangeOf,
  standardDeviation,
  variance,
} from '../../src/signal/statistics';
import { expectClose } from '../closeness';

const of = (...values: number[]): Float64Array => Float64Array.from(values);

test('mean, variance and median of a handful of numbers', () => {
  expect(mean(of(1, 2, 6))).toBe(3);
  expect(variance(of(1, 2, 6))).toBe(7);
  expect(standardDeviation(of(1, 1, 1))).toBe(0);
  expect(median(of(5, 1, 3))).toBe(3);
  expect(median(of(4, 1, 3, 2))).toBe(2.5);
});

test('the range is that of the outermost values', () => {
  expect(rangeOf(of(3, -2, 1))).toBe(5);
  expect(rangeOf(of(4))).toBe(0);
});

test('a large mean costs the variance no digits', () => {
  expectClose(variance(of(1e9 + 1, 1e9 + 2, 1e9 + 6)), 7, { relative: 1e-12 });
});

test('the input keeps its order', () => {
  const values = of(3, 1, 2);
  quantile(values, 0.3);
  expect(values).toEqual(of(3, 1, 2));
});

test('noise level: white noise on a ramp with jumps, a smooth cycle, a constant', () => {
  const random = seededRandom(3);
  const noisy = new Float64Array(4000).map(
    (_, i) => 0.1 * i + 5 * Math.floor(i / 200) + 0.3 * random.normal(),
  );
  expectClose(noiseLevel(noisy), 0.3, { relative: 0.06 });
  const smooth = new Float64Array(4000).map((_, i) => Math.sin((2 * Math.PI * i) / 200));
  expect(noiseLevel(smooth)).toBeLessThan(0.001);
  expect(noiseLevel(new Float64Array(10).fill(4))).toBe(0);
});

test('too few values and a share out of range are refused with a sentence', () => {
  expect(() => mean(of())).toThrow('The mean needs at least 1 value. Received 0.');
  expect(() => variance(of(1))).toThrow('The variance needs at least 2 values. Received 1.');
  expect(() => noiseLevel(of(1, 2))).toThrow('at least 3 values');
  expect(() => quantile(of(1), 1.1)).toThrow('between 0 and 1. Received 1.1.');
});
