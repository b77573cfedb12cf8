/** Small exports of the invented area 31, one loop a file: too short for a cause, so that an audit of them takes moments. */
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { csv, type Row, rows } from '../record/export-file';

/** Names of the files written, in their order; each loop differs from the others. */
export function writeSmallLoops(folder: string, count: number, samples = 40): string[] {
  mkdirSync(folder, { recursive: true });
  return Array.from({ length: count }, (_, i) => {
    const name = `31-${'FLPT'[i % 4]}C-${100 + i}.csv`;
    writeFileSync(join(folder, name), smallLoop(i, samples));
    return name;
  }).sort();
}

export function smallLoop(variant: number, samples = 40): string {
  const swing = (row: Row, k: number): Row => ({
    ...row,
    pv: (50 + 2 * Math.sin(k / (5 + variant))).toFixed(2),
    op: (40 + 3 * Math.cos(k / (5 + variant))).toFixed(2),
  });
  return `${csv(rows(samples, swing))}\n`;
}
