/**
 * What a wide export of a stated size takes: the pass over it with all of its loops, and the audit of some of them by the
 * command line. A long record is assessed in seconds to minutes, so that an audit of all its loops would take hours.
 */
import { fork, spawnSync } from 'node:child_process';
import { mkdirSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { availableParallelism } from 'node:os';
import { join } from 'node:path';
import type { ExportMap } from '../../src/audit/sources/export-map';
import { mapText } from '../../src/audit/sources/read-map';
import { textTable } from '../text-table';
import type { SpoolTime } from './spool-time';
import { tagOf, writeWideExport } from './wide-export';

/** Loops in the export, and those of them that are audited. */
const loops = 1000;
const audited = 4;
const root = join(__dirname, '../..');

export interface ExportTime {
  readonly rows: number;
  readonly pass: SpoolTime;
  readonly audit: {
    readonly loops: number;
    readonly workers: number;
    readonly seconds: number;
    /** Largest resident memory of the process with its workers, MB. */
    readonly memory: number;
  };
}

/** @param bytes size of the export; its disk and half as much again is taken and given back */
export async function measureExport(bytes: number): Promise<ExportTime> {
  const { status } = spawnSync(process.execPath, [join(root, '.ci/build.cjs')], { stdio: 'inherit' });
  if (status !== 0) throw new Error('The program cannot be built.');
  const folder = join(root, '.cache/speed/export');
  rmSync(folder, { recursive: true, force: true });
  mkdirSync(folder, { recursive: true });
  try {
    const file = join(folder, 'wide.csv');
    const rows = writeWideExport(file, loops, bytes);
    process.stderr.write(`${Math.round(statSync(file).size / 1e6)} MB written ...\n`);
    const all = join(folder, 'all.csv');
    writeFileSync(all, mapText(mapOf(loops)));
    const pass = await passOver(file, all, join(folder, 'pass'));
    rmSync(join(folder, 'pass'), { recursive: true });
    process.stderr.write('read through ...\n');
    const some = join(folder, 'some.csv');
    writeFileSync(some, mapText(mapOf(audited)));
    const workers = Math.min(audited, availableParallelism());
    const audit = await auditOf(file, some, join(folder, 'audit'), workers);
    return { rows, pass, audit: { loops: audited, workers, ...audit } };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

function mapOf(count: number): ExportMap {
  const tags = Array.from({ length: count }, (_, loop) => tagOf(loop));
  return {
    loops: tags.map((tag, order) => ({ order, tag, sp: `${tag}.SP`, pv: `${tag}.PV`, op: `${tag}.OP` })),
  };
}

/** Goes over an export in a process of its own. */
export function passOver(
  file: string,
  map: string,
  folder: string,
  nodeOptions: readonly string[] = [],
): Promise<SpoolTime> {
  return new Promise((answered, failed) => {
    const child = fork(join(__dirname, 'spool-time.ts'), [file, map, folder], {
      execArgv: ['--import', 'tsx', ...nodeOptions],
    });
    child.on('message', answered);
    child.on('exit', (code, signal) => failed(new Error(`The reading ended with ${code ?? signal}.`)));
  });
}

function auditOf(
  file: string,
  map: string,
  folder: string,
  workers: number,
): Promise<{ seconds: number; memory: number }> {
  return new Promise((answered, failed) => {
    const start = performance.now();
    const words = [
      'audit',
      file,
      '--map',
      map,
      '--out',
      folder,
      '--workers',
      String(workers),
      '--no-notebook',
    ];
    const child = fork(join(root, 'dist/cli/main.js'), words, {
      execArgv: ['--require', join(__dirname, 'tell-memory.cjs')],
      stdio: ['ignore', 'ignore', 'inherit', 'ipc'],
    });
    let memory = Number.NaN;
    child.on('message', (told: { memory: number }) => {
      memory = told.memory;
    });
    child.on('exit', (code) => {
      if (code === 0) answered({ seconds: (performance.now() - start) / 1000, memory });
      else failed(new Error(`The audit ended with ${code}.`));
    });
  });
}

export function printExport({ rows, pass, audit }: ExportTime): string {
  const whole = (value: number): string => value.toFixed(0);
  return [
    textTable(
      `A wide export of ${whole(pass.bytes / 1e6)} MB, ${rows} rows, ${pass.loops} loops (target: at most 500 MB of memory per worker)`,
      ['what', 'loops', 'time s', 'memory MB', 'memory per worker MB'],
      [
        [
          'pass over the export',
          String(pass.loops),
          pass.spooling.toFixed(1),
          whole(pass.memory.spooled),
          '-',
        ],
        ['reading, one loop', '1', pass.reading.toFixed(2), whole(pass.memory.read), whole(pass.memory.read)],
        [
          `audit, ${audit.workers} workers`,
          String(audit.loops),
          audit.seconds.toFixed(1),
          whole(audit.memory),
          whole(audit.memory / audit.workers),
        ],
      ],
    ),
    `Disk for the work folder: ${whole(100 * pass.spoolShare)} % of the export\n`,
  ].join('\n');
}
