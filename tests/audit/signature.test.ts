import { describe, expect, it } from 'vitest';
import { loopSignature } from '../../src/audit/signature';
import { findCycle } from '../../src/oscillation/find-cycle';
import { record } from '../evidence/loops';
import { madeLoop } from './made-loops';

const begin = Date.parse('2026-03-10T06:00:00Z') / 1000;

describe('what is kept of a loop', () => {
  it('is small, JSON-safe and finite', () => {
    const { signature } = madeLoop({ loop: '31-FC-201', samples: 7200 });
    const text = JSON.stringify(signature);
    expect(JSON.parse(text)).toEqual(signature);
    expect(text).not.toContain('null,null');
    expect(text.length).toBeLessThan(12_000);
  });

  it('knows when the record was made, with and without a zone', () => {
    const at = (start: string) => madeLoop({ loop: '31-FC-201', start, samples: 300 }).signature!;
    expect(at('2026-03-10T06:00:00Z')).toMatchObject({ from: begin, to: begin + 2 * 299 });
    expect(at('2026-03-10T08:00:00+02:00').from).toBe(begin);
    expect(at('2026-03-10T06:00:00').from).toBe(begin);
  });

  it('holds the moments at which the cycle begins', () => {
    const { clock } = madeLoop({ loop: '31-FC-201', period: 60, delay: 13 }).signature!;
    expect(clock).toMatchObject({ signal: 'PV', every: 1, began: null });
    expect(clock!.period).toBeCloseTo(60, 1);
    // The sine passes its middle upwards 13 s after each whole minute of the clock.
    for (const start of clock!.starts) expect(Math.abs(((start - 13 + 30) % 60) - 30)).toBeLessThan(3);
    expect(clock!.starts.length).toBeGreaterThanOrEqual(38);
  });

  it('thins the moments of a long record', () => {
    const { clock } = madeLoop({ loop: '31-FC-201', period: 20, samples: 12_000 }).signature!;
    expect(clock!.every).toBe(3);
    expect(clock!.starts.length).toBeGreaterThan(390);
    expect(clock!.starts.length).toBeLessThanOrEqual(400);
    const gaps = clock!.starts.slice(1).map((start, i) => start - clock!.starts[i]!);
    for (const gap of gaps) expect(gap).toBeCloseTo(60, -1);
  });

  it('sees where the swing came up', () => {
    const { clock } = madeLoop({ loop: '31-FC-201', quietUntil: 900 }).signature!;
    expect(Math.abs(clock!.began! - (begin + 900))).toBeLessThan(60);
    expect(clock!.starts[0]).toBeGreaterThanOrEqual(clock!.began!);
  });

  it('has no clock without a cycle, and that of OP where only OP cycles', () => {
    expect(madeLoop({ loop: '31-FC-301', period: null }).signature!.clock).toBeNull();
    const op = new Float64Array(1200).map((_, k) => Math.sin((2 * Math.PI * k) / 40));
    const pv = new Float64Array(1200);
    const made = record({ op, pv });
    const found = loopSignature({ record: made, opCycle: findCycle(op, 2), pvCycle: findCycle(pv, 2) });
    expect(found.clock).toMatchObject({ signal: 'OP' });
    expect(found.pvNoise).toBe(0);
    expect(Math.max(...found.spectrum.shares)).toBeGreaterThan(0.3);
  });

  it('draws a few cycles in at most 100 points', () => {
    const { picture } = madeLoop({ loop: '31-FC-201', period: 60, noise: 0 }).signature!;
    expect(picture.pv.length).toBeLessThanOrEqual(100);
    expect(picture.op.length).toBe(picture.pv.length);
    expect(picture.pv.length * picture.step).toBeCloseTo(5 * 60, -1);
    expect(Math.max(...picture.pv)).toBeCloseTo(1, 1);
  });

  it('copes with a record of one sample', () => {
    const one = Float64Array.of(1);
    const empty = findCycle(new Float64Array(0), 2);
    const found = loopSignature({ record: record({ op: one, pv: one }), opCycle: empty, pvCycle: empty });
    expect(found).toMatchObject({ clock: null, pvNoise: 0, spectrum: { shares: [] }, picture: { pv: [1] } });
  });
});
