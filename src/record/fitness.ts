/** What the fitness check of a record says, and what it forbids. */

/** What a check that fails takes away: any statement on a cycle, on its cause, or the numbers S and J. */
export type Forbids = 'cycle' | 'cause' | 'numbers';

export interface FitnessCheck {
  /** Stable name, e.g. `samples-per-cycle`. */
  readonly code: string;
  /** What is looked at, in plain words, e.g. `samples in a cycle`. */
  readonly title: string;
  readonly value: number | null;
  readonly unit: string;
  /** The limit in words, e.g. `at least 7`. */
  readonly limit: string;
  /** Paper or standard the limit is from (with `value from memory` where so), or `own choice: ...` with why. */
  readonly source: string;
  readonly passed: boolean;
  /** What a failure of this check takes away; empty for a check that only warns. */
  readonly forbids: readonly Forbids[];
  /** One sentence with the numbers, fit to stand alone. */
  readonly text: string;
}

export interface Fitness {
  readonly checks: readonly FitnessCheck[];
  readonly allows: { readonly cycle: boolean; readonly cause: boolean; readonly numbers: boolean };
  /** The record to ask for, as one sentence; shown with every `cannot-tell`. */
  readonly recordToAskFor: string;
}
