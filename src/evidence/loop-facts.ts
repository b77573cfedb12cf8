/** What the indicators look at: the loop's signals without their slow trend, and the cycle they share. */
import type { Cycle } from '../oscillation/cycle';
import type { LoopRecord } from '../record/loop-record';
import { removeSlowTrend } from '../signal/trend';

export interface LoopFacts {
  readonly record: LoopRecord;
  readonly opCycle: Cycle;
  readonly pvCycle: Cycle;
  /** Period of the cycle in samples, of OP where it has one, else of PV. */
  readonly period: number;
  /** OP, % of span, and PV, engineering units, each without its slow trend over two periods. */
  readonly op: Float64Array;
  readonly pv: Float64Array;
  /** SP - PV when SP was logged, else PV turned round; slow trend removed. */
  readonly error: Float64Array;
  /** Seed of everything random. */
  readonly seed: number;
}

/** null when neither OP nor PV cycles: then no indicator has anything to look at. */
export function loopFacts(
  record: LoopRecord,
  opCycle: Cycle,
  pvCycle: Cycle,
  seed: number,
): LoopFacts | null {
  const seconds = opCycle.period ?? pvCycle.period;
  if (seconds === null) return null;
  const period = seconds / record.samplePeriod;
  const window = Math.min(record.op.length, Math.max(1, Math.round(2 * period)));
  const { sp } = record;
  const deviation = record.pv.map((value, i) => (sp === null ? -value : sp[i]! - value));
  return {
    record,
    opCycle,
    pvCycle,
    period,
    op: removeSlowTrend(record.op, window),
    pv: removeSlowTrend(record.pv, window),
    error: removeSlowTrend(deviation, window),
    seed,
  };
}
