import { describe, expect, it } from 'vitest';
import { intervalsOf, recordParts, roomBeyondS } from '../../src/estimate/interval';
import { expectClose } from '../closeness';

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

describe('roomBeyondS', () => {
  const saw = (top: number, bottom: number) =>
    Float64Array.from(
      { length: 1200 },
      (_, k) => bottom + (top - bottom) * (1 - Math.abs((k % 60) - 30) / 30),
    );

  it('is what OP moves between turns beyond S, as a share of S', () => {
    expectClose(roomBeyondS(saw(53, 50), 3), 0, { absolute: 0.05 });
    expectClose(roomBeyondS(saw(56, 50), 3), 1, { absolute: 0.05 });
  });

  it('grows where OP wanders from swing to swing', () => {
    const drift = saw(53, 50).map((value, k) => value + 2 * Math.sin(k / 90));
    expect(roomBeyondS(drift, 3)).toBeGreaterThan(roomBeyondS(saw(53, 50), 3) + 0.2);
  });

  it('is 0 for an OP that does not turn', () => {
    expect(roomBeyondS(new Float64Array(100).fill(50), 3)).toBe(0);
  });
});

describe('intervalsOf', () => {
  const best = Object.freeze({ S: 3, J: 1 });
  const agreeing = Array.from({ length: 5 }, () => best);
  const apart = (by: number) => [-2, -1, 0, 1, 2].map((step) => ({ S: 3 + step * by, J: 1 + step * by }));
  const half = ({ low, high }: { low: number; high: number }): number => (high - low) / 2;

  it('holds its value, in % of span, and is never of no width', () => {
    const { S, J } = intervalsOf(best, agreeing, [], 1);
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

  it('widens as parts of the record disagree', () => {
    const widths = [0, 0.05, 0.2].map((by) => {
      const { S, J } = intervalsOf(best, apart(by), [], 1);
      return [half(S), half(J)];
    });
    for (const i of [0, 1]) {
      expect(widths[1][i]).toBeGreaterThan(widths[0][i]);
      expect(widths[2][i]).toBeGreaterThan(widths[1][i]);
    }
  });

  it('widens by other histories that are nearly as good, and not by ones that are far worse', () => {
    const rival = (excess: number) => [
      { ...best, excess: 0 },
      { S: 3.3, J: 1.8, excess },
    ];
    const alone = intervalsOf(best, agreeing, [], 1);
    const near = intervalsOf(best, agreeing, rival(3), 1);
    const far = intervalsOf(best, agreeing, rival(3000), 1);
    expect(half(near.S)).toBeGreaterThan(half(alone.S));
    expect(half(near.J)).toBeGreaterThan(half(alone.J));
    expect(near.alternativesJ).toBeGreaterThan(0);
    expectClose(half(far.S), half(alone.S), { relative: 1e-6 });
    expectClose(half(far.J), half(alone.J), { relative: 1e-6 });
  });

  it('is wider for J, not for S, the less OP moves beyond S', () => {
    const [wide, narrow] = [0.1, 1].map((room) => intervalsOf(best, agreeing, [], room));
    expect(half(wide.J)).toBeGreaterThan(half(narrow.J));
    expect(half(wide.S)).toBe(half(narrow.S));
  });

  it('tells the spread of J over the parts as a share of S, 0 for parts that agree', () => {
    expect(intervalsOf(best, agreeing, [], 1).partsJ).toBe(0);
    // Sample standard deviation of -2, -1, 0, 1, 2 is the root of 2.5.
    expectClose(intervalsOf(best, apart(0.3), [], 1).partsJ, (0.3 * Math.sqrt(2.5)) / 3, { relative: 1e-9 });
  });

  it('does not reach below 0, nor J above the high end of S', () => {
    const { S, J } = intervalsOf({ S: 3, J: 2.9 }, apart(1.2), [], 0.1);
    expect(S.low).toBeGreaterThanOrEqual(0);
    expect(J.low).toBeGreaterThanOrEqual(0);
    expect(J.high).toBeLessThanOrEqual(S.high);
  });

  it('scales with its input', () => {
    const double = ({ S, J }: { S: number; J: number }) => ({ S: 2 * S, J: 2 * J });
    const one = intervalsOf(best, apart(0.2), [{ S: 3.2, J: 1.3, excess: 4 }], 0.5);
    const two = intervalsOf(
      double(best),
      apart(0.2).map(double),
      [{ ...double({ S: 3.2, J: 1.3 }), excess: 4 }],
      0.5,
    );
    expectClose(two.S.low, 2 * one.S.low, { relative: 1e-9 });
    expectClose(two.J.high, 2 * one.J.high, { relative: 1e-9 });
  });
});
