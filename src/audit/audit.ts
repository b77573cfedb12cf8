/** The result of auditing many loops: plain data, the same for one run, a resumed run and merged shards. */
import type { Assessment } from '../assessment/assessment';
import type { LoopSignature } from './signature';

/** A loop that could not be assessed, with the reason. It never stops the others. */
export interface FailedLoop {
  readonly schema: 'stickband/failed-loop/1';
  readonly loop: string;
  /** File as its list names it, or its name in the folder. */
  readonly file: string;
  /** A sentence. */
  readonly error: string;
}

/** Loops that share one oscillation. */
export interface LoopGroup {
  /** s. */
  readonly period: number;
  readonly loops: readonly string[];
  /** Null where the source cannot be told; the reasons then say why. */
  readonly likelySource: string | null;
  readonly reasons: readonly string[];
}

export interface RankedLoop {
  readonly loop: string;
  /** Higher: look at it sooner. */
  readonly score: number;
  readonly reasons: readonly string[];
}

/** What the loops of an audit have in common: which version made it, and with which options. */
export interface AuditProvenance {
  readonly version: string;
  /** Options that change the result, resolved. Never paths, workers or shards. */
  readonly options: object;
  readonly seed: number;
}

export interface Audit {
  readonly schema: 'stickband/audit/1';
  /** In the order of the list, the map, or the file names of the folder. */
  readonly loops: readonly (Assessment | FailedLoop)[];
  readonly groups: readonly LoopGroup[];
  readonly ranking: readonly RankedLoop[];
  readonly cautions: readonly string[];
  readonly provenance: AuditProvenance;
}

/** One loop when its worker is through with it: plain data, and all that is kept of it. */
export interface FinishedLoop {
  /** Position in the whole audit, from 0, shards counted together. */
  readonly order: number;
  readonly file: string;
  readonly result: Assessment | FailedLoop;
  /** What grouping and ranking need after the record is gone; null for a failed loop. */
  readonly signature: LoopSignature | null;
}

/** One shard of an audit, as `--shard` writes it and `merge` reads it. */
export interface AuditPart {
  readonly schema: 'stickband/audit-part/1';
  /** This is shard number `shard`, from 1, of `of`. */
  readonly shard: number;
  readonly of: number;
  /** Number of loops of all shards together. */
  readonly allLoops: number;
  /** SHA-256 of the whole list of loops and what is stated of each: equal for all shards of one audit. */
  readonly listed: string;
  readonly loops: readonly FinishedLoop[];
  readonly cautions: readonly string[];
  readonly provenance: AuditProvenance;
}

export function hasFailed(result: Assessment | FailedLoop): result is FailedLoop {
  return result.schema === 'stickband/failed-loop/1';
}
