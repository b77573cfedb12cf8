import { describe, expect, it } from 'vitest';
import { intervalsFromParts, recordParts } from '../../src/estimate/interval';

describe('recordParts', () => {
  it('covers the record with overlapping stretches of one length', () => {
    for (const samples of [300, 1801, 3600]) {
      const parts = recordParts(samples);
      expect(parts.length).toBeGreaterThanOrEqual(3);
      expect(parts[0].from).toBe(0);
      expect(parts[parts.length - 1].to).toBe(samples);
      const lengths = new Set(parts.map(({ from, to }) => to - from));
      expect(lengths.size).toBe(1);
      for (let i = 1; i < parts.length; i++) {
        expect(parts[i].from).toBeGreaterThan(parts[i - 1].from);
        expect(parts[i].from).toBeLessThan(parts[i - 1].to);
      }
    }
  });
});

describe('intervalsFromParts', () => {
  const agreeing = Array.from({ length: 5 }, () => ({ S: 3, J: 1 }));
  const apart = (by: number) => [-2, -1, 0, 1, 2].map((step) => ({ S: 3 + step * by, J: 1 + step * by }));
  const half = ({ low, high }: { low: number; high: number }): number => (high - low) / 2;

  it('holds its value, in % of span, and is never of no width', () => {
    const { S, J } = intervalsFromParts(3, 1, agreeing);
    for (const [estimate, value] of [
      [S, 3],
      [J, 1],
    ] as const) {
      expect(estimate.value).toBe(value);
      expect(estimate.low).toBeLessThan(value);
      expect(estimate.high).toBeGreaterThan(value);
      expect(estimate.unit).toMatch(/% of OP span/);
    }
  });

  it('widens as the parts disagree', () => {
    const widths = [0, 0.05, 0.2].map((by) => {
      const found = intervalsFromParts(3, 1, apart(by));
      return [half(found.S), half(found.J)];
    });
    for (const i of [0, 1]) {
      expect(widths[1][i]).toBeGreaterThan(widths[0][i]);
      expect(widths[2][i]).toBeGreaterThan(widths[1][i]);
    }
  });

  it('tells the spread as a share of S, 0 for parts that agree', () => {
    expect(intervalsFromParts(3, 1, agreeing)).toMatchObject({ spreadS: 0, spreadJ: 0 });
    // Sample standard deviation of -2, -1, 0, 1, 2 is the root of 2.5.
    const { spreadJ } = intervalsFromParts(3, 1, apart(0.3));
    expect(spreadJ).toBeCloseTo((0.3 * Math.sqrt(2.5)) / 3, 10);
  });

  it('does not reach below 0, nor J above the high end of S', () => {
    const wide = apart(1.2);
    const { S, J } = intervalsFromParts(3, 2.9, wide);
    expect(S.low).toBeGreaterThanOrEqual(0);
    expect(J.low).toBeGreaterThanOrEqual(0);
    expect(J.high).toBeLessThanOrEqual(S.high);
  });

  it('scales with its input', () => {
    const one = intervalsFromParts(3, 1, apart(0.2));
    const parts = apart(0.2).map(({ S, J }) => ({ S: 2 * S, J: 2 * J }));
    const two = intervalsFromParts(6, 2, parts);
    expect(two.S.low).toBeCloseTo(2 * one.S.low, 12);
    expect(two.J.high).toBeCloseTo(2 * one.J.high, 12);
    expect(two.spreadS).toBeCloseTo(one.spreadS, 12);
  });
});
