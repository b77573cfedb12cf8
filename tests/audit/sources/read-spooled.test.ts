import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { basename, join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import type { MappedLoop } from '../../../src/audit/sources/export-map';
import { readSpooled } from '../../../src/audit/sources/read-spooled';
import { spoolExport } from '../../../src/audit/sources/spool-export';
import type { LoopRecord } from '../../../src/record/loop-record';
import { readLoop } from '../../../src/record/read-loop';

const folder = mkdtempSync(join(tmpdir(), 'stickband-sources-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** Samples of one loop, as texts. */
type Column = readonly string[];

const rows = 700;
/** Deterministic wandering numbers with two decimals, some of them around zero. */
const wandering = (pace: number, level: number, places = 2): Column =>
  Array.from({ length: rows }, (_, i) => (level + 3 * Math.sin(i / pace) + Math.cos((i * i) / 50)).toFixed(places));
const stamps: Column = Array.from({ length: rows }, (_, i) =>
  new Date(Date.UTC(2026, 2, 4, 6) + 2000 * i).toISOString().replace('.000Z', 'Z'),
);

/** What stands for a record: everything but where it came from. */
const facts = ({ source: _, sha256: __, ...rest }: LoopRecord): object => rest;

interface Columns {
  readonly [name: string]: Column;
}

const textOf = (columns: Columns, separator = ','): string =>
  [
    Object.keys(columns).join(separator),
    ...stamps.map((_, i) => Object.values(columns).map((cells) => cells[i]).join(separator)),
  ].join('\n');

let files = 0;
const fileOf = (text: string | Uint8Array, ending = 'csv'): string => {
  const path = join(folder, `export-${++files}.${ending}`);
  writeFileSync(path, text);
  return path;
};

const spooled = async (file: string, loops: Omit<MappedLoop, 'order'>[]): Promise<LoopRecord[]> => {
  const work = join(folder, `work-${files}`);
  const found = await spoolExport(file, { loops: loops.map((loop, order) => ({ order, ...loop })) }, work);
  return found.map((loop) => readSpooled(structuredClone(loop)));
};

const loops = ['31-FC-104', '31-LC-140', '31-PC-122'].map((tag, k): { tag: string; columns: Columns } => ({
  tag,
  columns: {
    [`${tag}.SP`]: Array.from({ length: rows }, () => String(50 + k)),
    [`${tag}.PV`]: wandering(7 + k, 50 * k),
    [`${tag}.OP`]: wandering(9 + k, 40, 1 + k),
  },
}));
const map = loops.map(({ tag }) => ({ tag, sp: `${tag}.SP`, pv: `${tag}.PV`, op: `${tag}.OP` }));
const wide = (change: (columns: Columns) => Columns = (columns) => columns): Columns =>
  change(Object.assign({ time: stamps }, ...loops.map(({ columns }) => columns)));

/** Each loop of the wide export as readLoop reads it from a file of its own. */
const alone = (text: (columns: Columns) => string | Uint8Array, name: string): LoopRecord[] =>
  loops.map(({ tag, columns }, k) =>
    readLoop(fileOf(text({ time: stamps, ...columns }), name), map[k]!),
  );

describe('a spooled export gives the records that readLoop gives of single files', () => {
  it.each<[string, (columns: Columns) => string | Uint8Array]>([
    ['commas', (columns) => textOf(columns)],
    ['semicolons and decimal commas', (columns) => textOf(columns, ';').replace(/(\d)\.(\d)/g, '$1,$2')],
  ])('wide, with %s', async (_, text) => {
    const file = fileOf(text(wide()));
    const records = await spooled(file, map);
    expect(records.map(facts)).toEqual(alone(text, 'csv').map(facts));
    expect(records[0]).toMatchObject({ source: basename(file), loop: '31-FC-104' });
  });
});
