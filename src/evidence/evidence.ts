/** What one indicator says of a loop: one row of the evidence. */
export interface Evidence {
  readonly indicator: string;
  /** null when skipped. */
  readonly value: number | null;
  /** The rule in words, e.g. `2/3 and more: stiction; up to 1/3: not`. */
  readonly threshold: string;
  readonly says: 'stiction' | 'not' | 'undecided' | 'skipped';
  /** One sentence with the numbers; when skipped, the reason. */
  readonly why: string;
  /** Paper, and whether its threshold was recalled (`value from memory`) or is an own choice. */
  readonly source: string;
}
