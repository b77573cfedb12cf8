import { describe, expect, it } from 'vitest';
import { layGrid, longestFill, usualStep } from '../../src/record/grid';
import { seededRandom } from '../../src/signal/random';

const stamps = (...seconds: number[]): Float64Array => Float64Array.from(seconds, (s) => 1000 * s);
const every = (step: number, count: number): number[] => Array.from({ length: count }, (_, i) => i * step);

describe('usualStep', () => {
  it('is the step of a clean clock, whatever gaps there are', () => {
    const seconds = every(2, 200).map((s, i) => (i > 150 ? s + 3000 : s));
    expect(usualStep(stamps(...seconds))).toBe(2);
  });

  it('is the mean step of stamps that were cut to whole seconds', () => {
    expect(usualStep(stamps(...every(1.5, 400).map(Math.floor)))).toBeCloseTo(1.5, 2);
  });

  it('is the mean step of stamps that jitter', () => {
    const random = seededRandom(3);
    const jittery = every(1, 2000).map((s) => s + 0.2 * random.uniform());
    expect(usualStep(stamps(...jittery))).toBeCloseTo(1, 2);
  });
});

describe('layGrid', () => {
  it('takes regular stamps as they are, jitter and all', () => {
    const random = seededRandom(3);
    const grid = layGrid(stamps(...every(1, 500).map((s) => s + 0.4 * random.uniform())));
    expect(grid.time.length).toBe(500);
    expect(grid.own.every((own) => own === 1)).toBe(true);
    expect(grid.irregular).toBe(false);
  });

  it.each([1, longestFill])('puts %s missing samples in', (missing) => {
    const seconds = every(1, 100).map((s, i) => (i >= 50 ? s + missing : s));
    const grid = layGrid(stamps(...seconds));
    expect(grid.time.length).toBe(100 + missing);
    expect([...grid.time.slice(49, 52)]).toEqual([49, 50, 51]);
    expect([...grid.row.slice(49, 51)]).toEqual([49, 49]);
    expect([...grid.own.slice(49, 51)]).toEqual([1, 0]);
    expect(grid).toMatchObject({ gaps: 1, longestGap: missing + 1, period: 1 });
    expect(grid.afterGap.includes(1)).toBe(false);
  });

  it('breaks at a longer gap', () => {
    const seconds = every(1, 100).map((s, i) => (i >= 50 ? s + longestFill + 1 : s));
    const grid = layGrid(stamps(...seconds));
    expect(grid.time.length).toBe(100);
    expect(grid.afterGap.indexOf(1)).toBe(50);
  });

  it('breaks a grid over irregular stamps at a long silence too', () => {
    const seconds = every(1, 90).map((s, i) => s + [0, 0.8, 0.1][i % 3]! + (i >= 45 ? 500 : 0));
    const grid = layGrid(stamps(...seconds));
    expect(grid.irregular).toBe(true);
    expect(grid.time.length).toBeLessThan(200);
    expect(grid.afterGap.filter((gap) => gap === 1).length).toBe(1);
    for (let i = 0; i < grid.time.length; i++) {
      expect(seconds[grid.row[i]!]!).toBeLessThanOrEqual(grid.time[i]! + 1e-6);
    }
  });
});
