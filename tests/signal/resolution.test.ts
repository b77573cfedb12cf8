import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/signal/random';
import { resolution } from '../../src/signal/resolution';
import { expectClose } from '../closeness';

describe('resolution', () => {
  const smooth = Float64Array.from({ length: 2000 }, (_, i) => 40 + 5 * Math.sin(i / 17));

  it('is the rounding step of rounded values', () => {
    for (const step of [0.1, 0.025, 0.5]) {
      const rounded = smooth.map((value) => Math.round(value / step) * step);
      expectClose(resolution(rounded), step, { relative: 1e-6 });
    }
  });

  it('is next to nothing when any value occurs, and 0 without change', () => {
    const random = seededRandom(4);
    expect(resolution(smooth.map((value) => value + random.normal()))).toBeLessThan(0.01);
    expect(resolution(new Float64Array(50).fill(3))).toBe(0);
    expect(resolution(new Float64Array(0))).toBe(0);
  });
});
