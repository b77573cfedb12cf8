/**
 * Colours, fonts and line widths of every figure: one place, so that a signal looks the same everywhere.
 *
 * The colours of signals differ in lightness as well as in hue and stay apart for readers who see no red or no
 * green; each stands out from white by at least 3:1 and the ink by more than 7:1. The tests hold that.
 */

export const palette: {
  /** Text, slips, dimension lines. */
  readonly ink: string;
  /** Text of second rank and reference lines. */
  readonly faint: string;
  readonly paper: string;
  readonly grid: string;
  readonly setPoint: string;
  readonly pv: string;
  readonly op: string;
  readonly travel: string;
  /** Anything that comes from the model and not from the record. */
  readonly model: string;
  /** Ground and edge of a caveat stamped on a figure. */
  readonly stampGround: string;
  readonly stampEdge: string;
} = {
  ink: '#14202b',
  faint: '#5d6670',
  paper: '#ffffff',
  grid: '#e8e5de',
  setPoint: '#7f7a70',
  pv: '#157f9e',
  op: '#9c3d14',
  travel: '#5a2a6a',
  model: '#c48810',
  stampGround: '#fdf3d7',
  stampEdge: '#c48810',
};

/** A scale of colours from 0 to 1 as Plotly reads it. */
export type ColourScale = readonly (readonly [number, string])[];

/** From early (light) to late (dark); lightness falls all the way, so it also reads in grey print. */
export const timeScale: ColourScale = [
  [0, '#dcb765'],
  [0.35, '#7ba37f'],
  [0.7, '#2f6b84'],
  [1, '#2a1747'],
];

/** From a small value (dark) to a large one (light); ink stays readable on all of it. */
export const misfitScale: ColourScale = [
  [0, '#3f97ae'],
  [0.3, '#8cc0cb'],
  [1, '#f5f3ec'],
];

/** Fonts of the reader's own machine: nothing is fetched, and a picture used as an image shows the same. */
export const fontFamily = 'sans-serif';

/** Font sizes, CSS pixels. */
export const fontSize: { readonly title: number; readonly body: number; readonly small: number } = {
  title: 15,
  body: 13,
  small: 12,
};

/** Line widths, CSS pixels. */
export const lineWidth: { readonly thin: number; readonly signal: number; readonly strong: number } = {
  thin: 1,
  signal: 1.5,
  strong: 2.5,
};

/** The colour at `position` (0..1) of a scale, mixed linearly between its stops, as `#rrggbb`. */
export function colourAt(scale: ColourScale, position: number): string {
  const place = Math.min(1, Math.max(0, position));
  const upper = Math.max(
    1,
    scale.findIndex(([stop]) => stop >= place),
  );
  const [from, low] = scale[upper - 1];
  const [to, high] = scale[upper];
  const share = (place - from) / (to - from);
  let mixed = '#';
  for (const start of [1, 3, 5]) {
    const a = Number.parseInt(low.slice(start, start + 2), 16);
    const b = Number.parseInt(high.slice(start, start + 2), 16);
    mixed += Math.round(a + share * (b - a))
      .toString(16)
      .padStart(2, '0');
  }
  return mixed;
}
