/**
 * Pairs of what OP and PV do at a time: rising, falling or steady. In a fast loop with a sticking valve, PV
 * stands still while OP rises or falls, and then follows it.
 */
import { standardDeviation } from '../signal/statistics';
import { threeDigits } from '../signal/three-digits';
import { slowTrend } from '../signal/trend';
import { firstReason, needsBothCycles, needsShape } from './applies';
import type { Indicator } from './indicator';

/** A step below this share of the steps' standard deviation counts as steady (own choice). */
const steadyShare = 0.5;

/**
 * Per step: 1 rising, -1 falling, 0 steady. Steps are a twelfth of the period, as noise allows no single
 * samples.
 */
export function movements(values: Float64Array, period: number): Int8Array {
  const stride = Math.max(1, Math.floor(period / 12));
  const smooth = slowTrend(values, stride);
  const steps = new Float64Array(Math.max(0, Math.floor((values.length - 1) / stride))).map(
    (_, i) => smooth[(i + 1) * stride]! - smooth[i * stride]!,
  );
  const limit = steadyShare * standardDeviation(steps);
  return Int8Array.from(steps, (step) => (step > limit ? 1 : step < -limit ? -1 : 0));
}

/**
 * Share of the time, without that in which both are steady, that PV stands still while OP moves, counting
 * only stretches after which PV goes the way of OP (or OP and PV go on as they were at the end of the
 * record).
 */
export function stuckShare(op: Int8Array, pv: Int8Array): number | null {
  let moving = 0;
  let stuck = 0;
  for (let i = 0; i < op.length; ) {
    let end = i + 1;
    while (end < op.length && op[end] === op[i] && pv[end] === pv[i]) end++;
    const length = end - i;
    if (op[i] !== 0 || pv[i] !== 0) moving += length;
    const follows = end === op.length || pv[end] === op[i];
    if (op[i] !== 0 && pv[i] === 0 && follows) stuck += length;
    i = end;
  }
  return moving > 0 ? stuck / moving : null;
}

export const shapePairs: Indicator = {
  name: 'pairs of OP and PV shapes',
  threshold: 'above 0.25: stiction; else not',
  source:
    'Yamashita 2006, Control Eng. Practice 14:503-510; threshold: value from memory; when a signal counts as steady: own choice',
  skips: (facts) =>
    firstReason(
      facts.record.service === 'flow'
        ? null
        : `It holds for fast loops only (flow); the service of this one is ${facts.record.service}.`,
      needsBothCycles(facts),
      needsShape(facts),
    ),
  evaluate({ op, pv, period }) {
    const value = stuckShare(movements(op, period), movements(pv, period));
    if (value === null) return 'Neither OP nor PV moves.';
    return {
      value,
      says: value > 0.25 ? 'stiction' : 'not',
      why: `PV stands still while OP moves, and then follows it, in ${threeDigits(100 * value)} % of the time in which anything moves.`,
    };
  },
};
