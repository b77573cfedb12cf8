/** A figure as plain data: the same description serves the kernel, the page and the static picture. */

export interface Figure {
  /** Short stable name, e.g. `phase-plot`; unique on a page. */
  readonly id: string;
  readonly title: string;
  /** What to see in it, one or two sentences, shown under the figure. */
  readonly caption: string;
  /** Text alternative for a reader who cannot see it. */
  readonly alt: string;
  /** Plotly traces and layout: plain JSON, no typed arrays, no functions, only finite numbers and null. */
  readonly data: readonly object[];
  readonly layout: object;
  /** Size of the static picture, CSS pixels. */
  readonly width: number;
  readonly height: number;
}
