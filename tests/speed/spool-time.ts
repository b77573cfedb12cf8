/**
 * Spools an export and reads some of its loops one by one, in a process of its own: what that takes in time, memory and disk.
 * Started with the export, its map and a work folder; sends a {@link SpoolTime}.
 */
import { statSync } from 'node:fs';
import { join } from 'node:path';
import { readMap } from '../../src/audit/sources/read-map';
import { readSpooled } from '../../src/audit/sources/read-spooled';
import { spoolExport } from '../../src/audit/sources/spool-export';

export interface SpoolTime {
  readonly bytes: number;
  readonly loops: number;
  readonly samples: number;
  /** s, for the pass over the export and for the reading of one loop. */
  readonly spooling: number;
  readonly reading: number;
  /** Largest resident memory of the process, MB: before, after the pass and after reading loops. */
  readonly memory: { readonly before: number; readonly spooled: number; readonly read: number };
  /** Bytes of the spool over those of the export. */
  readonly spoolShare: number;
}

/** Loops that are read at most. */
const mostRead = 50;

void (async () => {
  const [file, map, folder] = process.argv.slice(2) as [string, string, string];
  const before = memory();
  const start = performance.now();
  const loops = await spoolExport(file, readMap(map), folder);
  const spooled = memory();
  const between = performance.now();
  let samples = 0;
  const some = loops.filter((_, i) => i % Math.ceil(loops.length / mostRead) === 0);
  for (const loop of some) samples = readSpooled(loop).op.length;
  const end = performance.now();
  const { size } = statSync(file);
  process.send!({
    bytes: size,
    loops: loops.length,
    samples,
    spooling: (between - start) / 1000,
    reading: (end - between) / 1000 / some.length,
    memory: { before, spooled, read: memory() },
    spoolShare: statSync(join(folder, 'cells.bin')).size / size,
  } satisfies SpoolTime);
})();

function memory(): number {
  return process.resourceUsage().maxRSS / 1024;
}
