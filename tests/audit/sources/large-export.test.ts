import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, expect, it } from 'vitest';
import { draftMap } from '../../../src/audit/sources/draft-map';
import { mapText, readMap } from '../../../src/audit/sources/read-map';
import { readSpooled } from '../../../src/audit/sources/read-spooled';
import { spoolExport } from '../../../src/audit/sources/spool-export';
import { readLoop } from '../../../src/record/read-loop';
import { passOver } from '../../speed/export-time';
import { headerOf, rowOf, writeWideExport } from '../../speed/wide-export';

const folder = mkdtempSync(join(tmpdir(), 'stickband-large-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** Heap of the process that reads, MB: the cells of the export as texts take five times as much. */
const heap = 64;
const loops = 120;

it('goes through 50 MB with a heap of 64 MB, and gives the record of a file with one loop', async () => {
  const path = join(folder, 'wide.csv');
  const rows = writeWideExport(path, loops, 50e6);
  const map = join(folder, 'map.csv');
  writeFileSync(map, mapText(await draftMap(path)));
  const work = join(folder, 'work');
  const time = await passOver(path, map, work, [`--max-old-space-size=${heap}`]);
  expect(time).toMatchObject({ loops, samples: rows });
  // What a worker may have is 500 MB; buffers of the file and of the spool lie outside the heap.
  expect(time.memory.read).toBeLessThan(300);
  expect(time.spoolShare).toBeLessThan(0.5);

  // The spool that the other process made is used again.
  const spooled = await spoolExport(path, readMap(map), work);
  const alone = join(folder, 'alone.csv');
  const one = [77];
  writeFileSync(alone, headerOf(one) + Array.from({ length: rows }, (_, row) => rowOf(one, row)).join(''));
  const loop = spooled[77]!;
  const { source: _, sha256: __, ...record } = readSpooled(loop);
  expect(readLoop(alone, loop.reading)).toMatchObject(record);
}, 120_000);
