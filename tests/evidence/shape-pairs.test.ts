import { describe, expect, test } from 'vitest';
import { movements, shapePairs, stuckShare } from '../../src/evidence/shape-pairs';
import { wave } from '../oscillation/waves';
import { cosine, facts, read } from './loops';

const rows = (text: string): Int8Array => Int8Array.from(text, (c) => (c === '+' ? 1 : c === '-' ? -1 : 0));

describe('share of the time in which PV is stuck', () => {
  test('counts steady PV under moving OP when PV then follows', () => {
    expect(stuckShare(rows('++++----'), rows('000+000-'))).toBe(6 / 8);
  });
  test('leaves out what PV does not follow, and time in which nothing moves', () => {
    expect(stuckShare(rows('+++-000-'), rows('00--0000'))).toBe(1 / 5);
  });
  test('is null when nothing ever moves', () => {
    expect(stuckShare(rows('000'), rows('000'))).toBeNull();
  });
});

test('steps below half of their standard deviation are steady', () => {
  const values = Float64Array.of(0, 1, 2, 2.1, 2, 1, 0, 0);
  expect(Array.from(movements(values, 12))).toEqual([1, 1, 0, 0, -1, -1, 0]);
});

test('triangle OP and square PV that switches while OP runs: stiction', () => {
  const n = 3000;
  const op = wave('triangle', n, 60);
  const square = wave('square', n, 60, { noise: 0.02 });
  expect(read(shapePairs, { op, pv: square.map((_, i) => square[(i + n - 10) % n]!) }).says).toBe('stiction');
});

test('sines against each other: not', () => {
  expect(read(shapePairs, { op: cosine(3000, 60), pv: cosine(3000, 60, Math.PI) }).says).toBe('not');
});

test('other services than flow are skipped with the reason', () => {
  const made = facts({ op: cosine(3000, 60), pv: cosine(3000, 60), service: 'temperature' });
  expect(shapePairs.skips(made)).toBe(
    'It holds for fast loops only (flow); the service of this one is temperature.',
  );
});
