import { describe, expect, it } from 'vitest';
import { edge, reducedSpectrum } from '../../src/audit/reduced-spectrum';

describe('reducedSpectrum', () => {
  it('puts a sine into the bands around its frequency', () => {
    const sine = new Float64Array(1000).map((_, k) => 5 + Math.sin((2 * Math.PI * k * 2) / 80));
    const { firstBand, shares } = reducedSpectrum(sine, 2);
    expect(shares.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 4);
    const near = shares.filter((_, i) => Math.abs(Math.log((edge(firstBand + i) * 80) / 1)) < Math.log(1.15));
    expect(near.reduce((a, b) => a + b, 0)).toBeGreaterThan(0.99);
  });

  it('reaches from half a line to beyond half the sampling frequency', () => {
    const { firstBand, shares } = reducedSpectrum(
      new Float64Array(1000).map((_, k) => k % 7),
      2,
    );
    expect(edge(firstBand)).toBeLessThanOrEqual(0.5 / 2000);
    expect(edge(firstBand + shares.length)).toBeGreaterThanOrEqual(0.25);
  });

  it('is all 0 for a dead signal and empty for fewer than four samples', () => {
    expect(reducedSpectrum(new Float64Array(100).fill(3), 1).shares.every((share) => share === 0)).toBe(true);
    expect(reducedSpectrum(new Float64Array(3), 1)).toEqual({ firstBand: 0, shares: [] });
  });
});
