/**
 * Least-squares fits of one half cycle by a sine, a triangle, and the answer of a first-order process to a
 * relay.
 */
import type { HalfCycle } from './half-cycles';

/** Sum of squared residuals of a half cycle after each fit, and its number of samples. */
export interface ShapeFits {
  readonly samples: number;
  readonly sine: number;
  readonly triangle: number;
  readonly relay: number;
}

/** Shapes over 0..1 of the half cycle, zero at both ends. Triangles differ in where their tip stands. */
const tips = Array.from({ length: 17 }, (_, i) => 0.1 + 0.05 * i);
/** Time constants of the relay's process over the half cycle: from a square to almost a triangle. */
const lags = [0.02, 0.05, 0.1, 0.15, 0.22, 0.33, 0.5, 0.75, 1.1, 1.7, 2.5];

const sine = (x: number): number => Math.sin(Math.PI * x);
const triangle =
  (tip: number) =>
  (x: number): number =>
    x < tip ? x / tip : (1 - x) / (1 - tip);

/**
 * Between its zero crossings, the answer to a relay rises as 1 - exp(-x / lag) until the relay's switch gets
 * through (dead time) and then falls along -1 + (1 + peak) exp(-(x - switch) / lag), to zero at x = 1.
 */
function relay(lag: number): (x: number) => number {
  const fall = lag * Math.log(2 - Math.exp(-switchOf(lag) / lag));
  const at = 1 - fall;
  const peak = 1 - Math.exp(-at / lag);
  return (x) => (x < at ? 1 - Math.exp(-x / lag) : -1 + (1 + peak) * Math.exp(-(x - at) / lag));
}

/** Solves switch + lag log(2 - exp(-switch / lag)) = 1 by halving. */
function switchOf(lag: number): number {
  let low = 0;
  let high = 1;
  for (let i = 0; i < 50; i++) {
    const middle = (low + high) / 2;
    if (middle + lag * Math.log(2 - Math.exp(-middle / lag)) > 1) high = middle;
    else low = middle;
  }
  return (low + high) / 2;
}

const triangles = tips.map(triangle);
const relays = lags.map(relay);

/** Each shape is scaled to fit; triangle and relay also take their best form. */
export function fitShapes(values: Float64Array, { from, to }: HalfCycle): ShapeFits {
  const first = Math.ceil(from);
  const last = Math.floor(to);
  let squares = 0;
  for (let i = first; i <= last; i++) squares += values[i]! ** 2;
  const left = (shape: (x: number) => number): number => {
    let product = 0;
    let power = 0;
    for (let i = first; i <= last; i++) {
      const y = shape((i - from) / (to - from));
      product += y * values[i]!;
      power += y * y;
    }
    return power > 0 ? Math.max(0, squares - product ** 2 / power) : squares;
  };
  return {
    samples: last - first + 1,
    sine: left(sine),
    triangle: Math.min(...triangles.map(left)),
    relay: Math.min(...relays.map(left)),
  };
}

/** Sums of the mean squared misfits over half cycles, each scaled by its samples. */
export function sumOfFits(values: Float64Array, halves: readonly HalfCycle[]): Omit<ShapeFits, 'samples'> {
  let sineSum = 0;
  let triangleSum = 0;
  let relaySum = 0;
  for (const half of halves) {
    const fits = fitShapes(values, half);
    sineSum += fits.sine / fits.samples;
    triangleSum += fits.triangle / fits.samples;
    relaySum += fits.relay / fits.samples;
  }
  return { sine: sineSum, triangle: triangleSum, relay: relaySum };
}
