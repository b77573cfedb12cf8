import { describe, expect, it } from 'vitest';
import { findChange, type TrackedValue } from '../../src/audit/stiction-change';
import { seededRandom } from '../../src/signal/random';

const hour = 3600;
/** One value an hour. */
function windows(values: readonly number[], spreads: readonly number[] = []): TrackedValue[] {
  return values.map((value, i) => ({
    from: i * hour,
    to: (i + 1) * hour,
    value,
    spread: spreads[i] ?? 0.2,
  }));
}

function noisy(count: number, spread: number, seed: number, course: (i: number) => number): TrackedValue[] {
  const random = seededRandom(seed);
  return windows(Array.from({ length: count }, (_, i) => course(i) + spread * random.normal()));
}

describe('findChange', () => {
  it('finds a step, its levels and its moment', () => {
    const found = findChange(windows([2, 2.1, 1.9, 2, 2.1, 3.9, 4, 4.1, 4, 3.9]), 1);
    expect(found).toMatchObject({ says: 'rising', shape: 'step' });
    expect(found.before).toBeCloseTo(2.02, 2);
    expect(found.after).toBeCloseTo(3.98, 2);
    expect(found.since!.value).toBe(5 * hour);
    expect(found.since!.low).toBeLessThan(5 * hour);
    expect(found.since!.high).toBeGreaterThan(5 * hour);
    expect(found.chance).toBeLessThanOrEqual(0.01);
  });

  it('finds a slope and where it begins, also downwards', () => {
    const values = [5, 5.02, 4.98, 5, 5.01, 4.5, 4.02, 3.5, 3.01, 2.5, 2];
    const found = findChange(windows(values), 1);
    expect(found).toMatchObject({ says: 'falling', shape: 'slope' });
    expect(found.since!.value).toBe(4.5 * hour);
    expect(found.before).toBeCloseTo(5, 1);
    expect(found.after).toBeCloseTo(2, 1);
  });

  it('tells a slope that runs from the beginning', () => {
    const found = findChange(windows([1, 1.31, 1.6, 1.92, 2.2, 2.49, 2.8, 3.1]), 1);
    expect(found).toMatchObject({ says: 'rising', shape: 'slope' });
    expect(found.since!.low).toBe(0);
  });

  it('trusts a value with a wide interval less', () => {
    const values = [2, 2.1, 1.9, 2, 2.1, 1.9, 2, 6];
    const spreads = values.map((value) => (value > 5 ? 4 : 0.1));
    expect(findChange(windows(values, spreads), 1)).toMatchObject({ says: 'no change shown' });
    const mean = findChange(windows(values, spreads), 1).before!;
    expect(mean).toBeCloseTo(2, 1);
  });

  it('shows none in equal values, and cannot tell of fewer than six', () => {
    expect(findChange(windows([2, 2, 2, 2, 2, 2, 2]), 1)).toMatchObject({
      says: 'no change shown',
      since: null,
      before: 2,
      after: 2,
      chance: 1,
    });
    expect(findChange(windows([1, 2, 3, 4, 5]), 1)).toMatchObject({ says: 'cannot tell', chance: null });
  });

  it('gives the same answer for the same seed', () => {
    const values = noisy(12, 0.3, 4, (i) => 2 + 0.05 * i);
    expect(findChange(values, 7)).toEqual(findChange(values, 7));
  });

  // A permutation test at 5 % shows a change where there is none in 5 % of cases; of 200 that is 3 to 18 in 99 %.
  it('shows a change where there is none about as seldom as it says', () => {
    const random = seededRandom(99);
    let shown = 0;
    for (let seed = 1; seed <= 200; seed++) {
      const values = windows(Array.from({ length: 10 }, () => 3 + 0.3 * random.normal()));
      if (findChange(values, seed).says !== 'no change shown') shown++;
    }
    expect(shown).toBeGreaterThanOrEqual(3);
    expect(shown).toBeLessThanOrEqual(18);
  });

  it('holds the moment of a step in its interval, and finds the step', () => {
    let found = 0;
    let held = 0;
    for (let seed = 1; seed <= 60; seed++) {
      const { says, since } = findChange(
        noisy(14, 0.3, seed, (i) => (i < 8 ? 2 : 3)),
        1,
      );
      if (says !== 'rising') continue;
      found++;
      if (since!.low <= 8 * hour && 8 * hour <= since!.high) held++;
    }
    expect(found).toBeGreaterThanOrEqual(54);
    expect(held / found).toBeGreaterThanOrEqual(0.85);
  });
});
