/** An audit with what its loops left behind, joined loop by loop in ranked order: what page, tables and CSV are made of. */
import type { Assessment } from '../assessment/assessment';
import { refuseUnknownOptions } from '../errors';
import { type AssembleOptions, assembleAudit } from './assemble-audit';
import { type Audit, type FailedLoop, hasFailed, type LoopGroup } from './audit';
import type { FinishedRun } from './audit-loops';
import type { LoopSignature } from './signature';

/** One assessed loop of an audit. */
export interface RankedFindings {
  /** 1 for the loop to look at first. */
  readonly place: number;
  readonly score: number;
  /** Why it stands where it stands, in sentences. */
  readonly reasons: readonly string[];
  readonly assessment: Assessment;
  readonly signature: LoopSignature;
  /** The loops that it cycles together with; null for none. */
  readonly group: LoopGroup | null;
  /** File as its list names it, or its name in the folder. */
  readonly file: string;
  /** Position in the audit, from 0. */
  readonly order: number;
}

export interface AuditFindings {
  readonly audit: Audit;
  readonly ranked: readonly RankedFindings[];
  readonly failed: readonly FailedLoop[];
  /** What was found beside the loops but not taken as one, in sentences. */
  readonly leftOut: readonly string[];
}

/**
 * @param run all loops of an audit, as `finishLoops` gives them
 * @throws WrongUse for an unknown option, or a rule of the ranking that makes no sense
 */
export function auditFindings(
  { loops, provenance, leftOut }: Pick<FinishedRun, 'loops' | 'provenance' | 'leftOut'>,
  options: AssembleOptions = {},
): AuditFindings {
  refuseUnknownOptions('auditFindings', options, ['ranking']);
  const audit = assembleAudit(loops, provenance, options);
  const groupOf = new Map(audit.groups.flatMap((group) => group.loops.map((loop) => [loop, group] as const)));
  const rankOf = new Map(audit.ranking.map((ranked, i) => [ranked.loop, { ...ranked, place: i + 1 }]));
  const ranked = loops.flatMap(({ signature, file, order }, i): RankedFindings[] => {
    // The audit may call a loop after its file as well, but keeps the order.
    const assessment = audit.loops[i]!;
    if (hasFailed(assessment) || signature === null) return [];
    const { loop } = assessment;
    const { place, score, reasons } = rankOf.get(loop)!;
    return [{ place, score, reasons, assessment, signature, group: groupOf.get(loop) ?? null, file, order }];
  });
  return {
    audit,
    ranked: ranked.sort((a, b) => a.place - b.place),
    failed: audit.loops.filter(hasFailed),
    leftOut,
  };
}

/** What a loop is in the cycle that it shares with others. */
export type SharedRole = 'likely source' | 'likely shaken' | 'source not told';

export function roleOf({ assessment, group }: RankedFindings): SharedRole | null {
  if (group === null) return null;
  if (group.likelySource === null) return 'source not told';
  return group.likelySource === assessment.loop ? 'likely source' : 'likely shaken';
}

/** PV swing in % of the PV range; null where the range was not stated. */
export function swingOfRange({ assessment, signature }: RankedFindings): number | null {
  const { pvRange } = signature;
  return pvRange === null ? null : (100 * assessment.severity.pvSwing) / (pvRange.high - pvRange.low);
}
