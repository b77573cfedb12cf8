/** Makes the audit of its finished loops: names told apart, groups, ranking. */
import type { Assessment } from '../assessment/assessment';
import { cautions } from '../assessment/cautions';
import { refuseUnknownOptions } from '../errors';
import type { Audit, AuditProvenance, FailedLoop, FinishedLoop } from './audit';
import { hasFailed } from './audit';
import { groupLoops } from './group-loops';
import { type RankingRule, rankLoops } from './rank-loops';

export interface AssembleOptions {
  /** Parts of the rule of the ranking to change. Default: none; the rule is that of {@link rankLoops}. */
  readonly ranking?: Partial<RankingRule>;
}

/**
 * @param finished all loops of the audit, in its order
 * @throws WrongUse for an unknown option, or a rule of the ranking that makes no sense
 */
export function assembleAudit(
  finished: readonly FinishedLoop[],
  { version, options, seed }: AuditProvenance,
  assembling: AssembleOptions = {},
): Audit {
  refuseUnknownOptions('Making an audit', assembling, ['ranking']);
  const { ranking } = assembling;
  const loops = tellApart(finished);
  const groups = groupLoops(loops);
  return {
    schema: 'stickband/audit/1',
    loops: loops.map(({ result }) => result),
    groups,
    ranking: rankLoops(loops, groups, { rule: ranking }),
    cautions,
    provenance: { version, options: ranking === undefined ? options : { ...options, ranking }, seed },
  };
}

/**
 * Groups and ranking name loops by their tags. Where several records have one tag, each is called after its file as
 * well, and a note says so.
 */
export function tellApart(finished: readonly FinishedLoop[]): FinishedLoop[] {
  const count = new Map<string, number>();
  for (const { result } of finished) count.set(result.loop, (count.get(result.loop) ?? 0) + 1);
  return finished.map((one) =>
    count.get(one.result.loop) === 1 ? one : { ...one, result: renamed(one.result, one.file) },
  );
}

function renamed(result: Assessment | FailedLoop, file: string): Assessment | FailedLoop {
  const loop = `${result.loop} (${file})`;
  if (hasFailed(result)) return { ...result, loop };
  const note = {
    code: 'tag-repeated',
    text: `Several records of this audit have the tag ${result.loop}; this one is called after its file ${file} as well.`,
  };
  return { ...result, loop, record: { ...result.record, notes: [...result.record.notes, note] } };
}
