import { describe, expect, it } from 'vitest';
import { readLoop } from '../../src/record/read-loop';
import { expectAllClose } from '../closeness';
import { stamp } from './export-file';

describe('a danfo data frame', () => {
  it('is read as danfo makes it', async () => {
    const { DataFrame } = await import('danfojs');
    const pv = Array.from({ length: 40 }, (_, i) => 50 + Math.round(200 * Math.sin(i / 5)) / 100);
    const op = Array.from({ length: 40 }, (_, i) => 40 + Math.round(200 * Math.cos(i / 5)) / 100);
    const frame = new DataFrame({
      time: pv.map((_, i) => stamp(i)),
      '31-FC-104.PV': pv,
      '31-FC-104.OP': op,
    });
    const record = readLoop(frame);
    expect(record).toMatchObject({ loop: '31-FC-104', source: 'data frame', samplePeriod: 1, sp: null });
    expectAllClose(record.pv, pv, { absolute: 1e-12 });
    expectAllClose(record.op, op, { absolute: 1e-12 });
    expect(readLoop(frame).sha256).toBe(record.sha256);
  });
});
