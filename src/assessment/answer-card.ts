/** The answer to one loop as short plain sentences, made once and shown by terminal, notebook and page alike. */
import type { NextStep } from './assessment';

export type Decision = 'repair' | 'retune' | 'look-outside' | 'get-better-data' | 'nothing-to-do';

export interface AnswerCard {
  readonly loop: string;
  readonly decision: Decision;
  /** One line that says what to do, e.g. `Have the final control assembly of 31-FC-104 checked and repaired.` */
  readonly decisionLine: string;
  /** Cause and confidence in one sentence. */
  readonly cause: string;
  readonly reasons: readonly string[];
  readonly ruledOut: readonly string[];
  /** Labelled figures with units and intervals, digits already fitted to the uncertainty, most wanted first. */
  readonly figures: readonly { readonly label: string; readonly value: string; readonly note: string }[];
  /** The test that decides or confirms, with its caution. */
  readonly decidingTest: NextStep | null;
  /** A paragraph to copy into a work request; '' when no work is asked for. */
  readonly workRequest: string;
  /** The record in one sentence: time covered, samples, fitness. */
  readonly record: string;
  readonly cautions: readonly string[];
}
