/** Writes a wide export of many loops, of any size, row by row; the numbers follow from row and loop alone. */
import { closeSync, openSync, writeSync } from 'node:fs';

/** Seconds between rows. */
const period = 1;
const start = Date.UTC(2026, 2, 4, 6);
const gathered = 1 << 20;

export function tagOf(loop: number): string {
  return `31-FC-${1000 + loop}`;
}

/** SP, PV and OP of a loop in a row: a cycle of its own, with a little that looks like noise. */
function cellsOf(loop: number, row: number): string {
  const angle = (2 * Math.PI * row) / (40 + (loop % 23));
  const noise = ((row * 7919 + loop * 104_729) % 1009) / 1009 - 0.5;
  const sp = 50 + (loop % 10);
  const pv = sp + 2 * Math.sin(angle) + 0.2 * noise;
  const op = 40 + 3 * Math.cos(angle) - 0.1 * noise;
  return `${sp},${pv.toFixed(3)},${op.toFixed(2)}`;
}

export function headerOf(loops: readonly number[]): string {
  return `time,${loops.map((loop) => ['SP', 'PV', 'OP'].map((signal) => `${tagOf(loop)}.${signal}`).join(',')).join(',')}\n`;
}

export function rowOf(loops: readonly number[], row: number): string {
  const time = new Date(start + 1000 * period * row).toISOString();
  return `${time},${loops.map((loop) => cellsOf(loop, row)).join(',')}\n`;
}

/** Writes whole rows until the file has so many bytes at least; the number of rows. */
export function writeWideExport(path: string, loops: number, bytes: number): number {
  const all = Array.from({ length: loops }, (_, loop) => loop);
  const file = openSync(path, 'w');
  let text = headerOf(all);
  let written = 0;
  let row = 0;
  for (; written + text.length < bytes; row++) {
    text += rowOf(all, row);
    if (text.length < gathered) continue;
    writeSync(file, text);
    written += text.length;
    text = '';
  }
  writeSync(file, text);
  closeSync(file);
  return row;
}
