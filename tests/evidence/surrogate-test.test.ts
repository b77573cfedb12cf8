import { expect, test } from 'vitest';
import { surrogateIndicator } from '../../src/evidence/surrogate-test';
import { resonance, wave } from '../oscillation/waves';
import { facts, read } from './loops';

test('linear cycles are not called nonlinear: a sine in noise, a badly damped loop', () => {
  for (const seed of [1, 2, 3, 4, 5]) {
    for (const pv of [wave('sine', 1800, 37.3, { noise: 0.1, seed }), resonance(1800, 0.03, 37, seed)]) {
      const reading = read(surrogateIndicator, { op: pv, pv });
      expect(reading.value).toBeLessThan(1);
      expect(reading.says).toBe('not');
    }
  }
});

test('sharp cycles whose period wanders mostly are', () => {
  const says = [1, 2, 3, 4, 5, 6].map((seed) => {
    const pv = wave('square', 1800, 37, { wander: 0.08, noise: 0.05, seed });
    return read(surrogateIndicator, { op: pv, pv }).says;
  });
  expect(says.filter((word) => word === 'stiction').length).toBeGreaterThanOrEqual(4);
});

test('fewer than twelve cycles are skipped', () => {
  const pv = wave('sine', 400, 40);
  expect(surrogateIndicator.skips(facts({ op: pv, pv }))).toMatch(/PV has \d whole cycles; at least 12/);
});
