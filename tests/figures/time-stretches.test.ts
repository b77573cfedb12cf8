import { describe, expect, it } from 'vitest';
import { recordClock } from '../../src/figures/clock';
import { stretchesInWords, timeColoured, timeStretches } from '../../src/figures/time-stretches';
import { fixtureFindings, period } from './findings-fixture';

const { record, opCycle } = fixtureFindings();

describe('timeStretches', () => {
  it('shows a short record whole, in stretches that touch', () => {
    const stretches = timeStretches(1500, 1, opCycle);
    expect(stretches[0]!.from).toBe(0);
    expect(stretches.at(-1)!.to).toBe(1499);
    for (let i = 1; i < stretches.length; i++)
      expect(stretches[i]!.from).toBeLessThanOrEqual(stretches[i - 1]!.to);
    expect(stretchesInWords(stretches)).toBe('Early in the record light, late dark.');
  });

  it('shows a cycle and a bit at a time of a long one, from its first sample to its last', () => {
    const stretches = timeStretches(86_400, 1, opCycle);
    expect(stretches).toHaveLength(18);
    expect(stretches[0]!.from).toBe(0);
    expect(stretches.at(-1)!.to).toBe(86_399);
    for (const { from, to } of stretches) expect(to - from).toBeGreaterThanOrEqual(period);
    expect(stretchesInWords(stretches)).toContain('18 stretches');
  });

  it('thins a stretch of a slow cycle', () => {
    const slow = { ...opCycle, period: 5000 };
    for (const { from, to, step } of timeStretches(200_000, 1, slow)) {
      expect((to - from) / step).toBeLessThanOrEqual(110);
    }
  });

  it('takes a record of a few samples', () => {
    expect(timeStretches(3, 1, opCycle)).toEqual([{ from: 0, to: 2, step: 1 }]);
  });
});

describe('timeColoured', () => {
  it('names the first, the middle and the last stretch with their clock times', () => {
    const stretches = timeStretches(record.op.length, 1, opCycle);
    const traces = timeColoured(record.op, record.pv, stretches, recordClock(record), 1) as {
      name: string;
      showlegend: boolean;
      x: number[];
    }[];
    expect(traces).toHaveLength(stretches.length);
    expect(traces.filter((trace) => trace.showlegend).map((trace) => trace.name)).toEqual([
      'early, 06:00',
      '06:30',
      'late, 06:58',
    ]);
    const drawn = traces[4]!.x[10]!;
    expect(drawn).toBeCloseTo(record.op[stretches[4]!.from + 10]!, 3);
  });
});
