import { describe, expect, test } from 'vitest';
import { powerSpectrum } from '../../src/signal/fourier';
import { seededRandom } from '../../src/signal/random';
import { randomPhases, selfPredictionError, surrogate } from '../../src/signal/surrogate';
import { expectAllClose } from '../closeness';

const random = seededRandom(1);
const values = new Float64Array(201).map((_, i) => Math.sin(i / 3) ** 3 + 0.1 * random.normal());

describe('surrogate', () => {
  test.each([200, 201])('of %d samples has the same spectrum and another course', (n) => {
    const own = values.slice(0, n);
    const other = surrogate(own, randomPhases(n, seededRandom(2)));
    expectAllClose(powerSpectrum(other, 1).power, powerSpectrum(own, 1).power, { absolute: 1e-12 });
    expect(Math.abs(other[10]! - own[10]!)).toBeGreaterThan(0.01);
  });
  test('with phases of zero is the signal itself', () => {
    expectAllClose(surrogate(values, new Float64Array(100)), values, { absolute: 1e-12 });
  });
  test('a wrong number of phases is refused', () => {
    expect(() => surrogate(values, new Float64Array(3))).toThrow('takes 100 phases. Received 3.');
  });
});

describe('self prediction', () => {
  test('a signal that repeats exactly foretells itself without error', () => {
    const repeating = new Float64Array(120).map((_, i) => ((i % 10) * 7) % 10);
    expect(selfPredictionError(repeating, 10, 5)).toBe(0);
  });
  test('white noise does not: the error is that of a mean of 8 others', () => {
    const noise = new Float64Array(1000).map(() => random.normal());
    expect(Math.abs(selfPredictionError(noise, 10, 8) - Math.sqrt(1 + 1 / 8))).toBeLessThan(0.08);
  });
  test('a signal too short for the neighbours is refused', () => {
    expect(() => selfPredictionError(values.slice(0, 40), 10, 8)).toThrow('more than the 40 samples');
  });
});
