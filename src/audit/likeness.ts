/** How alike the cycles of two loops are: by their whole spectra, and by whether their cycles keep step. */
import { bandsPerOctave, type ReducedSpectrum } from './reduced-spectrum';
import type { CycleClock, LoopSignature } from './signature';

/**
 * What is slower than this many cycles of the slower loop is drift and does not count (own choice: the fundamental and
 * half its frequency count).
 */
const slowestCycles = 2.5;
/**
 * Triangle over +-2 bands, 6 % to either side: lines of records of different lengths become equally wide (own choice).
 */
const blur = [1, 2, 3, 2, 1] as const;

/**
 * Index of power spectral correlation, 0 (nothing in common) to 1 (equal in shape): sum of p q over the root of sum of
 * p^2 times sum of q^2, over all frequencies that both records show (Tangirala, Shah, Thornhill 2005, J. Process
 * Control 15:931-941; formula: value from memory). Here on bands of equal ratio instead of lines of one transform, so
 * that other sample periods and lengths compare (own choice).
 *
 * @param slowest frequency below which nothing counts, 1/s
 */
export function spectralLikeness(a: ReducedSpectrum, b: ReducedSpectrum, slowest: number): number {
  const first = Math.max(a.firstBand, b.firstBand, Math.ceil(bandsPerOctave * Math.log2(slowest)));
  const end = Math.min(a.firstBand + a.shares.length, b.firstBand + b.shares.length);
  let product = 0;
  let squareA = 0;
  let squareB = 0;
  for (let band = first; band < end; band++) {
    const p = blurredShare(a, band);
    const q = blurredShare(b, band);
    product += p * q;
    squareA += p * p;
    squareB += q * q;
  }
  return squareA > 0 && squareB > 0 ? product / Math.sqrt(squareA * squareB) : 0;
}

function blurredShare({ firstBand, shares }: ReducedSpectrum, band: number): number {
  let sum = 0;
  for (let k = 0; k < blur.length; k++) sum += blur[k]! * (shares[band - firstBand + k - 2] ?? 0);
  return sum / 9;
}

export interface Step {
  /** 0 (the phase between them takes all values) to 1 (always the same). */
  readonly kept: number;
  /** Mean phase of the second after the first, in cycles, -0.5 to 0.5: above 0 it comes later, if by less than half a cycle. */
  readonly lag: number;
}

/**
 * Whether two cycles keep step while both were logged: length and angle of the mean of exp(2 pi j difference in phase)
 * over the starts of both (mean phase coherence, Mormann, Lehnertz, David, Elger 2000, Physica D 144:358-369; formula:
 * value from memory). Two cycles of equal period that have nothing to do with each other drift apart.
 *
 * @param fewest cycles that both must show at the same time
 * @returns null with fewer
 */
export function keepingStep(a: CycleClock, b: CycleClock, fewest: number): Step | null {
  const phases = [...phasesAt(a.starts, b), ...phasesAt(b.starts, a).map((phase) => -phase)];
  if ((phases.length / 2) * Math.max(a.every, b.every) < fewest) return null;
  const turn = (of: (angle: number) => number): number =>
    phases.reduce((sum, phase) => sum + of(2 * Math.PI * phase), 0) / phases.length;
  const re = turn(Math.cos);
  // A phase of b above 0 where a starts: b started before, so it is ahead.
  const im = -turn(Math.sin);
  return { kept: Math.hypot(re, im), lag: Math.atan2(im, re) / (2 * Math.PI) };
}

/** How far a clock is into its cycle at each of these moments, in cycles; moments outside its record are left out. */
function phasesAt(moments: readonly number[], { starts, every }: CycleClock): number[] {
  const phases: number[] = [];
  let k = 0;
  for (const moment of moments) {
    while (k + 1 < starts.length && starts[k + 1]! <= moment) k++;
    if (k + 1 >= starts.length || starts[k]! > moment) continue;
    phases.push((every * (moment - starts[k]!)) / (starts[k + 1]! - starts[k]!));
  }
  return phases;
}

/** Cycles that two loops must show at the same time before anything is said of their sharing one (own choice). */
export const fewestCommonCycles = 8;

/** Cycles whose periods lie further apart than this factor cannot keep step, whatever the phases say (own choice). */
const widestPeriodRatio = 1.3;

/**
 * One figure for both: spectral likeness times step kept; 0 without a cycle, with periods far apart, or without
 * {@link fewestCommonCycles} cycles at the same time, as then nothing shows that the cycle is shared.
 */
export function likeness(a: LoopSignature, b: LoopSignature): number {
  const both = cyclesOfBoth(a, b);
  if (both === null) return 0;
  const ratio = both.a.period / both.b.period;
  if (ratio > widestPeriodRatio || ratio < 1 / widestPeriodRatio) return 0;
  const spectral = spectralLikeness(a.spectrum, b.spectrum, both.slowest);
  // Step is dear to look at, and cannot mend a spectrum that has little in common.
  if (spectral < 0.2) return 0;
  return spectral * (keepingStep(both.a, both.b, fewestCommonCycles)?.kept ?? 0);
}

/** The clocks of two loops that cycle, and the frequency below which their spectra are not compared. */
export function cyclesOfBoth(
  a: LoopSignature,
  b: LoopSignature,
): { readonly a: CycleClock; readonly b: CycleClock; readonly slowest: number } | null {
  if (a.clock === null || b.clock === null) return null;
  const slowest = 1 / (slowestCycles * Math.max(a.clock.period, b.clock.period));
  return { a: a.clock, b: b.clock, slowest };
}
