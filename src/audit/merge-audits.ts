/** Puts the shards of an audit together again. Groups and ranking are made anew from all loops. */
import { WrongUse } from '../errors';
import { type AssembleOptions, assembleAudit } from './assemble-audit';
import type { Audit, AuditPart, AuditProvenance, FinishedLoop } from './audit';

/** All loops of an audit whose shards ran on their own, before anything is made of them. */
export interface MergedRun {
  readonly loops: readonly FinishedLoop[];
  readonly provenance: AuditProvenance;
  /** Empty: each shard told its own. */
  readonly leftOut: readonly string[];
}

/**
 * The same audit, byte for byte as JSON, that one run over all loops gives. The order of the parts does not matter.
 *
 * @throws WrongUse when parts are missing, given twice, or those of different audits
 */
export function mergeAudits(parts: readonly AuditPart[], options: AssembleOptions = {}): Audit {
  const { loops, provenance } = mergedRun(parts);
  return assembleAudit(loops, provenance, options);
}

/** As {@link mergeAudits}, which makes the audit of it; for `auditFindings`. */
export function mergedRun(parts: readonly AuditPart[]): MergedRun {
  const [first] = parts;
  if (first === undefined) throw new WrongUse('There are no parts to merge.');
  for (const part of parts) checkSame(first, part);
  const given = parts.map(({ shard }) => shard);
  const twice = [...new Set(given.filter((shard, i) => given.indexOf(shard) !== i))].sort((a, b) => a - b);
  if (twice.length > 0) {
    throw new WrongUse(`Shard ${twice.join(', ')} of ${first.of} was given twice. Give each part once.`);
  }
  const missing = Array.from({ length: first.of }, (_, i) => i + 1).filter((shard) => !given.includes(shard));
  if (missing.length > 0) {
    throw new WrongUse(
      `Shard ${missing.join(', ')} of ${first.of} is missing. Run it with --shard ${missing[0]}/${first.of}, then give all parts.`,
    );
  }
  const loops = parts.flatMap((part) => part.loops).sort((a, b) => a.order - b.order);
  if (loops.length !== first.allLoops || loops.some(({ order }, i) => order !== i)) {
    throw new WrongUse(
      `The parts hold ${loops.length} loops, but the audit has ${first.allLoops}: a part was changed. Run its shard again.`,
    );
  }
  return { loops, provenance: first.provenance, leftOut: [] };
}

function checkSame(first: AuditPart, part: AuditPart): void {
  const differs = (what: string, one: unknown, other: unknown): void => {
    if (JSON.stringify(one) === JSON.stringify(other)) return;
    throw new WrongUse(
      `Shard ${first.shard} of ${first.of} and shard ${part.shard} of ${part.of} do not belong together: ${what}. ` +
        'Run all shards with the same version, options and list of loops.',
    );
  };
  const { version, seed, options } = first.provenance;
  differs('their number of shards differs', first.of, part.of);
  differs(`their versions are ${version} and ${part.provenance.version}`, version, part.provenance.version);
  differs(`their seeds are ${seed} and ${part.provenance.seed}`, seed, part.provenance.seed);
  differs('their options differ', options, part.provenance.options);
  differs('their lists of loops differ', [first.listed, first.allLoops], [part.listed, part.allLoops]);
}
