import { describe, expect, it } from 'vitest';
import type { StictionTrack, StictionWindow } from '../../src/audit/track-stiction';
import { stictionOverTimeFigure } from '../../src/figures/stiction-over-time-figure';
import { expectSound, traceOf } from './findings-fixture';

const estimate = (value: number) => ({
  value,
  low: value - 0.2,
  high: value + 0.4,
  unit: '% of OP span',
});
const hour = 3600;
const windows: StictionWindow[] = [2, 2.1, null, 2, 2.9, 3.1, 3, 3].map((S, i) => ({
  from: i * hour,
  to: (i + 1) * hour,
  S: S === null ? null : estimate(S),
  J: S !== null && i % 2 === 0 ? estimate(1) : null,
  refused: S === null ? ['OP hardly moves.'] : [],
}));
const step: StictionTrack = {
  loop: '31-FC-104',
  start: '2026-03-10T06:00:00Z',
  window: hour,
  windows,
  change: {
    says: 'rising',
    shape: 'step',
    since: { value: 4 * hour, low: 3.5 * hour, high: 4.5 * hour },
    before: 2,
    after: 3,
    chance: 0.01,
  },
  reasons: ['S went up.'],
};

describe('stictionOverTimeFigure', () => {
  it('draws S and J with their intervals at the middle of each window, and windows without numbers', () => {
    const figure = stictionOverTimeFigure(step);
    expectSound(figure);
    const S = traceOf<string>(figure, 'S');
    expect(S.x[0]).toBe('2026-03-10 06:30:00');
    expect(S.y).toEqual([2, 2.1, 2, 2.9, 3.1, 3, 3]);
    expect(S.error_y).toMatchObject({ array: Array(7).fill(0.4), arrayminus: Array(7).fill(0.2) });
    expect(traceOf(figure, 'J').y).toHaveLength(3);
    expect(traceOf(figure, 'no numbers')).toMatchObject({
      x: ['2026-03-10 08:30:00'],
      customdata: ['OP hardly moves.'],
    });
    expect(figure.caption).toContain('S went up.');
  });

  it('draws a step with the interval of its moment', () => {
    const figure = stictionOverTimeFigure(step);
    expect(traceOf<string>(figure, 'course of S')).toMatchObject({
      x: ['2026-03-10 06:00:00', '2026-03-10 10:00:00', '2026-03-10 10:00:00', '2026-03-10 14:00:00'],
      y: [2, 2, 3, 3],
    });
    const { shapes } = figure.layout as { shapes: { x0: string; x1: string }[] };
    expect(shapes[0]).toMatchObject({ x0: '2026-03-10 09:30:00', x1: '2026-03-10 10:30:00' });
  });

  it('draws a slope up to the middle of the last window', () => {
    const slope = { ...step, change: { ...step.change, shape: 'slope' as const } };
    const { x, y } = traceOf<string>(stictionOverTimeFigure(slope), 'course of S');
    expect(x.at(-1)).toBe('2026-03-10 13:30:00');
    expect(y).toEqual([2, 2, 3]);
  });

  it('draws the mean where no change is shown, and says so where it cannot be told', () => {
    const none = { ...step.change, says: 'no change shown', shape: null, since: null, after: 2 } as const;
    const figure = stictionOverTimeFigure({ ...step, change: none });
    expect(traceOf(figure, 'mean of S').y).toEqual([2, 2]);
    expect((figure.layout as { shapes: object[] }).shapes).toEqual([]);
    const open = { ...none, says: 'cannot tell', before: null, after: null, chance: null } as const;
    const few = stictionOverTimeFigure({ ...step, windows: windows.slice(2, 3), change: open });
    expectSound(few);
    expect(JSON.stringify(few.layout)).toContain('Too few windows give S');
  });
});
