/** Writes small exports of a historian into a folder of the test's own, which goes when the test file is done. */
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll } from 'vitest';

const folder = mkdtempSync(join(tmpdir(), 'stickband-record-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** Path of a new file with these contents. */
export function exportFile(contents: string | Uint8Array, name = '31-FC-104.csv'): string {
  const path = join(folder, name);
  writeFileSync(path, contents);
  return path;
}

export const exportFolder: string = folder;

/** 2026-03-04T06:00:00Z, ms */
export const start: number = Date.UTC(2026, 2, 4, 6);

/** ISO stamp so many seconds after the start, without ms where they are zero. */
export function stamp(seconds: number): string {
  return new Date(start + Math.round(seconds * 1000)).toISOString().replace('.000Z', 'Z');
}

export interface Row {
  readonly time: string | number;
  readonly sp: string | number;
  readonly pv: string | number;
  readonly op: string | number;
}

/** A quiet loop: PV and OP wander, rounded to 0.01, SP stands at 50. */
export function rows(count: number, change: (row: Row, i: number) => Row = (row) => row): Row[] {
  return Array.from({ length: count }, (_, i) =>
    change(
      {
        time: stamp(i),
        sp: 50,
        pv: (50 + 2 * Math.sin(i / 7)).toFixed(2),
        op: (40 + 3 * Math.cos(i / 7)).toFixed(2),
      },
      i,
    ),
  );
}

export function csv(list: readonly Row[], header = 'time,SP,PV,OP', separator = ','): string {
  return [header, ...list.map(({ time, sp, pv, op }) => [time, sp, pv, op].join(separator))].join('\n');
}
