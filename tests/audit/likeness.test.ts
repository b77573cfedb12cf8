import { describe, expect, it } from 'vitest';
import { keepingStep, likeness, spectralLikeness } from '../../src/audit/likeness';
import { reducedSpectrum } from '../../src/audit/reduced-spectrum';
import type { CycleClock } from '../../src/audit/signature';
import { seededRandom } from '../../src/signal/random';
import { madeLoop } from './made-loops';

const clock = (starts: readonly number[], every = 1): CycleClock => ({
  signal: 'PV',
  period: 60,
  starts,
  every,
  began: null,
});
const regular = (count: number, period: number, from = 0): number[] =>
  Array.from({ length: count }, (_, i) => from + i * period);

describe('keepingStep', () => {
  it('tells a lag within half a cycle, and takes the sign along', () => {
    const [a, b] = [clock(regular(40, 60)), clock(regular(40, 60, 15))];
    expect(keepingStep(a, b, 8)!.kept).toBeCloseTo(1, 9);
    expect(keepingStep(a, b, 8)!.lag).toBeCloseTo(0.25, 9);
    expect(keepingStep(b, a, 8)!.lag).toBeCloseTo(-0.25, 9);
  });

  it('is near 0 when one makes a cycle more than the other', () => {
    const step = keepingStep(clock(regular(41, 60)), clock(regular(42, (60 * 40) / 41)), 8);
    expect(step!.kept).toBeLessThan(0.1);
  });

  it('is the same where each third start is kept', () => {
    const every = (starts: number[]): CycleClock =>
      clock(
        starts.filter((_, i) => i % 3 === 0),
        3,
      );
    const step = keepingStep(every(regular(91, 60)), clock(regular(91, 60, 6)), 8)!;
    expect(step.kept).toBeCloseTo(1, 9);
    expect(step.lag).toBeCloseTo(0.1, 9);
  });

  it('says nothing of fewer common cycles than asked for', () => {
    expect(keepingStep(clock(regular(40, 60)), clock(regular(40, 60, 35 * 60)), 8)).toBeNull();
    expect(keepingStep(clock(regular(40, 60)), clock([]), 8)).toBeNull();
  });

  // n unit vectors of random direction have a mean of about 0.89/sqrt(n) (Rayleigh), here 0.04.
  it('is small for a clock that has nothing to do with the other', () => {
    const random = seededRandom(5);
    let at = 0;
    const loose = regular(400, 60).map(() => {
      at += -60 * Math.log(1 - random.uniform());
      return at;
    });
    expect(keepingStep(clock(regular(400, 60)), clock(loose), 8)!.kept).toBeLessThan(0.15);
  });
});

describe('spectralLikeness', () => {
  const wave = (period: number, samples = 900, samplePeriod = 2, corners = 0): Float64Array =>
    new Float64Array(samples).map((_, k) => {
      const angle = (2 * Math.PI * k * samplePeriod) / period;
      return Math.sin(angle) + corners * Math.sin(3 * angle + 1);
    });
  const alike = (a: Float64Array, b: Float64Array, stepB = 2): number =>
    spectralLikeness(reducedSpectrum(a, 2), reducedSpectrum(b, stepB), 1 / 150);

  it('is 1 for equal shapes, whatever size, sample period and length', () => {
    expect(
      alike(
        wave(60),
        wave(60).map((v) => 7 * v + 3),
      ),
    ).toBeCloseTo(1, 6);
    expect(alike(wave(60), wave(60, 500, 3), 3)).toBeGreaterThan(0.98);
  });

  it('falls with the power that only one of them has, to 0 for other periods', () => {
    const cornered = alike(wave(60), wave(60, 900, 2, 1));
    // Half the power elsewhere: 1/sqrt(2) were it in one line of the same width; a narrower band weighs more.
    expect(cornered).toBeGreaterThan(0.6);
    expect(cornered).toBeLessThan(0.85);
    expect(alike(wave(60), wave(80))).toBeLessThan(0.01);
  });

  it('does not count drift', () => {
    const drifting = wave(60).map((value, k) => value + 8 * Math.sin((2 * Math.PI * k) / 900));
    expect(alike(wave(60), drifting)).toBeGreaterThan(0.98);
  });

  it('is 0 for a dead signal and for records without a common band', () => {
    expect(alike(wave(60), new Float64Array(900))).toBe(0);
    expect(spectralLikeness({ firstBand: 0, shares: [1] }, { firstBand: 5, shares: [1] }, 1)).toBe(0);
  });
});

describe('likeness', () => {
  it('is the same in either order and 0 without a cycle', () => {
    const a = madeLoop({ loop: '31-FC-201' }).signature!;
    const b = madeLoop({ loop: '31-PC-202', delay: 9, noise: 0.4, seed: 2, samplePeriod: 3 }).signature!;
    const none = madeLoop({ loop: '31-FC-301', period: null }).signature!;
    expect(likeness(a, b)).toBeGreaterThan(0.8);
    expect(likeness(a, b)).toBeCloseTo(likeness(b, a), 12);
    expect(likeness(a, none)).toBe(0);
  });
});
