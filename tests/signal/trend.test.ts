import { describe, expect, test } from 'vitest';
import { removeLine, removeMean, removeSlowTrend, slowTrend } from '../../src/signal/trend';
import { expectAllClose, expectClose } from '../closeness';

const rounding = { absolute: 1e-9 };
const ramp = new Float64Array(101).map((_, i) => 1e6 + 0.7 * i);

describe('slow trend', () => {
  test.each([1, 2, 7, 50, 101, 500])('follows a straight drift exactly, window %d', (window) => {
    expectAllClose(slowTrend(ramp, window), ramp, rounding);
  });
  test('is the centred moving average inside the record', () => {
    const values = Float64Array.of(0, 3, 0, 0, 9, 0, 0);
    const trend = slowTrend(values, 3);
    expectAllClose(trend.subarray(1, 6), [1, 1, 3, 3, 3], rounding);
  });
  test('over whole cycles leaves the cycle as it is', () => {
    const cycle = new Float64Array(400).map((_, i) => Math.sin((2 * Math.PI * i) / 25));
    const drifting = cycle.map((value, i) => value + 0.02 * i);
    expectAllClose(removeSlowTrend(drifting, 75).subarray(40, 360), cycle.subarray(40, 360), rounding);
  });
});

test('removeMean and removeLine leave nothing of a constant and a ramp', () => {
  expectAllClose(removeMean(new Float64Array(5).fill(2)), new Float64Array(5), rounding);
  expectAllClose(removeLine(ramp), new Float64Array(101), rounding);
  expectClose(removeLine(Float64Array.of(4))[0]!, 0, rounding);
});

test('no values, or a window that is no whole number, are refused', () => {
  expect(() => slowTrend(new Float64Array(0), 3)).toThrow('needs at least one value');
  expect(() => removeSlowTrend(ramp, 2.5)).toThrow('at least 1. Received 2.5.');
});
