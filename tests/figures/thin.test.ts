import { describe, expect, it } from 'vitest';
import { thin } from '../../src/figures/thin';
import { seededRandom } from '../../src/signal/random';

describe('thin', () => {
  const random = seededRandom(3);
  const values = Object.freeze(Array.from({ length: 50_000 }, () => random.normal())) as readonly number[];

  it('leaves a short trace whole', () => {
    expect(thin([3, 1, 2])).toEqual([0, 1, 2]);
    expect(thin([])).toEqual([]);
  });

  it('keeps to the limit, in order, with the first, the last, the lowest and the highest sample', () => {
    for (const limit of [4, 5, 37, 2000]) {
      const kept = thin(values, limit);
      expect(kept.length).toBeLessThanOrEqual(limit);
      expect([...kept].sort((a, b) => a - b)).toEqual(kept);
      expect(new Set(kept).size).toBe(kept.length);
      expect(kept[0]).toBe(0);
      expect(kept.at(-1)).toBe(values.length - 1);
      expect(kept).toContain(values.indexOf(Math.min(...values)));
      expect(kept).toContain(values.indexOf(Math.max(...values)));
    }
  });

  it('keeps a spike of a single sample wherever it stands', () => {
    for (const at of [1, 777, 4999, 9998]) {
      const flat = new Float64Array(10_000);
      flat[at] = -5;
      expect(thin(flat, 100)).toContain(at);
    }
  });

  it('passes over values that are not finite', () => {
    const holes = Float64Array.from({ length: 1000 }, (_, i) => (i > 100 && i < 900 ? Number.NaN : i));
    const kept = thin(holes, 50);
    expect(kept.every((i) => Number.isFinite(holes[i]))).toBe(true);
  });

  it('refuses a limit that makes no sense', () => {
    expect(() => thin(values, 3)).toThrow('at least 4 points. Received 3.');
    expect(() => thin(values, 10.5)).toThrow('whole number');
  });
});
