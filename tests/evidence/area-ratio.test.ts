import { describe, expect, test } from 'vitest';
import { areaRatio, shareBeforePeak } from '../../src/evidence/area-ratio';
import { firstOrderLag } from '../../src/signal/filter';
import { expectClose } from '../closeness';
import { wave } from '../oscillation/waves';
import { read } from './loops';

describe('one half cycle', () => {
  test('a triangle whose tip stands at three quarters has three quarters of its area before it', () => {
    const values = new Float64Array(101).map((_, i) => (i <= 75 ? i / 75 : (100 - i) / 25));
    expectClose(shareBeforePeak(values, { from: 0, to: 100, sign: 1 }), 0.75, { absolute: 1e-9 });
    const below = values.map((value) => -value);
    expectClose(shareBeforePeak(below, { from: 0, to: 100, sign: -1 }), 0.75, { absolute: 1e-9 });
  });
  test('crossings between samples count with their fraction', () => {
    const values = Float64Array.of(-1, 1, 2, 1, -1);
    expectClose(shareBeforePeak(values, { from: 0.5, to: 3.5, sign: 1 }), 0.5, { absolute: 1e-12 });
  });
});

test('a sine has ratio 1: not', () => {
  const pv = wave('sine', 3000, 60, { noise: 0.05 });
  const reading = read(areaRatio, { op: pv, pv });
  expectClose(reading.value, 1, { absolute: 0.08 });
  expect(reading.says).toBe('not');
});

test('PV that follows the jumps of a valve through a slow process peaks late: stiction', () => {
  const pv = firstOrderLag(wave('square', 3000, 60), 1, 20);
  const reading = read(areaRatio, { op: wave('triangle', 3000, 60), pv });
  expect(reading.value).toBeGreaterThan(1.5);
  expect(reading.says).toBe('stiction');
});

test('the same with SP logged, PV turned round and in noise', () => {
  const pv = firstOrderLag(wave('square', 3000, 60), 1, 20).map(
    (value, i) => 50 - value + 0.05 * Math.sin(i * i),
  );
  const sp = new Float64Array(3000).fill(50);
  expect(read(areaRatio, { op: wave('triangle', 3000, 60), pv, sp }).says).toBe('stiction');
});
