/**
 * Exports of many loops in files that other libraries wrote: openpyxl and XlsxWriter (exports/workbooks.py), parquet-wasm
 * and @dsnp/parquetjs (exports/parquet.mjs). The values that went in stand in exports/values.json, with the versions.
 */
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { draftMap } from '../../src/audit/sources/draft-map';
import { readSpooled } from '../../src/audit/sources/read-spooled';
import { spoolExport } from '../../src/audit/sources/spool-export';
import { expectAllClose } from '../closeness';
import values from './exports/values.json';

const work = mkdtempSync(join(tmpdir(), 'stickband-exports-'));
afterAll(() => rmSync(work, { recursive: true, force: true }));

type Values = Record<'SP' | 'PV' | 'OP', (number | null)[]> & { MODE: string[] };

/** Samples from the first one in automatic on; a missing one is carried forward. */
function fromAutomatic(loop: Values, signal: 'SP' | 'PV' | 'OP', usesMode: boolean): number[] {
  const from = usesMode ? loop.MODE.indexOf('AUTO') : 0;
  const filled: number[] = [];
  for (const value of loop[signal]) filled.push(value ?? filled[filled.length - 1]!);
  return filled.slice(from);
}

describe.each([
  { file: 'wide.xlsx', zoned: false, missing: 'empty-cells', modes: true },
  { file: 'long.xlsx', zoned: false, missing: 'bad-quality', modes: true },
  { file: 'wide.parquet', zoned: true, missing: 'empty-cells', modes: true },
  { file: 'wide-gzip.parquet', zoned: true, missing: 'empty-cells', modes: true },
  { file: 'long.parquet', zoned: false, missing: 'bad-quality', modes: false },
])('$file', ({ file, zoned, missing, modes }) => {
  const path = join(__dirname, 'exports', file);

  it('is mapped by its names and read with the values that went in', async () => {
    const map = await draftMap(path);
    expect(map.loops.map(({ tag }) => tag)).toEqual(Object.keys(values.loops));
    const loops = await spoolExport(path, map, join(work, file));
    for (const loop of loops) {
      const record = readSpooled(loop);
      const wanted = values.loops[loop.tag as keyof typeof values.loops] as Values;
      const from = modes ? wanted.MODE.indexOf('AUTO') : 0;
      // Clock times in sheets are rounded to the millisecond by the reader, and exact here.
      expect(record.samplePeriod).toBe(values.period);
      expect(Date.parse(record.start)).toBe(Date.parse(values.start) + 1000 * values.period * from);
      const exact = { absolute: 0 };
      expectAllClose(record.pv, fromAutomatic(wanted, 'PV', modes), exact, `${loop.tag} PV`);
      expectAllClose(record.op, fromAutomatic(wanted, 'OP', modes), exact, `${loop.tag} OP`);
      expectAllClose(record.sp!, fromAutomatic(wanted, 'SP', modes), exact, `${loop.tag} SP`);
      const codes = record.notes.map(({ code }) => code);
      expect(codes.includes('time-zone')).toBe(!zoned);
      expect(codes).toContain(missing);
      expect(record.logging.modeLogged).toBe(modes);
    }
  });
});
