/** Says whether a signal cycles, how fast, how large and how regularly. */
import { WrongUse } from '../errors';
import { autocorrelation } from '../signal/autocorrelation';
import { powerSpectrum } from '../signal/fourier';
import { checkSamplePeriod } from '../signal/sample-period';
import { median, quantile } from '../signal/statistics';
import { threeDigits } from '../signal/three-digits';
import { removeLine, removeSlowTrend } from '../signal/trend';
import { type Candidate, cycleCandidates } from './candidates';
import type { Cycle, SingleCycle } from './cycle';
import { oddHarmonicShare } from './odd-harmonics';
import { largestRegularity, type Regularity, regularityAt } from './regularity';
import { cycleStarts, singleCycles } from './single-cycles';
import { type SteadySwing, steadySwing } from './steady-swing';

/**
 * What a cycle must have. r > 1 is the paper's rule (see regularity.ts); filtered noise and drifting records
 * pass it so often that more is asked for. The rest are own choices, set so that white and coloured noise,
 * random walks and well-damped loops (damping 0.4 and more) rarely pass while a stick-slip cycle whose period
 * wanders by a fifth, a sine in noise of its own size and a cycle on a strong drift do.
 */
const rule = {
  regularity: 1,
  /** Cycles in the record. */
  cycles: 5,
  /** Equal cycles that would carry its power, and their share of all: a swing that dies out has few. */
  weightyCycles: 3.5,
  weightyShare: 0.2,
  /** Share of the power after the slow trend is off. */
  powerShare: 0.1,
};

/**
 * How far a peak must stand above its neighbours: 9 times when 0.4 of a cycle comes back in the next, 1.5
 * times when all of it does. Noise can do the one or the other by chance, but hardly both.
 */
function neededContrast(persistence: number): number {
  return 30 * Math.exp(-3 * Math.max(0, persistence));
}

/**
 * A further period has at least this share of the main one's power: a fifth of its amplitude (own choice).
 */
const furtherPower = 0.04;
/**
 * Fewest samples: five cycles of seven (Thornhill 2005, value from memory: below seven the shape is lost).
 */
const fewestSamples = 35;
/** A cycle of fewer samples than this is not told from alternating noise (own choice). */
const shortestPeriod = 4;
/** Candidates looked at, strongest first; weaker ones matter to nobody (own choice). */
const mostCandidates = 6;
/** The power within this factor of the frequency belongs to the peak. */
const peakFactor = 1.3;
/**
 * A period this close to an integer fraction of the main one, relatively, can be its harmonic (own choice).
 */
const harmonicTolerance = 0.06;
/** Two periods closer than this factor are not told apart: their bands overlap. */
const skirtFactor = 1.6;

interface Found {
  readonly candidate: Candidate;
  /** The signal without its slow trend over two periods. */
  readonly detrended: Float64Array;
  readonly regularity: Regularity | null;
  readonly powerShare: number;
  readonly single: readonly SingleCycle[];
  /** What it lacks, as clauses; empty when it is a cycle (whatever its share of the power). */
  readonly lacks: readonly string[];
}

/**
 * Finds the cycle of an evenly sampled signal. Candidates are the peaks of the spectrum; each is judged by
 * the regularity of Thornhill, Huang and Zhang (2003) and further conditions (stated in `why` when they
 * fail). The strongest that passes is the cycle, weaker ones are `others`. Where none passes, a cycle of
 * steady swing and uneven period is looked for (steady-swing.ts); its `period` is the median length of its
 * cycles.
 *
 * Limits: a cycle of less than four samples, or with fewer than five repeats in the record, is not found. Two
 * cycles whose periods differ by less than a factor of 1.6 count as one.
 *
 * @param values samples, all finite, any unit
 * @param samplePeriod s
 * @throws WrongUse when a value is not finite or the sample period is not above 0
 */
export function findCycle(values: Float64Array, samplePeriod: number): Cycle {
  checkSamplePeriod(samplePeriod);
  const bad = values.findIndex((value) => !Number.isFinite(value));
  if (bad >= 0) {
    throw new WrongUse(
      `A cycle is looked for in finite numbers only. Sample ${bad} is ${values[bad]}. Fill or cut such samples first.`,
    );
  }
  const n = values.length;
  if (n < fewestSamples) {
    return noCycle(
      values,
      samplePeriod,
      `${n} samples are too few to tell a cycle: ${fewestSamples} (five cycles of seven samples) are the least.`,
    );
  }
  const line = removeLine(values);
  const size = values.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
  if (line.every((value) => Math.abs(value) <= 1e-12 * size)) {
    return noCycle(values, samplePeriod, 'The signal is constant or a straight line: nothing cycles.');
  }
  const candidates = cycleCandidates(values, rule.cycles / n, 1 / shortestPeriod);
  const found = standingOut(candidates).map((candidate) => judge(values, samplePeriod, candidate));
  const main = found.find(({ lacks, powerShare }) => lacks.length === 0 && powerShare >= rule.powerShare);
  if (main !== undefined) return regularCycle(main, furtherCycles(values, main), samplePeriod);
  const uneven = steadySwing(values);
  if (uneven !== null) return unevenCycle(values, uneven, found[0]?.regularity?.value ?? null, samplePeriod);
  if (candidates.length === 0) {
    return noCycle(values, samplePeriod, 'The spectrum has no peak: no period stands out.');
  }
  const best = found[0] ?? judge(values, samplePeriod, candidates[0]!);
  return noCycle(values, samplePeriod, whyNot(best, samplePeriod), best);
}

/** The strongest candidates that stand out enough for the least that is ever asked. */
function standingOut(candidates: readonly Candidate[]): readonly Candidate[] {
  return candidates.filter(({ contrast }) => contrast >= neededContrast(1)).slice(0, mostCandidates);
}

/** Periods, in samples, of the cycles beside the main one, strongest first. */
function furtherCycles(values: Float64Array, main: Found): number[] {
  const least = furtherPower * main.candidate.power;
  const beside = cycleCandidates(
    values,
    rule.cycles / values.length,
    1 / shortestPeriod,
    1 / main.regularity!.period,
  ).filter(({ power }) => power >= least);
  const distinct = [main];
  for (const candidate of standingOut(beside)) {
    if (distinct.some((known) => belongsTo(known, candidate))) continue;
    const other = judge(values, 1, candidate);
    if (other.lacks.length === 0) distinct.push(other);
  }
  return distinct.slice(1).map(({ regularity }) => regularity!.period);
}

function judge(values: Float64Array, samplePeriod: number, candidate: Candidate): Found {
  const whole = Math.min(values.length, Math.round(2 / candidate.frequency));
  const rough = removeSlowTrend(values, whole);
  const regularity = regularityAt(rough, candidate.frequency);
  const period = regularity?.period ?? 1 / candidate.frequency;
  const detrended = removeSlowTrend(values, Math.min(values.length, Math.round(2 * period)));
  const single = singleCycles(detrended, samplePeriod, period, cycleStarts(detrended, period));
  const share = powerShareAt(detrended, 1 / period);
  const lacks: string[] = [];
  if (regularity === null) {
    lacks.push('its autocorrelation has too few zero crossings');
  } else {
    const needed = neededContrast(regularity.persistence);
    if (regularity.value <= rule.regularity) {
      lacks.push(`its regularity is ${threeDigits(regularity.value)} (above ${rule.regularity} wanted)`);
    }
    if (candidate.contrast < needed) {
      const back = Math.round(100 * Math.max(0, regularity.persistence));
      lacks.push(
        `its power is ${threeDigits(candidate.contrast)} times that of its neighbours (at least ${threeDigits(needed)} wanted where ${back} % of a cycle comes back in the next)`,
      );
    }
  }
  const count = values.length / period;
  const weighty = count * evenness(single);
  if (count < rule.cycles) {
    lacks.push(`the record holds ${threeDigits(count)} such cycles (at least ${rule.cycles} wanted)`);
  } else if (weighty < Math.max(rule.weightyCycles, rule.weightyShare * count)) {
    lacks.push(
      `only about ${Math.round(weighty)} of ${Math.floor(count)} cycles carry its power: it dies out or comes in bursts`,
    );
  }
  return { candidate, detrended, regularity, powerShare: share, single, lacks };
}

/**
 * (sum of squares)^2 over n times the sum of fourth powers: 1 when all cycles are equally large, small when
 * few are.
 */
function evenness(single: readonly SingleCycle[]): number {
  let squares = 0;
  let fourth = 0;
  for (const { amplitude } of single) {
    squares += amplitude ** 2;
    fourth += amplitude ** 4;
  }
  return fourth > 0 ? squares ** 2 / (single.length * fourth) : 0;
}

function powerShareAt(detrended: Float64Array, frequency: number): number {
  const spectrum = powerSpectrum(detrended, 1);
  let peak = 0;
  let total = 0;
  for (let k = 0; k < spectrum.power.length; k++) {
    total += spectrum.power[k]!;
    const ratio = spectrum.frequency[k]! / frequency;
    if (ratio > 1 / peakFactor && ratio < peakFactor) peak += spectrum.power[k]!;
  }
  return total > 0 ? peak / total : 0;
}

/**
 * Whether a further peak is a known cycle's own: its skirt (too close to be told apart) or a harmonic, which
 * has at most 1 / order^2 of its power (square waves and sawteeth have that much; some room for noise).
 */
function belongsTo(known: Found, other: Candidate): boolean {
  const order = known.regularity!.period * other.frequency;
  if (order < skirtFactor && order > 1 / skirtFactor) return true;
  const nearest = Math.round(order);
  return (
    nearest >= 2 &&
    Math.abs(order - nearest) < harmonicTolerance * nearest &&
    other.power < (1.3 * known.candidate.power) / nearest ** 2
  );
}

function regularCycle(main: Found, others: readonly number[], samplePeriod: number): Cycle {
  const regularity = main.regularity!;
  const period = regularity.period * samplePeriod;
  const count = Math.floor(main.detrended.length / regularity.period);
  return {
    present: true,
    why: `It cycles every ${threeDigits(period)} s: ${count} cycles with regularity ${threeDigits(regularity.value)}${regularity.value >= largestRegularity ? ' or more' : ''} (above 1 is regular) and ${Math.round(100 * main.powerShare)} % of the power.`,
    period,
    regularity: regularity.value,
    cycles: count,
    others: others.map((other) => other * samplePeriod),
    amplitude: median(Float64Array.from(main.single, ({ amplitude }) => amplitude)),
    oddHarmonicShare: oddHarmonicShare(main.detrended, samplePeriod, main.single),
    powerShare: main.powerShare,
    single: main.single,
    autocorrelation: lagged(regularity.autocorrelation, samplePeriod),
    spectrum: powerSpectrum(main.detrended, samplePeriod),
  };
}

function unevenCycle(
  values: Float64Array,
  { turns, swing, period }: SteadySwing,
  regularity: number | null,
  samplePeriod: number,
): Cycle {
  const detrended = removeSlowTrend(values, Math.min(values.length, Math.round(2 * period)));
  // Every other turn is of one kind.
  const starts = turns.filter((_, i) => i % 2 === 0);
  const single = singleCycles(values, samplePeriod, period, starts);
  const lengths = Float64Array.from(single, ({ from, to }) => to - from);
  const quarter = (share: number): string => threeDigits(quantile(lengths, share));
  return {
    present: true,
    why: `It cycles at uneven intervals, about every ${threeDigits(period * samplePeriod)} s (half of the cycles last ${quarter(0.25)} to ${quarter(0.75)} s): ${single.length} cycles that turn round at steady levels, ${threeDigits(swing)} apart.`,
    period: period * samplePeriod,
    regularity,
    cycles: single.length,
    others: [],
    amplitude: median(Float64Array.from(single, ({ amplitude }) => amplitude)),
    oddHarmonicShare: oddHarmonicShare(detrended, samplePeriod, single),
    powerShare: powerShareAt(detrended, 1 / period),
    single,
    autocorrelation: lagged(
      autocorrelation(detrended, Math.min(values.length - 1, Math.ceil(8 * period))),
      samplePeriod,
    ),
    spectrum: powerSpectrum(detrended, samplePeriod),
  };
}

function noCycle(values: Float64Array, samplePeriod: number, why: string, best?: Found): Cycle {
  const n = values.length;
  const flat = n === 0 ? Float64Array.of(0) : removeLine(values);
  const plain = autocorrelation(flat, Math.max(0, Math.floor(flat.length / 2) - 1));
  return {
    present: false,
    why,
    period: null,
    regularity: best?.regularity?.value ?? null,
    cycles: 0,
    others: [],
    amplitude: null,
    oddHarmonicShare: null,
    powerShare: best?.powerShare ?? null,
    single: [],
    autocorrelation: lagged(best?.regularity?.autocorrelation ?? plain, samplePeriod),
    spectrum: powerSpectrum(best?.detrended ?? flat, samplePeriod),
  };
}

function whyNot(best: Found, samplePeriod: number): string {
  const period = (best.regularity?.period ?? 1 / best.candidate.frequency) * samplePeriod;
  const lacks =
    best.lacks.length > 0
      ? best.lacks
      : [
          `it holds ${threeDigits(100 * best.powerShare)} % of the power (at least ${100 * rule.powerShare} % wanted)`,
        ];
  return `No regular cycle. The strongest candidate has a period of ${threeDigits(period)} s, but ${lacks.join('; ')}.`;
}

function lagged(value: Float64Array, samplePeriod: number): { lag: Float64Array; value: Float64Array } {
  return { lag: value.map((_, i) => i * samplePeriod), value };
}
