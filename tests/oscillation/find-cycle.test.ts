import { describe, expect, test } from 'vitest';
import { findCycle } from '../../src/oscillation/find-cycle';
import { seededRandom } from '../../src/signal/random';
import { expectClose } from '../closeness';
import { noiseOf, resonance, type Shape, type WaveOptions, wave } from './waves';

const seeds = Array.from({ length: 20 }, (_, i) => 100 + i);

describe('finds cycles', () => {
  test.each<[Shape, number, number, WaveOptions]>([
    ['sine', 600, 40, { noise: 0.5 }],
    ['triangle', 600, 40, { noise: 0.1 }],
    ['square', 600, 40, { noise: 0.1 }],
    ['triangle', 400, 7, { noise: 0.1 }],
    ['sine', 300, 4.5, { noise: 0.1 }],
    ['triangle', 1800, 40, { noise: 0.1, walk: 0.05 }],
    ['triangle', 240, 40, { noise: 0.1 }],
  ])('%s, %d samples, period %d, %o', (shape, samples, period, options) => {
    const cycle = findCycle(wave(shape, samples, period, options), 2);
    expect(cycle.why).toMatch(/^It cycles every /);
    expect(cycle.present).toBe(true);
    expectClose(cycle.period!, 2 * period, { relative: 0.02 }, 'period');
    expect(cycle.regularity).toBeGreaterThan(3);
    expectClose(cycle.cycles, samples / period, { absolute: 1 }, 'cycles');
    expect(cycle.others).toEqual([]);
  });

  test('whose period wanders by a fifth, as stick-slip cycles do', () => {
    const found = seeds.map((seed) =>
      findCycle(wave('triangle', 1200, 40, { wander: 0.2, noise: 0.1, seed }), 1),
    );
    expect(found.filter(({ present }) => present).length).toBeGreaterThanOrEqual(19);
    for (const { period } of found) expectClose(period ?? 42, 42, { relative: 0.25 }, 'period');
  });

  test('under a drift many times larger, and on set-point steps', () => {
    const small = wave('triangle', 1800, 40, { noise: 0.05 });
    const drifting = findCycle(
      small.map((value, i) => value + 20 * Math.cos(i / 500)),
      1,
    );
    expectClose(drifting.period!, 40, { relative: 0.02 });
    expectClose(drifting.amplitude!, 1, { absolute: 0.1 });
    const stepped = findCycle(
      small.map((value, i) => value + 3 * Math.floor(i / 600)),
      1,
    );
    expectClose(stepped.period!, 40, { relative: 0.02 });
  });

  test('two at a time: the stronger is the cycle, the other is named, harmonics are not', () => {
    const random = seededRandom(4);
    const two = new Float64Array(1800).map(
      (_, i) =>
        Math.sin((2 * Math.PI * i) / 40) + 0.5 * Math.sin((2 * Math.PI * i) / 17) + 0.1 * random.normal(),
    );
    const cycle = findCycle(two, 1);
    expectClose(cycle.period!, 40, { relative: 0.01 });
    expect(cycle.others.length).toBe(1);
    expectClose(cycle.others[0]!, 17, { relative: 0.01 });
  });
});

describe('tells shape and size', () => {
  // Fourier series: a square has harmonics 1/k, a triangle 1/k^2, for odd k.
  const odd = (power: number): number => {
    const rest = 3 ** -power + 5 ** -power + 7 ** -power;
    return rest / (1 + rest);
  };
  test.each<[Shape, number, number]>([
    ['sine', 0, 1],
    ['triangle', odd(4), 96 / Math.PI ** 4],
    ['square', odd(2), 8 / Math.PI ** 2],
  ])('odd harmonics, amplitude and power of a %s', (shape, want, fundamental) => {
    const cycle = findCycle(
      wave(shape, 1600, 80).map((value) => 3 * value + 50),
      1,
    );
    expectClose(cycle.oddHarmonicShare!, want, { absolute: 0.004 });
    expectClose(cycle.amplitude!, 3, { relative: 0.02 });
    expectClose(cycle.powerShare!, fundamental, { absolute: 0.02 });
  });

  test('odd harmonics survive noise and a wandering period', () => {
    const cycle = findCycle(wave('square', 1600, 40, { noise: 0.3, wander: 0.1 }), 1);
    expectClose(cycle.oddHarmonicShare!, odd(2), { absolute: 0.04 });
  });

  test('single cycles follow each other and cover the record but for its ends', () => {
    const { single } = findCycle(wave('triangle', 1200, 40, { wander: 0.1, noise: 0.05 }), 0.5);
    for (const [i, { from, to }] of single.entries()) {
      expect(to).toBeGreaterThan(from);
      if (i > 0) expect(from).toBe(single[i - 1]!.to);
    }
    expect(single.length).toBeGreaterThanOrEqual(27);
    expect(single.at(-1)!.to).toBeLessThan(600);
  });

  test('the autocorrelation starts at 1 and the spectrum has its peak at the period', () => {
    const { autocorrelation, spectrum } = findCycle(wave('sine', 800, 40), 2);
    expect(autocorrelation.value[0]).toBe(1);
    expect(autocorrelation.lag[3]).toBe(6);
    const peak = spectrum.power.indexOf(Math.max(...spectrum.power));
    expectClose(spectrum.frequency[peak]!, 1 / 80, { relative: 0.01 });
  });
});

describe('does not find cycles in', () => {
  test.each<[string, (seed: number) => Float64Array]>([
    ['white noise', (seed) => noiseOf(1200, 0, seed)],
    ['coloured noise', (seed) => noiseOf(1200, 0.9, seed)],
    ['a random walk', (seed) => noiseOf(1200, 1, seed)],
    ['noise in a well-damped loop', (seed) => resonance(1200, 0.5, 40, seed)],
  ])('%s, at most one time in twenty', (_, make) => {
    const found = seeds.filter((seed) => findCycle(make(seed), 1).present);
    expect(found.length).toBeLessThanOrEqual(1);
  });

  test('an upset that dies out', () => {
    const ringing = new Float64Array(1800).map((_, i) => Math.exp(-i / 120) * Math.sin(i / 5));
    const cycle = findCycle(ringing, 1);
    expect(cycle.present).toBe(false);
    expect(cycle.why).toMatch(/only about \d+ of \d+ cycles carry its power/);
  });

  test.each<[string, Float64Array, RegExp]>([
    ['a constant', new Float64Array(500).fill(0.1), /constant or a straight line/],
    ['a ramp', new Float64Array(500).map((_, i) => 5 + 0.1 * i), /constant or a straight line/],
    ['20 samples', wave('sine', 20, 5), /^20 samples are too few/],
    ['no samples', new Float64Array(0), /^0 samples are too few/],
    ['one step', new Float64Array(500).map((_, i) => (i < 200 ? 0 : 1)), /No regular cycle|no peak/],
    ['three cycles', wave('sine', 120, 40), /No regular cycle|no peak/],
  ])('%s, and says why', (_, values, why) => {
    const cycle = findCycle(values, 1);
    expect(cycle).toMatchObject({ present: false, period: null, cycles: 0, others: [], single: [] });
    expect(cycle.why).toMatch(why);
  });
});

describe('every number that comes out is finite', () => {
  test.each([
    ['constant', new Float64Array(100)],
    ['a spike', new Float64Array(100).map((_, i) => (i === 50 ? 1 : 0))],
    ['noise', noiseOf(100, 0, 1)],
    ['alternating', new Float64Array(100).map((_, i) => i % 2)],
    ['pure sine', wave('sine', 400, 40)],
  ])('%s', (_, values) => {
    const text = JSON.stringify(findCycle(values, 1), (_key, value: unknown) =>
      typeof value === 'number' && !Number.isFinite(value)
        ? 'not finite'
        : value instanceof Float64Array
          ? Array.from(value)
          : value,
    );
    expect(text).not.toContain('not finite');
  });
});

test('scale, offset and unit of time change nothing', () => {
  const values = wave('triangle', 900, 45, { noise: 0.2, wander: 0.1 });
  const one = findCycle(values, 1);
  const other = findCycle(
    values.map((value) => 40 * value - 900),
    60,
  );
  expectClose(other.period!, 60 * one.period!, { relative: 1e-9 });
  expectClose(other.amplitude!, 40 * one.amplitude!, { relative: 1e-9 });
  expectClose(other.regularity!, one.regularity!, { relative: 1e-6 });
  expect(other.cycles).toBe(one.cycles);
});

test('wrong use is refused with a sentence', () => {
  expect(() => findCycle(new Float64Array(50), 0)).toThrow('above 0. Received 0.');
  const gap = new Float64Array(50);
  gap[7] = Number.NaN;
  expect(() => findCycle(gap, 1)).toThrow('Sample 7 is NaN');
});
