import { expect, test } from 'vitest';
import { oddHarmonics } from '../../src/evidence/odd-harmonics';
import { expectClose } from '../closeness';
import { wave } from '../oscillation/waves';
import { facts, read } from './loops';

const sine = wave('sine', 2000, 50, { noise: 0.05 });

test('a square has 14.6 % in its odd harmonics, a triangle 1.4 %: stiction', () => {
  const square = read(oddHarmonics, { op: sine, pv: wave('square', 2000, 50, { noise: 0.05 }) });
  expectClose(square.value, 0.146, { absolute: 0.01 });
  expect(square.says).toBe('stiction');
  const triangle = read(oddHarmonics, { op: wave('triangle', 2000, 50, { noise: 0.05 }), pv: sine });
  expectClose(triangle.value, 0.0142, { absolute: 0.003 });
  expect(triangle.says).toBe('stiction');
  expect(triangle.why).toContain("OP's cycle");
});

test('sines have none: not', () => {
  expect(read(oddHarmonics, { op: sine, pv: sine }).says).toBe('not');
});

test('where noise alone can make harmonics nothing is said', () => {
  const noisy = wave('sine', 600, 50, { noise: 0.7 });
  expect(oddHarmonics.evaluate(facts({ op: noisy, pv: noisy }))).toMatch(/Noise alone can make/);
});
