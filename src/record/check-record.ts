/** Says what a record is fit for, before any verdict: each check with its limit, where that is from, and what it forbids. */
import type { Cycle } from '../oscillation/cycle';
import { findCycle } from '../oscillation/find-cycle';
import { type ControllerReading, readController } from '../process/read-controller';
import { checked } from './checked';
import { controllerChecks } from './controller-checks';
import type { Fitness } from './fitness';
import type { LoopRecord } from './loop-record';
import { samplingChecks } from './sampling-checks';
import { signalChecks } from './signal-checks';

/** What is known already; what is left out is found here. */
export interface KnownFacts {
  readonly opCycle?: Cycle;
  readonly pvCycle?: Cycle;
  /** null: read, and none was found. */
  readonly controller?: ControllerReading | null;
}

/** The record to ask for, shown with every `cannot-tell`. */
export const recordToAskFor =
  'Ask for raw values of SP, PV, OP and controller mode (and valve travel if it is measured), without compression, exception reporting or interpolation, in automatic, with at least 20 samples in a cycle and at least 20 cycles.';

/**
 * Checks a record. Nothing is changed or thrown away: a failed check says what may not be concluded, a check that only
 * warns forbids nothing.
 */
export function checkRecord(record: LoopRecord, facts: KnownFacts = {}): Fitness {
  const { samplePeriod } = record;
  const facing = checked(
    record,
    facts.opCycle ?? findCycle(record.op, samplePeriod),
    facts.pvCycle ?? findCycle(record.pv, samplePeriod),
    facts.controller === undefined
      ? readController(record.sp, record.pv, record.op, samplePeriod)
      : facts.controller,
  );
  const checks = [...samplingChecks(facing), ...signalChecks(facing), ...controllerChecks(facing)];
  const allowed = (what: 'cycle' | 'cause' | 'numbers'): boolean =>
    checks.every(({ passed, forbids }) => passed || !forbids.includes(what));
  return {
    checks,
    allows: { cycle: allowed('cycle'), cause: allowed('cause'), numbers: allowed('numbers') },
    recordToAskFor,
  };
}
