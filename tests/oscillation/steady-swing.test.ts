import { describe, expect, test } from 'vitest';
import { findCycle } from '../../src/oscillation/find-cycle';
import { steadySwing } from '../../src/oscillation/steady-swing';
import { seededRandom } from '../../src/signal/random';
import { expectClose } from '../closeness';
import { noiseOf, resonance, wave } from './waves';

/** Triangles of height 1 whose lengths lie between 60 and 300 samples. */
function uneven(samples: number, noise: number): Float64Array {
  const random = seededRandom(6);
  let turn = 0;
  let step = 1 / 100;
  return new Float64Array(samples).map(() => {
    turn += step;
    if (turn >= 1) {
      turn -= 1;
      step = 1 / (60 + 240 * random.uniform());
    }
    return 1 - Math.abs(2 * turn - 1) + noise * random.normal();
  });
}

describe('cycles of steady swing and uneven period', () => {
  test.each([0, 0.02, 0.1])('are found under noise %d', (noise) => {
    const found = steadySwing(uneven(3600, noise));
    expect(found).not.toBeNull();
    expectClose(found!.swing, 1, { absolute: 0.2 });
    expect(found!.period).toBeGreaterThan(140);
    expect(found!.period).toBeLessThan(220);
    expectClose(found!.turns.length, 40, { absolute: 6 });
  });

  test('are a cycle for findCycle, which says that they are uneven', () => {
    const cycle = findCycle(uneven(3600, 0.02), 2);
    expect(cycle.present).toBe(true);
    expect(cycle.why).toMatch(/^It cycles at uneven intervals, about every \d+ s/);
    expect(cycle.single.length).toBe(cycle.cycles);
    expectClose(cycle.amplitude!, 0.5, { absolute: 0.05 });
    expectClose(cycle.period!, 2 * steadySwing(uneven(3600, 0.02))!.period, { relative: 1e-9 });
  });
});

describe('not taken for such cycles', () => {
  test.each<[string, (seed: number) => Float64Array]>([
    ['white noise', (seed) => noiseOf(1500, 0, seed)],
    ['coloured noise', (seed) => noiseOf(1500, 0.95, seed)],
    ['a random walk', (seed) => noiseOf(1500, 1, seed)],
    ['smooth noise', (seed) => resonance(1500, 0.7, 40, seed)],
  ])('%s, at most one time in twenty', (_, make) => {
    const found = Array.from({ length: 20 }, (__, seed) => steadySwing(make(seed))).filter(Boolean);
    expect(found.length).toBeLessThanOrEqual(1);
  });
  test.each<[string, Float64Array]>([
    ['a constant', new Float64Array(500)],
    ['a row of spikes', new Float64Array(1000).map((_, i) => (i % 97 === 50 ? 1 : 0))],
    ['noise that flips the last digit', noiseOf(1000, 0, 3).map((value) => (value > 0.8 ? 1 : 0))],
    ['an upset that dies out', wave('sine', 1500, 40).map((value, i) => value * Math.exp(-i / 150))],
    [
      'a cycle in a small part of the record',
      wave('sine', 1500, 30).map((value, i) => (i < 400 ? value : 0)),
    ],
  ])('%s', (_, values) => {
    expect(steadySwing(values)).toBeNull();
  });
});
