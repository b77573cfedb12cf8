import { expect, it } from 'vitest';
import { describingFunction } from '../../src/valve/describing-function';

it('a valve that does not move passes nothing, a perfect one everything', () => {
  expect(describingFunction(1.4, 3, 1)).toEqual({ re: 0, im: 0 });
  expect(describingFunction(1.4, 0, 0).re).toBeCloseTo(1, 12);
  expect(describingFunction(1.4, 0, 0).im).toBeCloseTo(0, 12);
});

it('refuses what cannot be', () => {
  expect(() => describingFunction(0, 1, 0)).toThrow(/amplitude above 0/);
  expect(() => describingFunction(1, 1, 2)).toThrow(/0 <= J <= S/);
});
