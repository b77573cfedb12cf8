/** Times the audit of a made unit as the built program runs it, and follows its memory from outside. */
import { execFileSync, spawn, spawnSync } from 'node:child_process';
import {
  closeSync,
  copyFileSync,
  mkdirSync,
  mkdtempSync,
  openSync,
  readdirSync,
  readSync,
  rmSync,
} from 'node:fs';
import { availableParallelism, tmpdir } from 'node:os';
import { join } from 'node:path';
import { writeMadeUnit } from './made-unit';
import { middle } from './stage-one';

export interface AuditTime {
  readonly loops: number;
  readonly samples: number;
  readonly workers: number;
  /** s, by the clock, from start to end of the program. */
  readonly seconds: number;
  /**
   * s that one loop takes when one worker does nothing else, mean of a spread of loops: with all cores, whose others
   * then collect its garbage and compile for it, and held to one core, which is what each worker has in the whole run.
   * The latter is null where there is no `taskset`.
   */
  readonly oneLoop: number;
  readonly oneLoopOnOneCore: number | null;
  /** `seconds` over either one-loop time x loops / workers. */
  readonly overIdeal: number;
  readonly overIdealOnOneCore: number | null;
  /** Resident memory of the program with its workers, MB: median around a tenth of the loops, and at the last of them. */
  readonly memory: { readonly early: number; readonly late: number; readonly most: number };
}

/** Loops that give the time of one. */
const timed = 20;
/** ms between looks at the memory. */
const every = 250;

/** Makes the unit in a temporary folder, and takes it away. */
export async function timeAudit(loops: number, samples: number): Promise<AuditTime> {
  const folder = mkdtempSync(join(tmpdir(), 'stickband-speed-'));
  try {
    const [unit, few] = [join(folder, 'unit'), join(folder, 'few')];
    for (const path of [unit, few]) mkdirSync(path);
    writeMadeUnit(unit, loops, samples);
    const names = readdirSync(unit).sort();
    const stride = Math.max(1, Math.floor(loops / timed));
    for (const name of names.filter((_, i) => i % stride === 0))
      copyFileSync(join(unit, name), join(few, name));
    const workers = availableParallelism();
    const oneLoop = paceOf(await follow(few, join(folder, 'alone'), 1));
    const oneLoopOnOneCore = canHoldToCore()
      ? paceOf(await follow(few, join(folder, 'on-one-core'), 1, ['taskset', '-c', '0']))
      : null;
    const whole = await follow(unit, join(folder, 'out'), workers);
    const around = (from: number, to: number): number =>
      middle(
        whole.looks
          .filter(({ finished }) => finished >= from * loops && finished < to * loops)
          .map(({ memory }) => memory),
      );
    return {
      loops,
      samples,
      workers,
      seconds: whole.seconds,
      oneLoop,
      oneLoopOnOneCore,
      overIdeal: whole.seconds / ((oneLoop * loops) / workers),
      overIdealOnOneCore:
        oneLoopOnOneCore === null ? null : whole.seconds / ((oneLoopOnOneCore * loops) / workers),
      memory: {
        early: around(0.075, 0.125),
        late: around(0.95, 1),
        most: Math.max(...whole.looks.map(({ memory }) => memory)),
      },
    };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

interface Look {
  /** s since the start of the program. */
  readonly at: number;
  readonly finished: number;
  /** MB. */
  readonly memory: number;
}

/** s a loop, from the first that is finished to the last. */
function paceOf({ looks }: { looks: readonly Look[] }): number {
  const first = looks.find(({ finished }) => finished > 0)!;
  const last = looks.find(({ finished }) => finished === looks.at(-1)!.finished)!;
  return (last.at - first.at) / (last.finished - first.finished);
}

function canHoldToCore(): boolean {
  return spawnSync('taskset', ['-c', '0', 'true']).status === 0;
}

/** Runs the program, behind the words of `before`, on a unit and looks at its journal and its memory until it ends. */
async function follow(
  unit: string,
  out: string,
  workers: number,
  before: readonly string[] = [],
): Promise<{ seconds: number; looks: Look[] }> {
  const [program, ...words] = [
    ...before,
    process.execPath,
    join('dist', 'cli', 'main.js'),
    'audit',
    unit,
    '--out',
    out,
    '--workers',
    String(workers),
    '--no-notebook',
  ];
  const start = performance.now();
  const child = spawn(program!, words, { stdio: ['ignore', 'ignore', 'inherit'] });
  const looks: Look[] = [];
  const finishedIn = lineCounter(join(out, 'audit.jsonl'));
  const look = setInterval(() => {
    const finished = Math.max(0, finishedIn() - 1);
    const memory = memoryOf(child.pid!);
    if (memory !== null) looks.push({ at: (performance.now() - start) / 1000, finished, memory });
  }, every);
  const code = await new Promise((resolve) => child.on('close', resolve));
  clearInterval(look);
  if (code !== 0) throw new Error(`The audit ended with ${code}.`);
  return { seconds: (performance.now() - start) / 1000, looks };
}

/** Counts the lines of a growing file; only what came since the last count is read. */
function lineCounter(path: string): () => number {
  const piece = Buffer.alloc(1 << 20);
  let at = 0;
  let lines = 0;
  return () => {
    let file: number;
    try {
      file = openSync(path, 'r');
    } catch {
      return 0; // not begun
    }
    for (let length = -1; length !== 0; at += length) {
      length = readSync(file, piece, 0, piece.length, at);
      for (let i = 0; i < length; i++) if (piece[i] === 0x0a) lines++;
    }
    closeSync(file);
    return lines;
  };
}

/** Resident memory of a process, MB; null when it is over. */
function memoryOf(process: number): number | null {
  try {
    return Number(execFileSync('ps', ['-o', 'rss=', '-p', String(process)], { encoding: 'utf8' })) / 1024;
  } catch {
    return null;
  }
}
