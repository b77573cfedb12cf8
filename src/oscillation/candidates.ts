/** Periods at which the power of a signal gathers, before it is asked whether they are regular cycles. */
import { forwardTransform, nextPowerOfTwo } from '../signal/fourier';
import { peaksOf } from '../signal/peaks';
import { removeLine } from '../signal/trend';

export interface Candidate {
  /** Cycles a sample at the centre of gravity of the band. */
  readonly frequency: number;
  /** Power of the band around it, for comparing candidates of one signal. */
  readonly power: number;
  /** Power of that band over that of the equally wide band below or above it, whichever is stronger. */
  readonly contrast: number;
}

/** A known cycle's power is taken to lie within this factor of its frequency. */
const knownFactor = 1.4;
/**
 * Bands reach from frequency / 1.2 to frequency x 1.2, so that a cycle whose period wanders stays one band.
 */
const bandFactor = 1.2;
/**
 * The neighbours lie this factor below and above: clear of the band itself, and short of a third harmonic.
 */
const neighbourFactor = 2.2;
const bandsPerOctave = 24;

/**
 * Candidates from `slowest` to `fastest` (cycles a sample), strongest band first. The power is summed in
 * bands of equal *relative* width: in these, white noise rises, a random walk falls, and only a real peak
 * stands out on both sides.
 *
 * @param values samples, not all equal
 * @param known frequency of a cycle already found, cycles a sample: as a neighbour it hides no other
 */
export function cycleCandidates(
  values: Float64Array,
  slowest: number,
  fastest: number,
  known: number | null = null,
): Candidate[] {
  const n = values.length;
  const size = nextPowerOfTwo(2 * n);
  // The taper keeps a drift, whose ends do not meet, from leaking into the bands.
  const tapered = new Float64Array(size);
  tapered.set(
    removeLine(values).map((value, i) => value * (0.5 - 0.5 * Math.cos((2 * Math.PI * (i + 0.5)) / n))),
  );
  const { re, im } = forwardTransform(tapered);
  const upTo = new Float64Array(re.length + 1);
  const weighted = new Float64Array(re.length + 1);
  for (let k = 0; k < re.length; k++) {
    const power = re[k]! ** 2 + im[k]! ** 2;
    upTo[k + 1] = upTo[k]! + power;
    weighted[k + 1] = weighted[k]! + k * power;
  }
  const between = (sums: Float64Array, low: number, high: number): number =>
    valueAt(sums, high * size) - valueAt(sums, low * size);
  const band = (frequency: number): number => between(upTo, frequency / bandFactor, frequency * bandFactor);
  const neighbour = (frequency: number): number => {
    if (known === null) return band(frequency);
    const low = Math.max(frequency / bandFactor, known / knownFactor);
    const high = Math.min(frequency * bandFactor, known * knownFactor);
    return band(frequency) - (high > low ? between(upTo, low, high) : 0);
  };

  const step = 2 ** (1 / bandsPerOctave);
  const count = Math.max(0, Math.ceil(Math.log(fastest / slowest) / Math.log(step)) + 3);
  const centres = new Float64Array(count).map((_, i) => (slowest / step) * step ** i);
  const powers = centres.map(band);
  return peaksOf(powers).map((i) => {
    const power = powers[i]!;
    const low = centres[i]! / bandFactor;
    const high = centres[i]! * bandFactor;
    const frequency = between(weighted, low, high) / power / size;
    const around = Math.max(neighbour(frequency / neighbourFactor), neighbour(frequency * neighbourFactor));
    return { frequency, power, contrast: around > 0 ? power / around : Number.MAX_VALUE };
  });
}

/** Cumulative sums read at a fractional bin; each bin reaches half a bin to either side of its frequency. */
function valueAt(sums: Float64Array, bin: number): number {
  const position = Math.min(Math.max(bin + 0.5, 0), sums.length - 1);
  const below = Math.min(Math.floor(position), sums.length - 2);
  return sums[below]! + (position - below) * (sums[below + 1]! - sums[below]!);
}
