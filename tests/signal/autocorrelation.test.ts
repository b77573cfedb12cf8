import { expect, test } from 'vitest';
import { autocorrelation, crossCorrelation } from '../../src/signal/autocorrelation';
import { expectAllClose, expectClose } from '../closeness';

test('a signal that follows another by three samples peaks at lag +3', () => {
  const a = new Float64Array(200).map((_, i) => Math.sin(i / 3) + Math.sin(i / 7.1));
  const b = a.map((_, i) => 2 * a[Math.max(0, i - 3)]! + 100);
  const r = crossCorrelation(a, b, 10);
  expect(r.indexOf(Math.max(...r)) - 10).toBe(3);
});

test('by hand: 1, 2, 3 has -1/2 at lag 2 and 0 at lag 1', () => {
  expectAllClose(autocorrelation(Float64Array.of(1, 2, 3), 2), [1, 0, -0.5], { absolute: 1e-15 });
});

test('a signal against itself is 1 at lag 0 and the same on both sides', () => {
  const values = new Float64Array(64).map((_, i) => (i * i) % 17);
  const r = crossCorrelation(values, Float64Array.from(values), 20);
  expectClose(r[20]!, 1, { absolute: 1e-12 });
  expectAllClose(Float64Array.from(r).reverse(), r, { absolute: 1e-12 });
});

test('a constant signal gives zeros, not NaN', () => {
  expectAllClose(autocorrelation(new Float64Array(8).fill(0.1), 3), [0, 0, 0, 0], {});
});

test('lengths and lags that do not fit are refused', () => {
  const five = new Float64Array(5);
  expect(() => crossCorrelation(five, new Float64Array(4), 1)).toThrow('Received 5 and 4 samples.');
  expect(() => autocorrelation(five, 5)).toThrow('from 0 to 4 for 5 samples. Received 5.');
});
