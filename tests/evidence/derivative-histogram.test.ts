import { describe, expect, test } from 'vitest';
import { derivativeHistogram, fitHumps } from '../../src/evidence/derivative-histogram';
import { seededRandom } from '../../src/signal/random';
import { wave } from '../oscillation/waves';
import { facts, read } from './loops';

const level = { response: 'integrating', service: 'level' } as const;

describe('in an integrating loop', () => {
  test.each([40, 100])('a triangle of PV has one hump: stiction; period %d', (period) => {
    const pv = wave('triangle', 3000, period, { noise: 0.01 });
    const reading = read(derivativeHistogram, { op: pv, pv, ...level });
    expect(reading.says).toBe('stiction');
  });
  test.each([40, 100])('a sine has two: not; period %d', (period) => {
    const pv = wave('sine', 3000, period, { noise: 0.005 });
    const reading = read(derivativeHistogram, { op: pv, pv, ...level });
    expect(reading.says).toBe('not');
    expect(reading.value).toBeLessThan(0.2);
  });
  test('noise that hides the curvature is a reason to skip, not a hump', () => {
    const pv = wave('sine', 3000, 200, { noise: 0.3 });
    expect(derivativeHistogram.evaluate(facts({ op: pv, pv, ...level }))).toMatch(/noise of PV hides/);
  });
});

test('normal values fit one hump, those of a sine in a little noise two', () => {
  const random = seededRandom(5);
  const normal = fitHumps(new Float64Array(5000).map(() => random.normal()));
  expect(normal.one).toBeLessThan(0.6 * normal.two);
  const sine = fitHumps(new Float64Array(5000).map((_, i) => Math.sin(i / 7) + 0.2 * random.normal()));
  expect(sine.two).toBeLessThan(0.3 * sine.one);
});
