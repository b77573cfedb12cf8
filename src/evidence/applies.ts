/**
 * Reasons, shared by several indicators, why one does not apply to a loop. Each gives a sentence, or null.
 */
import type { LoopFacts } from './loop-facts';

/** Fewest samples a cycle that keep its shape (Thornhill 2005, value from memory). */
const fewestSamples = 7;
/**
 * Periods of OP and PV further apart than this factor are two cycles (as in findCycle; an uneven one reads
 * unevenly).
 */
const samePeriod = 1.6;

/** The first reason there is. */
export function firstReason(...reasons: readonly (string | null)[]): string | null {
  return reasons.find((reason) => reason !== null) ?? null;
}

export function needsShape({ period }: LoopFacts): string | null {
  return period >= fewestSamples
    ? null
    : `A cycle has ${period.toFixed(1)} samples; its shape needs at least ${fewestSamples}.`;
}

export function needsOpCycle({ opCycle }: LoopFacts): string | null {
  return opCycle.present ? null : 'OP has no regular cycle.';
}

export function needsPvCycle({ pvCycle }: LoopFacts): string | null {
  return pvCycle.present ? null : 'PV has no regular cycle.';
}

export function needsBothCycles(facts: LoopFacts): string | null {
  const reason = firstReason(needsOpCycle(facts), needsPvCycle(facts));
  if (reason !== null) return reason;
  const op = facts.opCycle.period!;
  const pv = facts.pvCycle.period!;
  return Math.max(op, pv) <= samePeriod * Math.min(op, pv)
    ? null
    : `OP cycles every ${op.toPrecision(3)} s and PV every ${pv.toPrecision(3)} s: not one cycle.`;
}

export function needsSelfRegulating({ record }: LoopFacts): string | null {
  return needsResponse(record.response, 'self-regulating');
}

export function needsIntegrating({ record }: LoopFacts): string | null {
  return needsResponse(record.response, 'integrating');
}

export function needsKnownResponse({ record }: LoopFacts): string | null {
  return record.response === 'unknown'
    ? 'It is not known whether the process is self-regulating or integrating.'
    : null;
}

function needsResponse(is: string, wanted: string): string | null {
  if (is === wanted) return null;
  return is === 'unknown'
    ? `It holds for ${wanted} processes, and it is not known whether this one is.`
    : `It holds for ${wanted} processes; this one is ${is}.`;
}
