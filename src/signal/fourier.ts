/// <reference path="./untyped-packages.d.ts" />
/** Discrete Fourier transform of real signals of any length, and the power spectrum made from it. */
import FFT from 'fft.js';
import { WrongUse } from '../errors';
import { checkSamplePeriod } from './sample-period';

/** Complex values of the frequencies 0, 1, ... floor(n / 2) over n samples. */
export interface HalfSpectrum {
  readonly re: Float64Array;
  readonly im: Float64Array;
}

export interface PowerSpectrum {
  /** 1/s, from 0 to half the sampling frequency. */
  readonly frequency: Float64Array;
  /** Squared unit of the signal; the sum over all frequencies is the mean square of the signal. */
  readonly power: Float64Array;
}

/** Smallest power of two that is at least `length`. */
export function nextPowerOfTwo(length: number): number {
  let size = 1;
  while (size < length) size *= 2;
  return size;
}

/**
 * Forward transform, X(k) = sum over i of x(i) exp(-2 pi j i k / n), for k = 0 to floor(n / 2). The length is
 * used exactly as it is: a record of whole cycles shows sharp lines. Powers of two go straight to the fast
 * transform, other lengths through that of a chirp (Bluestein 1970, IEEE Trans. Audio Electroacoust.
 * 18:451-455).
 *
 * @throws WrongUse without values
 */
export function forwardTransform(values: Float64Array): HalfSpectrum {
  const n = values.length;
  if (n === 0) throw new WrongUse('A Fourier transform needs at least one value. Received none.');
  if (n >= 4 && n === nextPowerOfTwo(n)) return packedTransform(values);
  const full = complexTransform(values, null);
  const bins = Math.floor(n / 2) + 1;
  return { re: full.re.slice(0, bins), im: full.im.slice(0, bins) };
}

/**
 * The real signal of `length` samples that has this half spectrum: undoes {@link forwardTransform}. Imaginary
 * parts at frequency 0 and, for an even length, at half the sampling frequency are not used.
 *
 * @throws WrongUse when the spectrum does not have floor(length / 2) + 1 values
 */
export function inverseTransform(spectrum: HalfSpectrum, length: number): Float64Array {
  const bins = Math.floor(length / 2) + 1;
  if (spectrum.re.length !== bins || spectrum.im.length !== bins || length < 1) {
    throw new WrongUse(
      `A signal of ${length} samples has a half spectrum of ${bins} values. Received ${spectrum.re.length} real and ${spectrum.im.length} imaginary parts.`,
    );
  }
  if (length >= 4 && length === nextPowerOfTwo(length)) return packedInverse(spectrum, length);
  // The inverse is the forward transform of the conjugate, conjugated; the result is real.
  const re = new Float64Array(length);
  const im = new Float64Array(length);
  for (let k = 0; k < bins; k++) {
    const mirrored = (length - k) % length;
    const own = mirrored === k;
    re[k] = spectrum.re[k]!;
    im[k] = own ? 0 : -spectrum.im[k]!;
    re[mirrored] = re[k]!;
    im[mirrored] = own ? 0 : spectrum.im[k]!;
  }
  return complexTransform(re, im).re.map((value) => value / length);
}

/**
 * One-sided power spectrum of the signal as it is (no window, nothing taken off): floor(n / 2) + 1 values,
 * with the power of negative frequencies added to the positive ones.
 *
 * @param samplePeriod s
 * @throws WrongUse without values or with a sample period that is not above 0
 */
export function powerSpectrum(values: Float64Array, samplePeriod: number): PowerSpectrum {
  checkSamplePeriod(samplePeriod);
  const n = values.length;
  const { re, im } = forwardTransform(values);
  const frequency = re.map((_, k) => k / (n * samplePeriod));
  const power = re.map((real, k) => {
    const once = k === 0 || 2 * k === n;
    return ((once ? 1 : 2) * (real * real + im[k]! * im[k]!)) / (n * n);
  });
  return { frequency, power };
}

/**
 * A real signal of 2 m samples as one complex transform of m: even samples are the real, odd ones the
 * imaginary part, and the two spectra are told apart by their symmetry (Cooley, Lewis, Welch 1970, J. Sound
 * Vib. 12:315-337).
 */
function packedTransform(values: Float64Array): HalfSpectrum {
  const m = values.length / 2;
  const packed = transformed(values);
  const re = new Float64Array(m + 1);
  const im = new Float64Array(m + 1);
  for (let k = 0; k <= m; k++) {
    const here = 2 * (k % m);
    const there = 2 * ((m - k) % m);
    const evenRe = (packed[here]! + packed[there]!) / 2;
    const evenIm = (packed[here + 1]! - packed[there + 1]!) / 2;
    const oddRe = (packed[here + 1]! + packed[there + 1]!) / 2;
    const oddIm = (packed[there]! - packed[here]!) / 2;
    const c = Math.cos((Math.PI * k) / m);
    const s = Math.sin((Math.PI * k) / m);
    re[k] = evenRe + c * oddRe + s * oddIm;
    im[k] = evenIm + c * oddIm - s * oddRe;
  }
  return { re, im };
}

/** Undoes {@link packedTransform}. */
function packedInverse({ re, im }: HalfSpectrum, length: number): Float64Array {
  const m = length / 2;
  const packed = new Float64Array(length);
  for (let k = 0; k < m; k++) {
    const ownIm = k === 0 ? 0 : im[k]!;
    const otherIm = k === 0 ? 0 : im[m - k]!;
    const evenRe = (re[k]! + re[m - k]!) / 2;
    const evenIm = (ownIm - otherIm) / 2;
    const differenceRe = (re[k]! - re[m - k]!) / 2;
    const differenceIm = (ownIm + otherIm) / 2;
    const c = Math.cos((Math.PI * k) / m);
    const s = Math.sin((Math.PI * k) / m);
    const oddRe = c * differenceRe - s * differenceIm;
    const oddIm = c * differenceIm + s * differenceRe;
    packed[2 * k] = evenRe - oddIm;
    packed[2 * k + 1] = evenIm + oddRe;
  }
  const out = new Float64Array(length);
  plan(m).inverseTransform(out, packed);
  return out;
}

/** Full transform of a complex signal; a missing imaginary part is zero. */
function complexTransform(re: Float64Array, im: Float64Array | null): HalfSpectrum {
  const n = re.length;
  if (n === 1) return { re: Float64Array.of(re[0]!), im: Float64Array.of(im?.[0] ?? 0) };
  const size = nextPowerOfTwo(n);
  return size === n ? split(transformed(interleave(re, im, n)), n) : chirpTransform(re, im);
}

function chirpTransform(re: Float64Array, im: Float64Array | null): HalfSpectrum {
  const n = re.length;
  const size = nextPowerOfTwo(2 * n - 1);
  const { chirp, transform } = chirpOf(n, size);
  const data = new Float64Array(2 * size);
  for (let i = 0; i < n; i++) {
    const c = chirp[2 * i]!;
    const s = chirp[2 * i + 1]!;
    const b = im === null ? 0 : im[i]!;
    data[2 * i] = re[i]! * c + b * s;
    data[2 * i + 1] = b * c - re[i]! * s;
  }
  const product = transformed(data);
  for (let k = 0; k < size; k++) {
    const a = product[2 * k]!;
    const b = product[2 * k + 1]!;
    product[2 * k] = a * transform[2 * k]! - b * transform[2 * k + 1]!;
    product[2 * k + 1] = a * transform[2 * k + 1]! + b * transform[2 * k]!;
  }
  plan(size).inverseTransform(data, product);
  const out = split(data, n);
  for (let k = 0; k < n; k++) {
    const c = chirp[2 * k]!;
    const s = chirp[2 * k + 1]!;
    const a = out.re[k]!;
    const b = out.im[k]!;
    out.re[k] = a * c + b * s;
    out.im[k] = b * c - a * s;
  }
  return out;
}

interface Chirp {
  readonly n: number;
  /** exp(+j pi i^2 / n), real and imaginary part in turn. */
  readonly chirp: Float64Array;
  readonly transform: Float64Array;
}

/** The chirp of the last length is kept: the same length comes again and again. */
let lastChirp: Chirp | null = null;

function chirpOf(n: number, size: number): Chirp {
  if (lastChirp?.n === n) return lastChirp;
  const chirp = new Float64Array(2 * n);
  const around = new Float64Array(2 * size);
  for (let i = 0; i < n; i++) {
    // i^2 modulo 2 n keeps the angle exact for long records.
    const angle = (Math.PI * ((i * i) % (2 * n))) / n;
    chirp[2 * i] = Math.cos(angle);
    chirp[2 * i + 1] = Math.sin(angle);
    const mirrored = (size - i) % size;
    around[2 * i] = chirp[2 * i]!;
    around[2 * i + 1] = chirp[2 * i + 1]!;
    around[2 * mirrored] = chirp[2 * i]!;
    around[2 * mirrored + 1] = chirp[2 * i + 1]!;
  }
  lastChirp = { n, chirp, transform: transformed(around) };
  return lastChirp;
}

const plans = new Map<number, FFT>();

/** Tables of the fast transform, kept for each power of two that was asked for. */
function plan(size: number): FFT {
  let found = plans.get(size);
  if (found === undefined) {
    found = new FFT(size);
    plans.set(size, found);
  }
  return found;
}

function transformed(data: Float64Array): Float64Array {
  const out = new Float64Array(data.length);
  plan(data.length / 2).transform(out, data);
  return out;
}

function interleave(re: Float64Array, im: Float64Array | null, size: number): Float64Array {
  const data = new Float64Array(2 * size);
  for (let i = 0; i < re.length; i++) {
    data[2 * i] = re[i]!;
    if (im !== null) data[2 * i + 1] = im[i]!;
  }
  return data;
}

function split(data: Float64Array, n: number): HalfSpectrum {
  const re = new Float64Array(n);
  const im = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    re[i] = data[2 * i]!;
    im[i] = data[2 * i + 1]!;
  }
  return { re, im };
}
