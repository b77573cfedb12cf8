import { describe, expect, test } from 'vitest';
import { indicators, runIndicators } from '../../src/evidence/registry';
import { findCycle } from '../../src/oscillation/find-cycle';
import { firstOrderLag } from '../../src/signal/filter';
import { noiseOf, wave } from '../oscillation/waves';
import { type LoopSignals, record } from './loops';

const run = (signals: LoopSignals, options = {}) => {
  const made = record(signals);
  const cycle = (values: Float64Array) => findCycle(values, made.samplePeriod);
  return runIndicators(made, cycle(made.op), cycle(made.pv), options);
};
const n = 2400;
const op = wave('triangle', n, 60, { wander: 0.05, noise: 0.02 });
const square = wave('square', n, 60, { wander: 0.05, noise: 0.02 });
const pv = firstOrderLag(
  square.map((_, i) => square[Math.max(0, i - 12)]!),
  1,
  6,
);

test('names are unique, and each says its threshold and where it is from', () => {
  expect(new Set(indicators.map(({ name }) => name)).size).toBe(indicators.length);
  for (const { threshold, source } of indicators) {
    expect(threshold.length).toBeGreaterThan(10);
    expect(source).toMatch(/value from memory|own choice/);
  }
});

test('one row an indicator, in order, with finite values or null and a sentence', () => {
  const rows = run({ op, pv });
  expect(rows.map(({ indicator }) => indicator)).toEqual(indicators.map(({ name }) => name));
  for (const row of rows) {
    expect(row.value === null).toBe(row.says === 'skipped');
    if (row.value !== null) expect(Number.isFinite(row.value)).toBe(true);
    expect(row.why).toMatch(/\.$/);
  }
});

test('a sticking valve in a fast flow loop is seen by most', () => {
  const says = run({ op, pv }).map((row) => row.says);
  expect(says.filter((word) => word === 'stiction').length).toBeGreaterThanOrEqual(6);
});

test('without a cycle every row is skipped and says so', () => {
  for (const row of run({ op: noiseOf(n, 0, 1), pv: noiseOf(n, 0, 2) })) {
    expect(row).toMatchObject({ says: 'skipped', value: null });
    expect(row.why).toBe('Neither OP nor PV has a regular cycle.');
  }
});

describe('rows that do not apply say why', () => {
  const why = (signals: LoopSignals, name: string): string =>
    run(signals).find(({ indicator }) => indicator === name)!.why;
  test('integrating process', () => {
    expect(why({ op, pv, response: 'integrating' }, 'area ratio')).toBe(
      'It holds for self-regulating processes; this one is integrating.',
    );
    expect(why({ op, pv }, 'derivative histogram')).toBe(
      'It holds for integrating processes; this one is self-regulating.',
    );
  });
  test('unknown process', () => {
    const signals = { op, pv, response: 'unknown' } as const;
    expect(why(signals, 'cross-correlation, lags')).toMatch(/not known whether this one is/);
    expect(why(signals, 'sine against triangle')).toMatch(/not known whether the process is/);
  });
  test('only one of OP and PV cycles', () => {
    expect(why({ op: noiseOf(n, 0, 1), pv }, 'cross-correlation, lags')).toBe('OP has no regular cycle.');
    expect(why({ op, pv: noiseOf(n, 0, 1) }, 'relay, triangle, sine')).toBe('PV has no regular cycle.');
  });
  test('too few samples a cycle', () => {
    const fast = wave('sine', 600, 5);
    expect(why({ op: fast, pv: fast }, 'ellipse width')).toBe(
      'A cycle has 5.0 samples; its shape needs at least 7.',
    );
  });
});

test('equal seeds give equal rows, another seed moves the surrogates only', () => {
  const one = run({ op, pv }, { seed: 5 });
  expect(run({ op, pv }, { seed: 5 })).toEqual(one);
  const other = run({ op, pv }, { seed: 6 });
  const differ = one.filter((row, i) => row.value !== other[i]!.value).map(({ indicator }) => indicator);
  expect(differ).toEqual(['surrogate test']);
});

test('unit and offset of PV, and the clock, change nothing', () => {
  const one = run({ op, pv });
  const other = run({ op, pv: pv.map((value) => 250 + 7 * value), samplePeriod: 30 });
  for (const [i, row] of other.entries()) {
    expect(row.says).toBe(one[i]!.says);
    if (row.value !== null) expect(row.value).toBeCloseTo(one[i]!.value!, 6);
  }
});

test('an unknown option is refused', () => {
  expect(() => run({ op, pv }, { sead: 1 })).toThrow('runIndicators has no option "sead"');
});
