import { expect, test } from 'vitest';
import { halfCycles } from '../../src/evidence/half-cycles';
import { expectClose } from '../closeness';
import { cosine } from './loops';

test('a sine is cut at its zero crossings, in noise too', () => {
  for (const noise of [0, 0.2]) {
    const halves = halfCycles(cosine(1000, 50, -Math.PI / 2, noise), 50);
    // 40 half cycles; the first crossing is the start itself, and the last half has no end.
    expect(halves.length).toBeGreaterThanOrEqual(38);
    for (const { from, to, sign } of halves) {
      expectClose(to - from, 25, { absolute: noise === 0 ? 0.01 : 4 });
      expect(sign).toBe(Math.round(from / 25) % 2 === 0 ? 1 : -1);
    }
  }
});

test('stretches that are no half cycle are left out', () => {
  const values = cosine(1000, 50).map((value, i) => (i > 400 && i < 600 ? 1 : value));
  for (const { from, to } of halfCycles(values, 50)) expect(to - from).toBeLessThan(63);
});
