import { describe, expect, test } from 'vitest';
import { bicoherence, nonlinearityIndexes } from '../../src/evidence/bicoherence';
import { squaredBicoherence } from '../../src/signal/bispectrum';
import { seededRandom } from '../../src/signal/random';
import { noiseOf, resonance, wave } from '../oscillation/waves';
import { facts, read } from './loops';

describe('the two indexes', () => {
  test.each([0, 0.9])('of Gaussian noise (pole %d) say linear in at least 19 of 20 records', (pole) => {
    const alarms = Array.from({ length: 20 }, (_, seed) => {
      const found = nonlinearityIndexes(squaredBicoherence(noiseOf(4096, pole, seed), 128));
      return found.nonGaussianity > 0.001 && found.nonlinearity > 0.01;
    });
    expect(alarms.filter(Boolean).length).toBeLessThanOrEqual(1);
  });
  test('of squared noise say nonlinear', () => {
    const squared = noiseOf(4096, 0.5, 1).map((value) => value * value);
    const found = nonlinearityIndexes(squaredBicoherence(squared, 128));
    expect(found.nonGaussianity).toBeGreaterThan(0.01);
    expect(found.nonlinearity).toBeGreaterThan(0.01);
  });
});

test('an error that rises slowly and falls at once (sawtooth): nonlinear', () => {
  const random = seededRandom(3);
  let turn = 0;
  let step = 1 / 30;
  const pv = new Float64Array(4096).map(() => {
    turn += step;
    if (turn >= 1) {
      turn -= 1;
      step = 1 / (30 * (1 + 0.05 * random.normal()));
    }
    return turn + 0.05 * random.normal();
  });
  expect(read(bicoherence, { op: pv, pv }).says).toBe('stiction');
});

test('noise in a badly damped linear loop: linear', () => {
  const pv = resonance(4096, 0.04, 30, 1);
  expect(read(bicoherence, { op: pv, pv }).says).toBe('not');
});

test('short records are skipped with the number of samples wanted', () => {
  const pv = wave('sine', 600, 20);
  expect(bicoherence.skips(facts({ op: pv, pv }))).toMatch(/600 samples at some 20 a cycle; at least 1024/);
});
