/** The one way in which tests compare numbers: within an absolute plus a relative tolerance, with a useful message. */
import { expect } from 'vitest';

export interface Tolerance {
  readonly absolute?: number;
  readonly relative?: number;
}

/** Expects `got` to lie within `absolute + relative * |want|` of `want`. */
export function expectClose(got: number, want: number, tolerance: Tolerance, what = 'value'): void {
  const allowed = (tolerance.absolute ?? 0) + (tolerance.relative ?? 0) * Math.abs(want);
  const off = Math.abs(got - want);
  expect(off <= allowed, `${what}: got ${got}, want ${want}, off by ${off}, allowed ${allowed}`).toBe(true);
}

/** Expects equal lengths and every value to be close. */
export function expectAllClose(
  got: ArrayLike<number>,
  want: ArrayLike<number>,
  tolerance: Tolerance,
  what = 'values',
): void {
  expect(got.length, `length of ${what}`).toBe(want.length);
  for (let i = 0; i < want.length; i++) expectClose(got[i]!, want[i]!, tolerance, `${what}[${i}]`);
}
