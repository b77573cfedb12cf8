import { mkdirSync, readdirSync, readFileSync, statSync, truncateSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import type { ExportMap } from '../../../src/audit/sources/export-map';
import { readSpooled } from '../../../src/audit/sources/read-spooled';
import { spoolExport } from '../../../src/audit/sources/spool-export';
import { readLoop } from '../../../src/record/read-loop';
import { scratchFolder } from '../../scratch-folder';
import { headerOf, rowOf, tagOf } from '../../speed/wide-export';

const folder = scratchFolder();
const loops = [0, 1, 2];
const text = (rows: number, from = 0): string =>
  headerOf(loops) + Array.from({ length: rows }, (_, row) => rowOf(loops, from + row)).join('');
const map: ExportMap = {
  loops: loops.map((loop) => ({
    order: loop,
    tag: tagOf(loop),
    sp: `${tagOf(loop)}.SP`,
    pv: `${tagOf(loop)}.PV`,
    op: `${tagOf(loop)}.OP`,
  })),
};
let made = 0;
const exported = (contents: string | Uint8Array, ending = 'csv'): string => {
  const path = join(folder, `export-${++made}.${ending}`);
  writeFileSync(path, contents);
  return path;
};

describe('spoolExport and a spool that is there already', () => {
  const file = exported(text(300));
  const work = join(folder, 'work');
  const cells = join(work, 'cells.bin');
  /** Changes only when the cells are written again. */
  const written = (): number => statSync(cells).ino + statSync(cells).mtimeMs;

  it('uses it again for the same export and map, also for some of its loops', async () => {
    const first = await spoolExport(file, map, work);
    const before = written();
    expect(await spoolExport(file, map, work)).toEqual(first);
    const some = await spoolExport(file, { loops: map.loops.slice(1, 2) }, work);
    expect(some).toEqual([first[1]]);
    expect(written()).toBe(before);
    expect(readSpooled(some[0]!).pv.length).toBe(300);
  });

  it.each<[string, () => void, number]>([
    ['the export has other bytes, of the same number', () => writeFileSync(file, text(300, 5)), 300],
    ['the export has grown', () => writeFileSync(file, text(320)), 320],
    ['the spool was cut off', () => truncateSync(cells, statSync(cells).size - 1), 320],
    ['its list of columns is no whole text', () => truncateSync(join(work, 'spool.json'), 100), 320],
    [
      'another version made it',
      () => {
        const path = join(work, 'spool.json');
        writeFileSync(path, JSON.stringify({ ...JSON.parse(readFileSync(path, 'utf8')), version: '0.0.0' }));
      },
      320,
    ],
  ])('makes it anew when %s', async (_, change, rows) => {
    change();
    const [loop] = await spoolExport(file, map, work);
    const record = readLoop(file, loop!.reading);
    expect(record.pv.length).toBe(rows);
    expect(readSpooled(loop!)).toEqual(record);
  });

  it('makes it anew when the map says something else of a loop', async () => {
    const other = { loops: map.loops.map((loop) => ({ ...loop, service: 'level' as const })) };
    const [loop] = await spoolExport(file, other, work);
    expect(readSpooled(loop!).service).toBe('level');
  });

  it('leaves no half of one behind when reading fails', async () => {
    const broken = exported(`${text(20_000)}${rowOf(loops, 20_000).trim()},9\n${rowOf(loops, 20_001)}`);
    const other = join(folder, 'broken');
    await expect(spoolExport(broken, map, other)).rejects.toThrow(
      /has 11 cells on line 20002 but 10 column names/,
    );
    expect(readdirSync(other)).toEqual([]);
  });

  it('says that it is gone, or that the folder cannot be written', async () => {
    const [loop] = await spoolExport(file, map, work);
    expect(() => readSpooled({ ...loop!, folder: join(folder, 'nothing') })).toThrow(
      /no longer holds the export/,
    );
    const blocked = exported('', 'txt');
    await expect(spoolExport(file, map, join(blocked, 'work'))).rejects.toThrow(
      /cannot be written to \(a part of the path is a file\)/,
    );
  });
});

describe('spoolExport refuses with a sentence', () => {
  const work = join(folder, 'refused');
  const parquet = readFileSync(join(__dirname, '../../reference/exports/wide.parquet'));
  const book = readFileSync(join(__dirname, '../../reference/exports/wide.xlsx'));
  const damaged = Buffer.from(parquet);
  damaged.fill(0x55, 60, 2000);
  it.each<[string, () => string, RegExp]>([
    [
      'a file that is not there',
      () => join(folder, 'none.csv'),
      /There is no file ".*none\.csv"\. Check the path\./,
    ],
    [
      'a folder',
      () => {
        mkdirSync(join(folder, 'sub'), { recursive: true });
        return join(folder, 'sub');
      },
      /is a folder\. Give the file of one export/,
    ],
    ['an empty file', () => exported(''), /export-\d+\.csv is empty/],
    ['a file of blanks', () => exported(' \n\n \n'), /is empty/],
    ['bytes that are no text', () => exported(Buffer.from([1, 0, 2, 0, 3])), /is not a text file/],
    ['names without rows', () => exported(headerOf(loops)), /has column names but no rows below them/],
    [
      'a Parquet file that is cut off',
      () => exported(parquet.subarray(0, 9000), 'parquet'),
      /cannot be read as Parquet \(.*\)\. It may be cut off or damaged/,
    ],
    [
      'a damaged Parquet file',
      () => exported(damaged, 'parquet'),
      /cannot be read as Parquet|does not fit its map/,
    ],
    [
      'a workbook that is cut off',
      () => exported(book.subarray(0, 9000), 'xlsx'),
      /cannot be opened as an Excel workbook/,
    ],
    ['no time column', () => exported(text(20).replace('time', 'row')), /has no column for the time/],
  ])('%s', async (_, file, message) => {
    await expect(spoolExport(file(), map, work)).rejects.toThrow(message);
  });

  it('a map without a loop of which PV and OP are stated, and takes a map without loops', async () => {
    const file = exported(text(20));
    await expect(spoolExport(file, { loops: [{ order: 0, tag: 'a', pv: 'b' }] }, work)).rejects.toThrow(
      /states PV and OP of no loop/,
    );
    expect(await spoolExport(file, { loops: [] }, work)).toEqual([]);
  });
});
