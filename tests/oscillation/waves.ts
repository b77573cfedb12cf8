/** Test signals: cycles of known shape and period, and signals that do not cycle. All seeded. */
import { type SeededRandom, seededRandom } from '../../src/signal/random';

export type Shape = 'sine' | 'triangle' | 'square';

const unitWave: Record<Shape, (turn: number) => number> = {
  sine: (turn) => Math.sin(2 * Math.PI * turn),
  triangle: (turn) => (turn < 0.25 ? 4 * turn : turn < 0.75 ? 2 - 4 * turn : 4 * turn - 4),
  square: (turn) => (turn < 0.5 ? 1 : -1),
};

export interface WaveOptions {
  /** Relative standard deviation of the period from cycle to cycle. */
  readonly wander?: number;
  /** Standard deviation of white noise; amplitude is 1. */
  readonly noise?: number;
  /** Standard deviation of a random walk's step. */
  readonly walk?: number;
  readonly seed?: number;
}

/** Amplitude 1, period in samples. */
export function wave(shape: Shape, samples: number, period: number, options: WaveOptions = {}): Float64Array {
  const { wander = 0, noise = 0, walk = 0, seed = 1 } = options;
  const random = seededRandom(seed);
  let turn = 0;
  let step = 1 / period;
  let drift = 0;
  return new Float64Array(samples).map(() => {
    turn += step;
    if (turn >= 1) {
      turn -= 1;
      step = 1 / (period * Math.max(0.3, 1 + wander * random.normal()));
    }
    drift += walk * random.normal();
    return unitWave[shape](turn) + noise * random.normal() + drift;
  });
}

/** Auto-regressive noise of first order: 0 is white, 1 a random walk. */
export function noiseOf(samples: number, pole: number, seed: number): Float64Array {
  const random = seededRandom(seed);
  let y = 0;
  return new Float64Array(samples).map(() => {
    y = pole * y + random.normal();
    return y;
  });
}

/** White noise through a second-order resonance, as disturbances look in a loop of this damping. */
export function resonance(samples: number, damping: number, period: number, seed: number): Float64Array {
  const random: SeededRandom = seededRandom(seed);
  const w = (2 * Math.PI) / period;
  const pole = Math.exp(-damping * w);
  const turn = 2 * pole * Math.cos(w * Math.sqrt(1 - damping * damping));
  let y1 = 0;
  let y2 = 0;
  return new Float64Array(samples).map(() => {
    const y = turn * y1 - pole * pole * y2 + random.normal();
    y2 = y1;
    y1 = y;
    return y;
  });
}
