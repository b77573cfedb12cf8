import { describe, expect, test } from 'vitest';
import { bandPass, firstOrderLag, savitzkyGolay } from '../../src/signal/filter';
import { expectAllClose, expectClose } from '../closeness';

describe('bandPass', () => {
  const slow = new Float64Array(1000).map((_, i) => Math.cos((2 * Math.PI * (i + 0.5)) / 500));
  const fast = new Float64Array(1000).map((_, i) => Math.cos((2 * Math.PI * (i + 0.5)) / 10));
  const both = slow.map((value, i) => value + fast[i]! + 7);
  test('keeps what lies in the band, where it lies', () => {
    expectAllClose(bandPass(both, 1, 0.02, Infinity), fast, { absolute: 0.01 });
    expectAllClose(
      bandPass(both, 1, 0, 0.02),
      slow.map((value) => value + 7),
      { absolute: 0.01 },
    );
    expectAllClose(bandPass(both, 1, 0.01, 0.02), new Float64Array(1000), { absolute: 0.05 });
  });
  test('halves the amplitude at an edge (half of the Butterworth power, twice over)', () => {
    expectAllClose(
      bandPass(fast, 1, 0, 0.1),
      fast.map((value) => value / 2),
      { absolute: 1e-9 },
    );
  });
  test('refuses edges out of order and a sample period of zero', () => {
    expect(() => bandPass(both, 1, 2, 1)).toThrow('from a low to a higher frequency. Received 2 to 1 1/s.');
    expect(() => bandPass(both, 0, 1, 2)).toThrow('A sample period is a number of seconds above 0.');
  });
});

describe('firstOrderLag', () => {
  test('a step comes to 63.2 % after one time constant, one sample later than the input', () => {
    const step = new Float64Array(40).map((_, i) => (i < 5 ? 0 : 1));
    const y = firstOrderLag(step, 2, 20);
    expect(y[5]).toBe(0);
    expectClose(y[15]!, 1 - Math.exp(-1), { absolute: 1e-12 });
  });
  test('refuses a time constant of zero', () => {
    expect(() => firstOrderLag(new Float64Array(3), 1, 0)).toThrow('above 0. Received 0.');
  });
});

describe('savitzkyGolay', () => {
  const cubic = new Float64Array(30).map((_, i) => 0.01 * i ** 3 - i * i + 2);
  test('a cubic comes through a cubic smoother with its derivatives, ends included', () => {
    expectAllClose(savitzkyGolay(cubic, 9, 3), cubic, { absolute: 1e-8 });
    expectAllClose(
      savitzkyGolay(cubic, 9, 3, 1),
      cubic.map((_, i) => 0.03 * i * i - 2 * i),
      { absolute: 1e-8 },
    );
    expectAllClose(
      savitzkyGolay(cubic, 9, 3, 2),
      cubic.map((_, i) => 0.06 * i - 2),
      { absolute: 1e-8 },
    );
  });
  test('refuses an even window and one that is too long', () => {
    expect(() => savitzkyGolay(cubic, 8, 3)).toThrow('Received window 8, degree 3, derivative 0.');
    expect(() => savitzkyGolay(cubic, 31, 3)).toThrow('at most the 30 samples');
  });
});
