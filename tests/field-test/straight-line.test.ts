import { describe, expect, it } from 'vitest';
import { average, slopeIn } from '../../src/field-test/straight-line';

describe('means and slopes of a stretch', () => {
  it('are those of the samples in it, and 0 where there is nothing to tell', () => {
    const line = Float64Array.from({ length: 10 }, (_, k) => 3 + 0.25 * k);
    expect(average(line)).toBeCloseTo(4.125, 12);
    expect(average([])).toBe(0);
    expect(slopeIn(line, 2, 9)).toBeCloseTo(0.25, 12);
    expect(slopeIn(line, 2, 3)).toBe(0);
  });
});
