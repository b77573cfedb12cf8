/** What was read from a test of the valve: the plain data that terminal, notebook, page and JSON all show. */
import type { Estimate } from '../estimate/stiction-fit';
import type { Note } from '../record/loop-record';

/** What was done: controller in manual at constant OP, OP in steps, or OP in ramps. */
export type ValveTestKind = 'hold' | 'step' | 'stroke';

/** One step of the command and what travel (or, without travel, PV) made of it. */
export interface StepRead {
  /** s since the start of the record. */
  readonly time: number;
  /** Command before and after, % of span. */
  readonly from: number;
  readonly to: number;
  /** Whether the command turned back with this step. */
  readonly reversal: boolean;
  /** Whether a move was seen that noise does not explain. */
  readonly moved: boolean;
  /** Lasting change of what was watched, % of travel or unit of PV. */
  readonly change: Estimate | null;
  /** Time from the step to the first movement, s. */
  readonly deadTime: Estimate | null;
  /** Time from the step to 63.2 % and to 86.5 % of the lasting change, dead time included, s. */
  readonly T63: Estimate | null;
  readonly T86: Estimate | null;
  /** How far the response went past its lasting change, % of that change. */
  readonly overshoot: Estimate | null;
  /** Why something of the above was not read; '' when all was. */
  readonly note: string;
}

/**
 * The result of reading one valve test. Every number is finite; what could not be read is null, and a note says why.
 * Intervals are at level 0.9. A dead band or resolution that was only bracketed by the steps that were made has the
 * bracket as its interval, so that `high` bounds it from above.
 */
export interface ValveTestReading {
  readonly schema: 'stickband/valve-test/1';
  readonly kind: ValveTestKind;
  /** Range of the command on reversal without a movement, % of span (ISA-51.1). */
  readonly deadBand: Estimate | null;
  /** Smallest step of the command in one direction that moves what is watched, % of span. */
  readonly resolution: Estimate | null;
  /** Largest separation of the traverses up and down less the dead band, % of travel (ISA-51.1, IEC 61298-2). */
  readonly hysteresis: Estimate | null;
  readonly steps: readonly StepRead[];
  /** Of the variant of the two-parameter valve that comes closer, % of span; a note gives those of the other one. */
  readonly S: Estimate | null;
  readonly J: Estimate | null;
  /** For a hold, one has the code `cycle-died`, `cycle-stayed` or `cycle-not-decided`. */
  readonly notes: readonly Note[];
  readonly cautions: readonly string[];
}
