/** Audits many loops: finds them, assesses them on all cores, and keeps what is finished safe. */
import { mkdtempSync, rmSync, statSync } from 'node:fs';
import { availableParallelism, tmpdir } from 'node:os';
import { join } from 'node:path';
import { cautions } from '../assessment/cautions';
import { refuseUnknownOptions, UnwritableOutput, WrongUse } from '../errors';
import type { ReadLoopOptions } from '../record/read-loop';
import { wallClock } from '../record/wall-clock';
import { seededRandom } from '../signal/random';
import { version } from '../version';
import { type AssembleOptions, assembleAudit } from './assemble-audit';
import type { Audit, AuditPart, FinishedLoop } from './audit';
import { hasFailed } from './audit';
import { type FoundLoops, findLoops } from './find-loops';
import { type AuditIdentity, Journal } from './journal';
import type { ListedLoop, LoopJob, LoopSource } from './loop-job';
import { rankLoops } from './rank-loops';
import { runJobs } from './run-jobs';
import { checkShard, isInShard, type Shard } from './shard';
import { type ExportMap, isReadable } from './sources/export-map';
import { spoolExport } from './sources/spool-export';
import type { SpooledLoop } from './sources/spooled-loop';

/** What may be stated of every loop of a folder or list at once. */
export type ReadingForAll = Pick<
  ReadLoopOptions,
  'time' | 'sp' | 'pv' | 'op' | 'travel' | 'mode' | 'timeFormat' | 'zone'
>;
const readingForAll = ['time', 'sp', 'pv', 'op', 'travel', 'mode', 'timeFormat', 'zone'] as const;

export interface AuditProgress {
  /** What is being done: reading a large export comes before its loops. */
  readonly step: 'reading the export' | 'assessing';
  /** Loops finished, with those of an earlier run, and loops in all. */
  readonly finished: number;
  readonly loops: number;
  /** Of the finished ones. */
  readonly failed: number;
  /** Share of the step that is done, 0..1. */
  readonly share: number;
  /** s, from the pace of this run; null before there is one. */
  readonly timeLeft: number | null;
}

/** What {@link finishLoops} takes. */
export interface RunOptions {
  /** File with the map of an export that holds many loops. Default: none; the source is a folder or a list. */
  readonly map?: string;
  /** What holds for every file of a folder or list, such as names of columns or `zone`. Default: nothing. */
  readonly reading?: ReadingForAll;
  /**
   * Folder for the journal (`audit.jsonl`), from which a stopped audit is continued. Default: a temporary one that is
   * taken away at the end, so that nothing can be continued.
   */
  readonly folder?: string;
  /**
   * Continue the journal in `folder`, if there is one: what it holds is not done again, except loops that failed or whose
   * file was changed. Default false: a journal that is there is refused.
   */
  readonly resume?: boolean;
  /** Whether loops that failed are done again when resuming. Default true; false shows a finished audit as it is. */
  readonly retry?: boolean;
  /** Threads, of which each assesses one loop at a time; 0 for the calling thread. Default: one for each core. */
  readonly workers?: number;
  /** Seed of everything random. Default 1. */
  readonly seed?: number;
  /** Called when something moved on. */
  readonly onProgress?: (progress: AuditProgress) => void;
}

export interface AuditOptions extends RunOptions, AssembleOptions {}

const optionNames = ['map', 'reading', 'folder', 'resume', 'retry', 'workers', 'seed', 'onProgress'] as const;

/** A finished run over all loops, or over those of one shard, before anything is made of them. */
export interface FinishedRun extends AuditIdentity {
  readonly loops: readonly FinishedLoop[];
  /** What was found but not taken as a loop, in sentences. */
  readonly leftOut: readonly string[];
}

/**
 * Audits a unit: which loops cycle, why, which share one oscillation, and where to look first.
 *
 * A loop that cannot be read or assessed becomes a {@link FailedLoop} and stops nothing. The same loops, options,
 * version and seed give the same bytes, however many workers there are and however often the run was resumed.
 *
 * @param source folder with one file a loop; a list of loops (CSV with the columns `file`, `tag`, `service`, `response`,
 *   `pv_low`, `pv_high`, all but `file` optional, paths relative to the list); or an export of many loops with a `map`
 * @throws UnreadableInput for a source that is not there or has no loops, or a list or map with mistakes
 * @throws WrongUse for unknown or contradicting options, and a journal that may not be continued
 * @throws UnwritableOutput when the journal cannot be written
 */
export async function auditLoops(source: string, options: AuditOptions = {}): Promise<Audit> {
  refuseUnknownOptions('auditLoops', options, [...optionNames, 'ranking']);
  const { ranking, ...running } = options;
  rankLoops([], [], { rule: ranking }); // a wrong rule is told now, not after hours of work
  return auditOf(await finishLoops(source, null, running), { ranking });
}

/** The audit of a run over all loops. Throws {@link WrongUse} for a rule of the ranking that makes no sense. */
export function auditOf({ loops, provenance }: FinishedRun, options: AssembleOptions = {}): Audit {
  return assembleAudit(loops, provenance, options);
}

/** What one shard leaves to be merged. */
export function partOf({ shard, of, allLoops, listed, loops, provenance }: FinishedRun): AuditPart {
  return { schema: 'stickband/audit-part/1', shard, of, allLoops, listed, loops, cautions, provenance };
}

/** Name of the journal of a whole audit, or of one shard. */
export function journalName(shard: Shard | null): string {
  return shard === null ? 'audit.jsonl' : `audit-part-${shard.shard}-of-${shard.of}.jsonl`;
}

/**
 * Assesses all loops, or those of one shard; as {@link auditLoops}, which makes the audit of them.
 *
 * @param shard which share of the loops; null for all
 */
export async function finishLoops(
  source: string,
  shard: Shard | null,
  options: RunOptions = {},
): Promise<FinishedRun> {
  refuseUnknownOptions('finishLoops', options, optionNames);
  const {
    map = null,
    reading = {},
    folder,
    resume = false,
    retry = true,
    seed = 1,
    onProgress = () => {},
  } = options;
  const { workers = availableParallelism() } = options;
  refuseUnknownOptions('The option "reading" of finishLoops', reading, readingForAll);
  if (!(Number.isInteger(workers) && workers >= 0)) {
    throw new WrongUse(`The option "workers" is a whole number from 0 on. Received ${workers}.`);
  }
  // Told now, and not of each loop.
  seededRandom(seed);
  if (reading.zone !== undefined) wallClock(reading.zone);
  if (resume && folder === undefined) {
    throw new WrongUse('Only an audit with a folder of its own can be resumed. State the option "folder".');
  }
  if (shard) checkShard(shard);
  const found = findLoops(source, map, reading);
  const identity: AuditIdentity = {
    shard: shard?.shard ?? 1,
    of: shard?.of ?? 1,
    allLoops: found.loops.length,
    listed: found.listed,
    provenance: { version, options: reading, seed },
  };
  const workFolder = folder ?? mkdtempSync(join(tmpdir(), 'stickband-audit-'));
  try {
    const journal = Journal.open(join(workFolder, journalName(shard)), identity, resume);
    try {
      const loops = found.loops.filter(({ tag }) => shard === null || isInShard(tag, shard));
      const spoolFolder = join(workFolder, journalName(shard).replace(/\.jsonl$/, '-export'));
      await finish(loops, found, journal, { workers, seed, retry, spoolFolder, onProgress });
      return { ...identity, loops: allOf(loops, journal), leftOut: found.leftOut };
    } finally {
      journal.close();
    }
  } finally {
    if (folder === undefined) rmSync(workFolder, { recursive: true, force: true });
  }
}

interface Run {
  readonly workers: number;
  readonly seed: number;
  readonly retry: boolean;
  /** Where the columns of an export lie while its loops are assessed. */
  readonly spoolFolder: string;
  readonly onProgress: (progress: AuditProgress) => void;
}

/** Does what the journal does not hold yet. */
async function finish(
  loops: readonly ListedLoop[],
  { map }: FoundLoops,
  journal: Journal,
  { workers, seed, retry, spoolFolder, onProgress }: Run,
): Promise<void> {
  // Taken before anything is read: a file that changes meanwhile is read again when the audit is resumed.
  const stamps = new Map(loops.map(({ order, path }) => [order, stampOf(path)]));
  const left = loops.filter(({ order }) => {
    const entry = journal.entries.get(order);
    return entry === undefined || (retry && entry.failed) || entry.stamp !== stamps.get(order);
  });
  if (left.length === 0) return;
  const counts = { finished: loops.length - left.length, loops: loops.length, failed: 0 };
  const spools =
    map &&
    (await spoolsOf(loops, map, spoolFolder, (share, timeLeft) =>
      onProgress({ step: 'reading the export', ...counts, share, timeLeft }),
    ));
  const jobs = left.map(({ order, tag, file, path, reading }): LoopJob => {
    const loop = spools?.get(order);
    const source: LoopSource = loop ? { kind: 'spooled', loop } : { kind: 'file', path, reading };
    return { order, tag, file, source, seed };
  });
  const tell = timed((share, timeLeft) => onProgress({ step: 'assessing', ...counts, share, timeLeft }));
  tell(0);
  let done = 0;
  await runJobs(jobs, workers, (loop) => {
    journal.add(loop, stamps.get(loop.order) ?? null);
    counts.finished++;
    if (hasFailed(loop.result)) counts.failed++;
    done++;
    tell(done / jobs.length);
  });
  rmSync(spoolFolder, { recursive: true, force: true });
}

/** The loops of an export by their order, each ready to be read by itself. */
async function spoolsOf(
  loops: readonly ListedLoop[],
  map: ExportMap,
  folder: string,
  onProgress: (share: number, timeLeft: number | null) => void,
): Promise<Map<number, SpooledLoop>> {
  const orders = new Set(loops.map(({ order }) => order));
  const mine = map.loops.filter(({ order }) => orders.has(order));
  if (mine.some(isReadable)) {
    const spooled = await spoolExport(loops[0]!.path, { loops: mine }, folder, timed(onProgress));
    return new Map(spooled.map((loop) => [loop.order, loop]));
  }
  // A shard in which the map leaves PV or OP of every loop open: reading each of them says so, without the export.
  return new Map(
    loops.map(({ order, tag, file, reading }) => [order, { order, tag, file, sha256: '', folder, reading }]),
  );
}

/** Adds the time left, s, to a share done: from the pace since this was called; null before there is one. */
function timed(tell: (share: number, timeLeft: number | null) => void): (share: number) => void {
  const start = performance.now();
  return (share) => {
    const spent = (performance.now() - start) / 1000;
    tell(share, share > 0 ? (spent / share) * (1 - share) : null);
  };
}

/** Size and time of change of a file; null when it is not there. */
function stampOf(path: string): string | null {
  try {
    const { size, mtimeMs } = statSync(path);
    return `${size} ${mtimeMs}`;
  } catch {
    return null;
  }
}

/** @throws UnwritableOutput when another program took away from the journal what was written */
function allOf(loops: readonly ListedLoop[], journal: Journal): FinishedLoop[] {
  const wanted = new Set(loops.map(({ order }) => order));
  const finished = journal.finished().filter(({ order }) => wanted.has(order));
  if (finished.length === wanted.size) return finished;
  throw new UnwritableOutput(
    `The journal holds ${finished.length} of ${wanted.size} loops: another program wrote to it at the same time. ` +
      'Run the audit again with --resume, alone in its folder.',
  );
}
