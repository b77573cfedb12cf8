import { describe, expect, it } from 'vitest';
import { createPositionerStem } from '../../src/valve/positioner-stem';
import { runValve } from '../../src/valve/steppable-valve';
import { twoParameterValve } from '../../src/valve/two-parameter';

describe('positioner-driven stem', () => {
  it('without a lag is the two-parameter element with S = J = band that sticks again', () => {
    const op = Float64Array.from({ length: 400 }, (_, k) => 50 + 6 * Math.sin(k / 17) + 2 * Math.cos(k / 5));
    const travel = runValve(createPositionerStem({ band: 1.5, lag: 0, startTravel: 50 }), op, 1);
    expect([...travel]).toEqual([
      ...twoParameterValve(op, { S: 1.5, J: 1.5, model: 'sticks-again', start: 50 }),
    ]);
  });

  it('goes all the way with its lag and then rests', () => {
    const valve = createPositionerStem({ band: 1, lag: 2, startTravel: 40 });
    expect(valve.advance(41, 1)).toBe(40);
    expect(valve.advance(42, 2)).toBeCloseTo(42 - 2 / Math.E, 12);
    expect(valve.advance(42.5, 100)).toBe(42);
  });

  it('refuses a negative band', () => {
    expect(() => createPositionerStem({ band: -1 })).toThrow(/must be 0 or more/);
  });
});
