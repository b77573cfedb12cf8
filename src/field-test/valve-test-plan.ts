/** A proposal for tests of a valve on site. Plain data; nobody has released it. */
import type { FoundProcess } from '../estimate/stiction-fit';
import type { Note, Range } from '../record/loop-record';
import type { ValveTestKind } from './valve-test-reading';

/** What the user has to state; nothing of it has a default, and without all of it there is no plan. */
export interface ValveTestLimits {
  /** Lowest and highest OP that the test may reach, % of span. */
  readonly opBand: Range;
  /** Lowest and highest PV that operations agree to, unit of PV. */
  readonly pvBand: Range;
  /** Largest single step of OP, %. */
  readonly largestStep: number;
  /** Longest time for which OP may stand still in manual before somebody acts, s. */
  readonly longestHold: number;
  /** Whether the valve has a safety function, and whether it is in a trip path. */
  readonly hasSafetyFunction: boolean;
  readonly isInTripPath: boolean;
}

/** What is known of valve and loop where there is no assessment. */
export interface TypedValve {
  readonly loop: string;
  /** Dead band S and slip jump J, % of span; J null when not known. */
  readonly S: number;
  readonly J: number | null;
  /** OP and PV around which the loop runs, and PV's peak-to-peak swing. */
  readonly op: number;
  readonly pv: number;
  readonly pvSwing: number;
  readonly pvUnit: string;
  /** Period of the cycle, s; null without one. */
  readonly period: number | null;
  /** null when not known: then only a hold is proposed. */
  readonly process: FoundProcess | null;
}

/** OP goes to `op`, in one step or at `rate` %/s, and stands there for `hold` s. */
export interface PlannedMove {
  readonly op: number;
  readonly rate: number | null;
  readonly hold: number;
}

export interface PlannedTest {
  readonly kind: ValveTestKind;
  readonly title: string;
  readonly purpose: string;
  /** OP at which the controller is put in manual, %; the moves begin there and end there. */
  readonly startOp: number;
  readonly moves: readonly PlannedMove[];
  /** s in manual altogether. */
  readonly duration: number;
  /** Where PV is expected to stay if the valve is as assumed. */
  readonly expectedPv: Range;
  /** Return to automatic when PV gets here. Inside the band that was stated. */
  readonly stopPv: Range;
  /** PV movement for each size of step, once the dead band is taken up. */
  readonly stepsInPv: readonly { readonly step: number; readonly pv: number }[];
}

export type PlanRefusalCode =
  | 'safety-function'
  | 'trip-path'
  | 'split-range'
  | 'op-near-limit'
  | 'pv-near-limit'
  | 'nothing-fits';

export interface PlanRefusal {
  readonly code: PlanRefusalCode;
  readonly text: string;
}

export interface ValveTestPlan {
  readonly schema: 'stickband/valve-test-plan/1';
  readonly standing: 'proposal, not released';
  readonly loop: string;
  readonly pvUnit: string;
  readonly limits: ValveTestLimits;
  readonly basis: TypedValveBasis;
  /** In the order in which to make them. Empty when refused. */
  readonly tests: readonly PlannedTest[];
  /** Why there is no test at all; empty when there is one. */
  readonly refused: readonly PlanRefusal[];
  /** Kinds that do not fit, each with the reason, while others do. */
  readonly leftOut: readonly { readonly kind: ValveTestKind; readonly text: string }[];
  readonly stopWhen: readonly string[];
  /** To be agreed and ticked off before anything is moved. */
  readonly checkList: readonly string[];
  readonly notes: readonly Note[];
  readonly cautions: readonly string[];
}

/** What the plan was made from. S and J are the high ends of their intervals, so that the test is large enough. */
export interface TypedValveBasis extends Omit<TypedValve, 'S'> {
  readonly S: number | null;
  readonly from: 'assessment' | 'typed';
}
