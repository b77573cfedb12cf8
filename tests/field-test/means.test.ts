import { describe, expect, it } from 'vitest';
import { meanOf } from '../../src/field-test/means';
import { expectClose } from '../closeness';

describe('mean of readings', () => {
  it('has the interval of Student’s t over its scatter', () => {
    // Mean 3, deviation sqrt(2.5), t of 4 degrees at 0.95: 2.131847 (tables of any text on statistics).
    const { value, low, high } = meanOf([1, 2, 3, 4, 5], { each: 0.01 }, '%');
    expect(value).toBe(3);
    expectClose(high - value, (2.131847 * Math.sqrt(2.5)) / Math.sqrt(5), { relative: 1e-5 });
    expectClose(value - low, high - value, { relative: 1e-12 });
  });

  it('is never surer than the errors of its readings, of which the shared one does not average out', () => {
    expectClose(meanOf([2, 2, 2, 2], { each: 0.2 }, '%').high - 2, 1.644854 * 0.1, { relative: 1e-5 });
    const shared = meanOf(Array(100).fill(2), { each: 0, shared: 0.2 }, '%');
    expectClose(shared.high - 2, 1.644854 * 0.2, { relative: 1e-5 });
  });

  it('spans at least the distance of two readings, and never falls below 0', () => {
    const two = meanOf([1, 3], { each: 0.01 }, '%');
    expect([two.low, two.high]).toEqual([1, 3]);
    expect(meanOf([0.1], { each: 1 }, '%').low).toBe(0);
  });
});
