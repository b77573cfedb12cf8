import { expect, test } from 'vitest';
import { forwardTransform, inverseTransform, nextPowerOfTwo, powerSpectrum } from '../../src/signal/fourier';
import { seededRandom } from '../../src/signal/random';
import { expectAllClose, expectClose } from '../closeness';

const random = seededRandom(11);
const noise = (n: number): Float64Array => new Float64Array(n).map(() => random.normal());

test.each([1, 2, 3, 16, 45, 128, 1001, 14_400])('the inverse brings back a signal of %d samples', (n) => {
  const values = noise(n);
  expectAllClose(inverseTransform(forwardTransform(values), n), values, { absolute: 1e-11 });
});

test.each([90, 128, 91])('the powers of a spectrum over %d samples sum to the mean square', (n) => {
  const values = noise(n);
  const { power } = powerSpectrum(values, 0.5);
  const meanSquare = values.reduce((sum, value) => sum + value * value, 0) / n;
  expectClose(
    power.reduce((sum, value) => sum + value, 0),
    meanSquare,
    { relative: 1e-12 },
  );
});

test('whole cycles of a sine of amplitude 3 are one line of power 4.5 at its frequency', () => {
  const values = new Float64Array(60).map((_, i) => 3 * Math.sin((2 * Math.PI * 5 * i) / 60));
  const { frequency, power } = powerSpectrum(values, 2);
  expectClose(frequency[5]!, 5 / 120, { relative: 1e-14 });
  expectClose(power[5]!, 4.5, { relative: 1e-12 });
  expectAllClose(
    power.map((value, k) => (k === 5 ? 0 : value)),
    new Float64Array(31),
    { absolute: 1e-24 },
  );
});

test('nextPowerOfTwo', () => {
  expect([1, 2, 3, 1024, 1025].map(nextPowerOfTwo)).toEqual([1, 2, 4, 1024, 2048]);
});

test('sizes that do not fit are refused', () => {
  expect(() => forwardTransform(new Float64Array(0))).toThrow('at least one value');
  const spectrum = forwardTransform(noise(10));
  expect(() => inverseTransform(spectrum, 12)).toThrow('half spectrum of 7 values. Received 6 real');
  expect(() => powerSpectrum(noise(4), 0)).toThrow('above 0. Received 0.');
});
