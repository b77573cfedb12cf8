import { describe, expect, it } from 'vitest';
import { compressionOf, writingStep } from '../../src/record/compression';
import { seededRandom } from '../../src/signal/random';
import { expectClose } from '../closeness';

const cycle = 100;
const count = 3000;
const noise = (size: number, seed = 2): Float64Array => {
  const random = seededRandom(seed);
  return Float64Array.from({ length: count }, () => size * random.normal());
};
const wave = (shape: (phase: number) => number, size = 0): Float64Array => {
  const added = noise(size);
  return Float64Array.from({ length: count }, (_, i) => 50 + shape((i % cycle) / cycle) + added[i]!);
};
const sine = (phase: number): number => 3 * Math.sin(2 * Math.PI * phase);
const triangle = (phase: number): number => 6 * Math.abs(2 * phase - 1) - 3;
const square = (phase: number): number => (phase < 0.5 ? 3 : -3);
const rounded = (values: Float64Array, step: number): Float64Array =>
  values.map((value) => Math.round(value / step) * step);

/** Keeps every `keep`-th sample, give or take, and draws straight lines between them, or holds them. */
function thinned(values: Float64Array, keep: number, draw: 'lines' | 'held'): Float64Array {
  const random = seededRandom(6);
  const out = Float64Array.from(values);
  for (let from = 0; from < count - 1; ) {
    const to = Math.min(count - 1, from + Math.max(1, Math.round(keep * (0.5 + random.uniform()))));
    for (let i = from + 1; i < to; i++) {
      out[i] =
        draw === 'held'
          ? values[from]!
          : values[from]! + ((values[to]! - values[from]!) * (i - from)) / (to - from);
    }
    from = to;
  }
  return out;
}

describe('compressionOf finds what a historian took away', () => {
  // Thornhill, Choudhury, Shah 2004 (value from memory): samples over points kept is N / (N - zero second differences).
  it.each([4, 8, 15])('lines between every %s-th sample or so', (keep) => {
    const found = compressionOf(thinned(wave(sine, 0.2), keep, 'lines'), cycle, null);
    expect(found.kind).toBe('lines');
    expectClose(found.factor, keep, { relative: 0.15 });
  });

  it.each([0.001, 0.01])('also where the lines were rounded to %s', (step) => {
    const found = compressionOf(rounded(thinned(wave(sine, 0.2), 10, 'lines'), step), cycle, null);
    expect(found.kind).toBe('lines');
    expectClose(found.factor, 10, { relative: 0.5 });
  });

  it.each([5, 12])('values held for %s samples or so', (keep) => {
    const found = compressionOf(rounded(thinned(wave(sine, 0.2), keep, 'held'), 0.01), cycle, null);
    expect(found.kind).toBe('held');
    expectClose(found.factor, keep, { relative: 0.15 });
  });

  it('few corners a cycle only when no controller stands for the samples', () => {
    const lines = Float64Array.from({ length: count }, (_, i) => 50 + triangle((i / 97.3) % 1));
    expect(compressionOf(lines, cycle, null).kind).toBe('none');
    expect(compressionOf(lines, cycle, new Uint8Array(count)).kind).toBe('lines');
    expect(compressionOf(lines, cycle, new Uint8Array(count).fill(1)).kind).toBe('none');
  });
});

describe('compressionOf lets honest signals pass', () => {
  const honest: [string, Float64Array][] = [
    ['a sine', wave(sine)],
    ['a triangle', wave(triangle)],
    ['a square', wave(square)],
    ['a noisy sine', wave(sine, 0.1)],
    ['a noisy square', wave(square, 0.05)],
    ['noise', noise(1)],
    ['a constant', new Float64Array(count).fill(4)],
  ];
  it.each(honest)('%s, however it is rounded', (_, values) => {
    for (const step of [0, 0.001, 0.01, 0.1, 0.5]) {
      const found = compressionOf(step > 0 ? rounded(values, step) : values, cycle, null);
      expect(found, `step ${step}`).toEqual({ factor: 1, kind: 'none' });
    }
  });

  it('a slow scan: values held on a beat', () => {
    const values = wave(sine, 0.2);
    const held = values.map((_, i) => values[i - (i % 5)]!);
    expect(compressionOf(rounded(held, 0.01), cycle, null).kind).toBe('none');
  });

  it('a sample without a cycle to count corners by', () => {
    expect(compressionOf(wave(sine, 0.1), null, null).kind).toBe('none');
    expect(compressionOf(thinned(wave(sine, 0.2), 8, 'lines'), null, null).kind).toBe('lines');
  });
});

describe('writingStep', () => {
  it('is the step of rounded values, whatever their scale', () => {
    expectClose(writingStep(rounded(wave(sine, 0.1), 0.01)), 0.01, { relative: 1e-6 });
    const scaled = rounded(wave(sine, 0.1), 0.01).map((value) => 1.8 * value + 32);
    expectClose(writingStep(scaled), 0.018, { relative: 1e-6 });
  });

  it('is next to nothing for values that were not rounded', () => {
    expect(writingStep(wave(sine, 0.1))).toBeLessThan(1e-4);
    expect(writingStep(new Float64Array(10).fill(5))).toBeLessThan(1e-4);
  });
});
