/** A made unit: a source that shakes two loops, one that is tuned tight, a healthy one, and one that failed. */
import type { FinishedLoop } from '../../src/audit/audit';
import { type AuditFindings, auditFindings } from '../../src/audit/audit-findings';
import { failedLoop, type MadeLoop, madeLoop } from './made-loops';

const made: readonly MadeLoop[] = [
  { loop: '31-TC-308', period: null, verdict: 'not-oscillating', confidence: 0.6 },
  { loop: '31-FC-201', verdict: 'stiction', S: 4, corners: 0.3, pvRange: { low: 0, high: 100 } },
  { loop: '31-PC-202', delay: 9, seed: 2 },
  { loop: '31-LC-203', delay: 20, seed: 3 },
  { loop: '31-PC-231', period: 37, verdict: 'tight-tuning', seed: 4 },
];

/** In the order of its list, the failed loop in the middle. */
export function madeLoops(): FinishedLoop[] {
  const loops = made.map(madeLoop);
  loops.splice(2, 0, failedLoop('31-FC-900'));
  return loops.map((loop, order) => ({ ...loop, order }));
}

export function madeUnit(loops: readonly FinishedLoop[] = madeLoops()): AuditFindings {
  const provenance = { version: '1.2.3', options: {}, seed: 1 };
  return auditFindings({ loops, provenance, leftOut: [] });
}

/** So many loops: those of the made unit again and again, each time in another area and at another time. */
export function largeUnit(count: number): AuditFindings {
  const once = madeLoops();
  return madeUnit(
    Array.from({ length: count }, (_, order) => {
      const { result, signature, file } = once[order % once.length]!;
      const area = 31 + Math.floor(order / once.length);
      const loop = result.loop.replace('31-', `${area}-`);
      const later = (time: number): number => time + 1e6 * area;
      return {
        order,
        file: file.replace('31-', `${area}-`),
        result: { ...result, loop },
        signature: signature && {
          ...signature,
          from: later(signature.from),
          to: later(signature.to),
          clock: signature.clock && { ...signature.clock, starts: signature.clock.starts.map(later) },
        },
      };
    }),
  );
}
