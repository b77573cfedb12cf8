import { describe, expect, test } from 'vitest';
import { relayFit } from '../../src/evidence/relay-fit';
import { fitShapes } from '../../src/evidence/shape-fits';
import { sineTriangle } from '../../src/evidence/sine-triangle';
import { firstOrderLag } from '../../src/signal/filter';
import { wave } from '../oscillation/waves';
import { read } from './loops';

describe('a half cycle of each shape is fitted by that shape without rest', () => {
  const half = { from: 0, to: 40, sign: 1 } as const;
  test('sine', () => {
    const values = new Float64Array(41).map((_, i) => 3 * Math.sin((Math.PI * i) / 40));
    const fits = fitShapes(values, half);
    expect(fits.sine).toBeLessThan(1e-12);
    expect(fits.triangle).toBeGreaterThan(0.5);
  });
  test('triangle with its tip at one quarter', () => {
    const values = new Float64Array(41).map((_, i) => (i < 10 ? i / 10 : (40 - i) / 30));
    const fits = fitShapes(values, half);
    expect(fits.triangle).toBeLessThan(1e-12);
    expect(fits.sine).toBeGreaterThan(0.5);
  });
  test('first-order answer to a relay', () => {
    // One period of the steady answer to a square wave, cut at its upward crossing.
    const lag = 20;
    const square = new Float64Array(8000).map((_, i) => (Math.floor(i / 40) % 2 === 0 ? 1 : -1));
    const answer = firstOrderLag(square, 1, lag);
    const start = answer.findIndex((value, i) => i > 4000 && value > 0 && answer[i - 1]! <= 0);
    const at = start - 1 + answer[start - 1]! / (answer[start - 1]! - answer[start]!);
    const fits = fitShapes(answer, { from: at, to: at + 40, sign: 1 });
    expect(fits.relay).toBeLessThan(0.02 * fits.sine);
  });
});

describe('sine against triangle', () => {
  const triangle = wave('triangle', 2000, 50, { noise: 0.03 });
  const sine = wave('sine', 2000, 50, { noise: 0.03 });
  test('a self-regulating loop is read from OP', () => {
    expect(read(sineTriangle, { op: triangle, pv: sine }).says).toBe('stiction');
    expect(read(sineTriangle, { op: sine, pv: triangle }).says).toBe('not');
  });
  test('an integrating loop is read from PV', () => {
    expect(read(sineTriangle, { op: sine, pv: triangle, response: 'integrating' }).says).toBe('stiction');
    expect(read(sineTriangle, { op: triangle, pv: sine, response: 'integrating' }).says).toBe('not');
  });
  test('without noise the index is 0 and 1', () => {
    expect(read(sineTriangle, { op: wave('sine', 2000, 50), pv: sine }).value).toBeLessThan(0.05);
    expect(read(sineTriangle, { op: wave('triangle', 2000, 50), pv: sine }).value).toBeGreaterThan(0.95);
  });
});

describe('relay, triangle, sine', () => {
  const op = wave('triangle', 2000, 50);
  test.each([2, 10, 40])('a process of time constant %d behind a jumping valve: stiction', (tau) => {
    const reading = read(relayFit, { op, pv: firstOrderLag(wave('square', 2000, 50), 1, tau) });
    expect(reading.says).toBe('stiction');
    expect(reading.value).toBeGreaterThan(0.7);
  });
  test('a triangle: stiction; a sine: not', () => {
    expect(read(relayFit, { op, pv: wave('triangle', 2000, 50, { noise: 0.03 }) }).says).toBe('stiction');
    expect(read(relayFit, { op, pv: wave('sine', 2000, 50, { noise: 0.01 }) }).says).toBe('not');
  });
});
