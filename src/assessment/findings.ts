/** Everything one walk over a loop found: the assessment and what it was made from, for figures and tables. */
import type { StictionResult } from '../estimate/stiction-fit';
import type { Cycle } from '../oscillation/cycle';
import type { Fitness } from '../record/fitness';
import type { LoopRecord } from '../record/loop-record';
import type { Assessment } from './assessment';

export interface Findings {
  readonly assessment: Assessment;
  readonly record: LoopRecord;
  readonly fitness: Fitness;
  /** The cycle of OP and that of PV. */
  readonly opCycle: Cycle;
  readonly pvCycle: Cycle;
  readonly stiction: StictionResult;
}
