/**
 * How good a set of answers is: errors, intervals, refusals, causes and confidences. Pure arithmetic on the rows of
 * `outcome.ts`.
 *
 * Rules, fixed with the targets:
 * - S and J are scored where the two-parameter element explains at least {@link LEAST_EXPLAINED} of the true travel;
 *   an error is |estimate - truth| over the true S, for J too, and half widths of intervals are shares of the true S;
 * - numbers that are withheld do not count as errors but are counted, and J counts as unresolved when withheld;
 * - stiction is sought among the visible cases; `cannot-tell` counts as refused, whatever its reason;
 * - stiction is false among tight tuning, outside disturbances and healthy loops. Lost motion, which is a fault of the
 *   valve too, is counted apart;
 * - a confidence is right when the verdict is the cause that the case was designed with.
 */
import type { Verdict } from '../../src/assessment/assessment';
import { normalQuantile } from '../../src/signal/distributions';
import { quantile } from '../../src/signal/statistics';
import type { Outcome } from './outcome';

export const LEAST_EXPLAINED = 0.6;

export const VERDICTS = [
  'stiction',
  'lost-motion',
  'tight-tuning',
  'outside-disturbance',
  'not-oscillating',
  'cannot-tell',
] as const satisfies readonly Verdict[];

/** A share with its 95 % interval; null without anything to count. */
export interface Rate {
  readonly hits: number;
  readonly of: number;
  readonly share: number | null;
  readonly low: number | null;
  readonly high: number | null;
}

export interface Spread {
  readonly count: number;
  readonly median: number | null;
  readonly p90: number | null;
}

export interface NumberScore {
  /** |estimate - truth| over true S. */
  readonly error: Spread;
  /** Intervals that hold the truth. */
  readonly held: Rate;
  /** Half width of the intervals over true S. */
  readonly halfWidth: Spread;
}

export interface NumbersScore {
  /** Cases whose true travel the element explains well enough. */
  readonly scored: number;
  readonly S: NumberScore;
  readonly J: NumberScore;
  /** No S and J, of the scored cases; of those that are not compressed. */
  readonly withheld: Rate;
  readonly withheldUncompressed: Rate;
  /** No J, withheld ones included; J withheld although S was given. */
  readonly unresolved: Rate;
  readonly unresolvedWithS: Rate;
  /**
   * How far J lies outside the range of J that describes the true travel nearly as well, over true S (0 inside). Told
   * beside the error, nothing is scored by it.
   */
  readonly outsideJumpAsGood: Spread;
}

export interface CauseScore {
  /** The verdict is the designed cause. */
  readonly right: Rate;
  readonly refused: Rate;
  /** Stiction, of the visible cases; the same with `cannot-tell` allowed; both without compressed records. */
  readonly named: Rate;
  readonly namedOrRefused: Rate;
  readonly namedUncompressed: Rate;
  readonly namedOrRefusedUncompressed: Rate;
  /** Stiction, of the cases that have neither stiction nor lost motion. */
  readonly falseStiction: Rate;
}

export interface Reliability {
  readonly bins: readonly ReliabilityBin[];
  readonly byVerdict: Readonly<Record<string, ReliabilityBin>>;
  /** Mean of |said - true rate| over the bins, weighted by their counts; null without a confidence. */
  readonly gap: number | null;
}

export interface ReliabilityBin {
  readonly low: number;
  readonly high: number;
  /** Mean confidence said. */
  readonly said: number | null;
  readonly right: Rate;
}

export interface Counts {
  readonly [name: string]: number;
}

/** The cases of one kind, service or noise; numbers of a service or noise are those of its records with stiction. */
export interface ScorePart {
  readonly cases: number;
  readonly numbers: NumbersScore;
  readonly causes: CauseScore;
}

export interface Score {
  readonly cases: number;
  /** Records with stiction, whether another wave shakes the loop as well or not; then lost motion. */
  readonly stiction: NumbersScore;
  readonly lostMotion: NumbersScore;
  readonly causes: CauseScore;
  readonly by: Readonly<Record<'kind' | 'service' | 'noise', Readonly<Record<string, ScorePart>>>>;
  /** Numbers given for good valves, where there is nothing to measure. */
  readonly numbersForGoodValves: Rate;
  readonly lostMotionNamedStiction: Rate;
  /** Compressed records that were seen to be so, and others that were taken for compressed. */
  readonly compressionSeen: Rate;
  readonly compressionFalse: Rate;
  /** Verdicts by kind. */
  readonly confusion: Readonly<Record<string, Counts>>;
  readonly reliability: Reliability;
  /** How often each reason stood for withheld numbers (`stiction`: of the scored records) and for `cannot-tell`. */
  readonly refusals: { readonly stiction: Counts; readonly others: Counts; readonly cause: Counts };
  readonly seconds: Spread;
}

/** Share of hits with the 95 % interval of Wilson (1927, J. Am. Stat. Assoc. 22:209-212; formula from memory). */
export function rate(hits: number, of: number): Rate {
  if (of === 0) return { hits, of, share: null, low: null, high: null };
  const z = normalQuantile(0.975);
  const share = hits / of;
  const centre = share + (z * z) / (2 * of);
  const half = z * Math.sqrt((share * (1 - share)) / of + (z / (2 * of)) ** 2);
  const scale = 1 + (z * z) / of;
  return {
    hits,
    of,
    share,
    low: Math.max(0, (centre - half) / scale),
    high: Math.min(1, (centre + half) / scale),
  };
}

export function spread(values: readonly number[]): Spread {
  if (values.length === 0) return { count: 0, median: null, p90: null };
  const row = Float64Array.from(values);
  return { count: values.length, median: quantile(row, 0.5), p90: quantile(row, 0.9) };
}

function rateOf<T>(rows: readonly T[], hit: (row: T) => boolean): Rate {
  return rate(rows.filter(hit).length, rows.length);
}

function isScored({ truth }: Outcome): boolean {
  return truth !== null && truth.explains >= LEAST_EXPLAINED;
}

/** S and J of those outcomes that have a truth to be scored against. */
export function scoreNumbers(outcomes: readonly Outcome[]): NumbersScore {
  const scored = outcomes.filter(isScored);
  const score = (name: 'S' | 'J'): NumberScore => {
    const given = scored.flatMap(({ truth, [name]: estimate }) =>
      estimate === null || truth === null ? [] : [{ ...estimate, truth: truth[name], scale: truth.S }],
    );
    return {
      error: spread(given.map(({ value, truth, scale }) => Math.abs(value - truth) / scale)),
      held: rateOf(given, ({ low, high, truth }) => low <= truth && truth <= high),
      halfWidth: spread(given.map(({ low, high, scale }) => (high - low) / (2 * scale))),
    };
  };
  const withheld = ({ S }: Outcome): boolean => S === null;
  const withoutJ = ({ J }: Outcome): boolean => J === null;
  const outside = scored.flatMap(({ J, truth }) => {
    if (J === null || truth === null) return [];
    const [low, high] = truth.jumpAsGood;
    return [Math.max(0, low - J.value, J.value - high) / truth.S];
  });
  return {
    scored: scored.length,
    S: score('S'),
    J: score('J'),
    withheld: rateOf(scored, withheld),
    withheldUncompressed: rateOf(
      scored.filter(({ compressed }) => !compressed),
      withheld,
    ),
    unresolved: rateOf(scored, withoutJ),
    unresolvedWithS: rateOf(
      scored.filter(({ S }) => S !== null),
      withoutJ,
    ),
    outsideJumpAsGood: spread(outside),
  };
}

export function scoreCauses(outcomes: readonly Outcome[]): CauseScore {
  const visible = outcomes.filter((one) => one.visible);
  const uncompressed = visible.filter((one) => !one.compressed);
  const blameless = outcomes.filter(({ cause }) => cause !== 'stiction' && cause !== 'lost-motion');
  const refused = ({ verdict }: Outcome): boolean => verdict === 'cannot-tell';
  const namedOrRefused = (one: Outcome): boolean => namesStiction(one) || refused(one);
  return {
    right: rateOf(outcomes, isRight),
    refused: rateOf(outcomes, refused),
    named: rateOf(visible, namesStiction),
    namedOrRefused: rateOf(visible, namedOrRefused),
    namedUncompressed: rateOf(uncompressed, namesStiction),
    namedOrRefusedUncompressed: rateOf(uncompressed, namedOrRefused),
    falseStiction: rateOf(blameless, namesStiction),
  };
}

function namesStiction({ verdict }: Outcome): boolean {
  return verdict === 'stiction';
}

function isRight({ verdict, cause }: Outcome): boolean {
  return verdict === cause;
}

function saidCompressed({ refusals }: Outcome): boolean {
  return refusals.some((reason) => reason.endsWith('-compressed'));
}

/** Confidences in ten equal bins against the rate at which the verdicts were right. */
export function scoreConfidences(outcomes: readonly Outcome[]): Reliability {
  const said = outcomes.flatMap((one) =>
    one.confidence === null
      ? []
      : [{ verdict: one.verdict, confidence: one.confidence, right: isRight(one) }],
  );
  const bin = (low: number, high: number, rows: typeof said): ReliabilityBin => ({
    low,
    high,
    said: rows.length === 0 ? null : rows.reduce((sum, { confidence }) => sum + confidence, 0) / rows.length,
    right: rateOf(rows, ({ right }) => right),
  });
  const bins = Array.from({ length: 10 }, (_, i) =>
    bin(
      i / 10,
      (i + 1) / 10,
      said.filter(({ confidence }) => Math.min(9, Math.floor(10 * confidence + 1e-9)) === i),
    ),
  );
  const byVerdict = VERDICTS.filter((verdict) => verdict !== 'cannot-tell').map((verdict) => [
    verdict,
    bin(
      0,
      1,
      said.filter((row) => row.verdict === verdict),
    ),
  ]);
  const off = bins.reduce(
    (sum, { said, right }) =>
      said === null || right.share === null ? sum : sum + right.of * Math.abs(said - right.share),
    0,
  );
  return {
    bins,
    byVerdict: Object.fromEntries(byVerdict),
    gap: said.length === 0 ? null : off / said.length,
  };
}

export function scoreOutcomes(outcomes: readonly Outcome[]): Score {
  const sticky = outcomes.filter(({ cause }) => cause === 'stiction');
  const others = outcomes.filter(({ cause }) => cause !== 'stiction');
  const lostMotion = outcomes.filter(({ cause }) => cause === 'lost-motion');
  const good = others.filter(({ cause }) => cause !== 'lost-motion');
  const part = (rows: readonly Outcome[], measured: readonly Outcome[]): ScorePart => ({
    cases: rows.length,
    numbers: scoreNumbers(measured),
    causes: scoreCauses(rows),
  });
  const sharing = (name: 'service' | 'noise'): Record<string, ScorePart> =>
    mapGroups(outcomes, name, (rows) =>
      part(
        rows,
        rows.filter(({ cause }) => cause === 'stiction'),
      ),
    );
  return {
    cases: outcomes.length,
    stiction: scoreNumbers(sticky),
    lostMotion: scoreNumbers(lostMotion),
    causes: scoreCauses(outcomes),
    by: {
      kind: mapGroups(outcomes, 'kind', (rows) => part(rows, rows)),
      service: sharing('service'),
      noise: sharing('noise'),
    },
    numbersForGoodValves: rateOf(good, ({ S }) => S !== null),
    lostMotionNamedStiction: rateOf(lostMotion, namesStiction),
    compressionSeen: rateOf(
      outcomes.filter(({ compressed }) => compressed),
      saidCompressed,
    ),
    compressionFalse: rateOf(
      outcomes.filter(({ compressed }) => !compressed),
      saidCompressed,
    ),
    confusion: mapGroups(outcomes, 'kind', (rows) =>
      Object.fromEntries(
        VERDICTS.map((verdict) => [verdict, rows.filter((one) => one.verdict === verdict).length]),
      ),
    ),
    reliability: scoreConfidences(outcomes),
    refusals: {
      stiction: count(sticky.filter(isScored).flatMap(({ refusals }) => refusals)),
      others: count(others.flatMap(({ refusals }) => refusals)),
      cause: count(outcomes.flatMap(({ causeRefusals }) => causeRefusals)),
    },
    seconds: spread(outcomes.map(({ seconds }) => seconds)),
  };
}

/** What `make` gives for the outcomes that share a kind, service or noise, in the order in which they first occur. */
function mapGroups<T>(
  outcomes: readonly Outcome[],
  name: 'kind' | 'service' | 'noise',
  make: (rows: readonly Outcome[]) => T,
): Record<string, T> {
  const names = [...new Set(outcomes.map((one) => one[name]))];
  return Object.fromEntries(
    names.map((value) => [value, make(outcomes.filter((one) => one[name] === value))]),
  );
}

/** How often each name occurs, most frequent first. */
function count(names: readonly string[]): Counts {
  const counts = new Map<string, number>();
  for (const name of names) counts.set(name, (counts.get(name) ?? 0) + 1);
  return Object.fromEntries([...counts].sort((a, b) => b[1] - a[1] || (a[0] < b[0] ? -1 : 1)));
}
