/** A cycle found (or not) in one evenly sampled signal. */

export interface SingleCycle {
  /** First and last moment of the cycle, s since the start of the record. */
  readonly from: number;
  readonly to: number;
  /** Half the distance between the highest and the lowest value in it, unit of the signal. */
  readonly amplitude: number;
}

export interface Cycle {
  readonly present: boolean;
  /** Why it is or is not called a cycle, one sentence with the numbers. */
  readonly why: string;
  /** s; null when not present. */
  readonly period: number | null;
  /**
   * Regularity r of Thornhill, Huang, Zhang 2003 (r > 1 is regular); null when it cannot be had. A cycle that is
   * present with less has a steady swing and an uneven period.
   */
  readonly regularity: number | null;
  /** Number of whole cycles in the record. */
  readonly cycles: number;
  /** Further periods with peaks of their own, s, strongest first; harmonics of the main one left out. */
  readonly others: readonly number[];
  /** Median half swing over the single cycles, unit of the signal. */
  readonly amplitude: number | null;
  /** Share of odd harmonics (3, 5, 7) in the power of fundamental and odd harmonics, 0..1. */
  readonly oddHarmonicShare: number | null;
  /** The main peak's share of the signal's power after trend removal, 0..1. */
  readonly powerShare: number | null;
  readonly single: readonly SingleCycle[];
  /** Autocorrelation of the filtered signal, lag in s, for the figure. */
  readonly autocorrelation: { readonly lag: Float64Array; readonly value: Float64Array };
  /** One-sided power spectrum of the signal after trend removal; frequency in 1/s. */
  readonly spectrum: { readonly frequency: Float64Array; readonly power: Float64Array };
}
