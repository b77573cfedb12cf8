import { describe, expect, it } from 'vitest';
import { busiestWindow, longestSearch } from '../../src/estimate/window';
import { noiseOf } from '../oscillation/waves';

describe('busiestWindow', () => {
  it('takes the whole of a record that is short enough', () => {
    for (const samples of [20, longestSearch]) {
      expect(busiestWindow(noiseOf(samples, 0.9, 1))).toEqual({ from: 0, to: samples });
    }
  });

  it('stays within a long record, which it does not exceed, and finds where OP turns', () => {
    const samples = 3 * longestSearch;
    for (const start of [0, 1.3 * longestSearch, 2 * longestSearch]) {
      const op = new Float64Array(samples).map((_, k) =>
        k >= start && k < start + longestSearch ? 50 + 2 * Math.sin((k - start) / 12) : 50,
      );
      const { from, to } = busiestWindow(op);
      expect(from).toBeGreaterThanOrEqual(0);
      expect(to).toBeLessThanOrEqual(samples);
      expect(to - from).toBe(longestSearch);
      const shared = Math.min(to, start + longestSearch) - Math.max(from, start);
      expect(shared).toBeGreaterThan(0.7 * longestSearch);
    }
  });

  it('does not lose the end of a record that is a little longer than a window', () => {
    const samples = Math.round(1.2 * longestSearch);
    const quiet = 0.25 * longestSearch;
    const op = new Float64Array(samples).map((_, k) => (k > quiet ? 50 + 2 * Math.sin(k / 12) : 50));
    const { from, to } = busiestWindow(op);
    expect(to - from).toBe(longestSearch);
    expect(from).toBeGreaterThan(0);
  });
});
