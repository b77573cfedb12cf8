/** The answer of a valve test, or a plan for one, as short plain sentences that terminal, notebook and page all show. */
export interface TestCard {
  readonly loop: string;
  /** In a word or three what this is, e.g. `stroke test` or `proposal, not released`. */
  readonly label: string;
  /** The answer in one line. */
  readonly headline: string;
  readonly lead: string;
  /** Labelled figures with units and intervals, most wanted first. */
  readonly figures: readonly { readonly label: string; readonly value: string; readonly note: string }[];
  /** Further sentences under a title of their own, in the order to read them. */
  readonly parts: readonly { readonly title: string; readonly sentences: readonly string[] }[];
  readonly cautions: readonly string[];
}
