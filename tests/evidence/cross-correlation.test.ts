import { describe, expect, test } from 'vitest';
import { crossCorrelationHeights, crossCorrelationLags } from '../../src/evidence/cross-correlation';
import { expectClose } from '../closeness';
import { wave } from '../oscillation/waves';
import { cosine, read } from './loops';

const n = 4000;
const period = 80;

describe('for two sines the correlation is a cosine, from which both ratios follow', () => {
  // The zero crossings lie at pi/2 - phi and pi/2 + phi: ratio 2 phi / pi. Heights: (1 - cos phi) / (1 + cos
  // phi).
  test.each([5, 20, 30, 45, 60, 75])('phase %d degrees', (degrees) => {
    const phi = (degrees * Math.PI) / 180;
    const signals = { op: cosine(n, period), pv: cosine(n, period, Math.PI + phi) };
    expectClose(read(crossCorrelationLags, signals).value, degrees / 90, { absolute: 0.02 });
    expectClose(read(crossCorrelationHeights, signals).value, Math.tan(phi / 2) ** 2, { absolute: 0.02 });
  });
});

test('triangle OP and square PV a quarter cycle apart: an odd correlation, stiction', () => {
  const op = wave('triangle', n, period);
  const pv = wave('square', n, period);
  const lags = read(crossCorrelationLags, { op: op.map((_, i) => op[(i + 20) % n]!), pv });
  expect(lags.says).toBe('stiction');
  expectClose(lags.value, 1, { absolute: 0.06 });
  const heights = read(crossCorrelationHeights, { op: op.map((_, i) => op[(i + 20) % n]!), pv });
  expect(heights.says).toBe('stiction');
});

test('PV opposite to OP: an even correlation, not stiction, in noise too', () => {
  const signals = { op: cosine(n, period, 0, 0.3, 1), pv: cosine(n, period, Math.PI, 0.3, 2) };
  expect(read(crossCorrelationLags, signals).says).toBe('not');
  expect(read(crossCorrelationHeights, signals).says).toBe('not');
});

test('the limits of the two ratios belong to the same phases, 30 and 60 degrees', () => {
  for (const [degrees, says] of [
    [28, 'not'],
    [45, 'undecided'],
    [62, 'stiction'],
  ] as const) {
    const signals = { op: cosine(n, period), pv: cosine(n, period, Math.PI + (degrees * Math.PI) / 180) };
    expect(read(crossCorrelationLags, signals).says).toBe(says);
    expect(read(crossCorrelationHeights, signals).says).toBe(says);
  }
});
