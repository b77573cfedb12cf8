/**
 * Power spectrum of one signal on a grid of frequencies that is the same for every loop, and how alike two of them are.
 */
import { powerSpectrum } from '../signal/fourier';
import { removeLine } from '../signal/trend';

/** Bands of the grid in each doubling of the frequency: 2.9 % wide, finer than 20 cycles tell apart (own choice). */
export const bandsPerOctave = 24;

export interface ReducedSpectrum {
  /** Number of the first band: band b reaches from 2^(b/24) to 2^((b+1)/24) per second. */
  readonly firstBand: number;
  /** Share of the signal's power in each band, from the first on; they add up to 1, or all are 0 for a dead signal. */
  readonly shares: readonly number[];
}

/**
 * The spectrum of a signal without mean and straight line, under a Hann window (so that drift does not spread over all
 * frequencies), each of its lines spread evenly over its own width and counted into the bands.
 *
 * @param samplePeriod s
 */
export function reducedSpectrum(values: Float64Array, samplePeriod: number): ReducedSpectrum {
  const n = values.length;
  if (n < 4) return { firstBand: 0, shares: [] };
  const windowed = removeLine(values).map(
    (value, i) => value * (0.5 - 0.5 * Math.cos((2 * Math.PI * i) / n)),
  );
  const { power } = powerSpectrum(windowed, samplePeriod);
  const width = 1 / (n * samplePeriod);
  // before[k]: power below the edge (k + 1/2) width; what lies below half a line is the mean and left out.
  const before = new Float64Array(power.length);
  for (let k = 1; k < power.length; k++) before[k] = before[k - 1]! + power[k]!;
  const total = before[power.length - 1]!;
  const below = (frequency: number): number => {
    const at = Math.min(Math.max(0, frequency / width - 0.5), power.length - 1);
    const k = Math.min(Math.floor(at), power.length - 2);
    return before[k]! + (at - k) * (before[k + 1]! - before[k]!);
  };
  const firstBand = bandOf(0.5 * width);
  const lastBand = bandOf((power.length - 0.5) * width);
  const shares = Array.from({ length: lastBand - firstBand + 1 }, (_, i) => {
    const share = total > 0 ? (below(edge(firstBand + i + 1)) - below(edge(firstBand + i))) / total : 0;
    return Math.round(share * 1e6) / 1e6;
  });
  return { firstBand, shares };
}

/** Frequency, 1/s, at the lower end of a band. */
export function edge(band: number): number {
  return 2 ** (band / bandsPerOctave);
}

function bandOf(frequency: number): number {
  return Math.floor(bandsPerOctave * Math.log2(frequency));
}
