import { describe, expect, it } from 'vitest';
import { extent, padded, plain, short } from '../../src/figures/plain-numbers';

describe('plain', () => {
  it('gives a plain array with null for what is not finite', () => {
    const got = plain(Float64Array.of(1, Number.NaN, Number.POSITIVE_INFINITY, 3));
    expect(Array.isArray(got)).toBe(true);
    expect(got).toEqual([1, null, null, 3]);
  });

  it('picks and rounds to less than a ten-thousandth of the spread', () => {
    const values = Float64Array.from({ length: 100 }, (_, i) => 0.001 * Math.sin(i) + Math.PI);
    const got = plain(values, [5, 6, 90]);
    for (const [place, i] of [5, 6, 90].entries()) {
      expect(Math.abs(got[place]! - values[i]!)).toBeLessThan(0.0001 * 0.002);
    }
    expect(String(got[0]).length).toBeLessThan(12);
  });

  it('takes values all alike, empty arrays and very small or large ones', () => {
    expect(plain([5, 5])).toEqual([5, 5]);
    expect(plain([0, 0])).toEqual([0, 0]);
    expect(Object.is(plain([-1e-9, 5])[0], 0)).toBe(true);
    expect(plain([])).toEqual([]);
    expect(plain([1e-9, 2e-9])).toEqual([1e-9, 2e-9]);
    expect(plain([1e9, 2e9])).toEqual([1e9, 2e9]);
  });
});

describe('extent, padded and short', () => {
  it('finds the ends of what is finite', () => {
    expect(extent([2, Number.NaN, -1])).toEqual({ low: -1, high: 2 });
    expect(extent([Number.NaN])).toEqual({ low: 0, high: 0 });
  });

  it('puts room around a range, also around a single value', () => {
    expect(padded(0, 10, 0.1, 0.2)).toEqual([-1, 12]);
    const [low, high] = padded(5, 5, 0.1, 0.1);
    expect(low).toBeLessThan(5);
    expect(high).toBeGreaterThan(5);
  });

  it('shows three significant digits and no trailing zeros', () => {
    expect([0, 0.4204, 12.345, 118, 1250.4, -0.5].map((value) => short(value))).toEqual([
      '0',
      '0.42',
      '12.3',
      '118',
      '1250',
      '-0.5',
    ]);
  });
});
