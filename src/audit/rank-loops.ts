/** What to look at first: a score for each loop from cause, confidence, severity and how many loops it shakes. */
import type { Assessment, Verdict } from '../assessment/assessment';
import { refuseUnknownOptions, WrongUse } from '../errors';
import type { FinishedLoop, LoopGroup, RankedLoop } from './audit';
import { hasFailed } from './audit';
import { order } from './group-loops';
import { sticks } from './likely-source';
import type { LoopSignature } from './signature';

/** The rule as data. All of it is own choice and can be changed. */
export interface RankingRule {
  /** What each cause counts, 0 to 1. */
  readonly cause: Readonly<Record<Verdict, number>>;
  /** Confidence, 0 to 1, with which `cannot-tell` counts. */
  readonly openConfidence: number;
  /** Where each part of the severity is full, and how much the part weighs among those that are known. */
  readonly severity: Readonly<Record<SeverityPart, { readonly full: number; readonly weight: number }>>;
  /** Severity that a loop has at least, 0 to 1: a sure cause with a small swing still stands above an unsure one. */
  readonly leastSeverity: number;
  /** What each loop that it likely shakes adds to the score, as a share of it, and how many of them count at most. */
  readonly perShakenLoop: number;
  readonly mostShakenLoops: number;
  /** Share of its source's score that a loop which is likely only shaken has at most, 0 to 1. */
  readonly shakenShare: number;
}

export type SeverityPart =
  /** PV swing, peak to peak, in % of the PV range. */
  | 'swingOfRange'
  /** PV swing, peak to peak, in standard deviations of PV's own fast noise. */
  | 'swingOfNoise'
  /** S, % of OP span. */
  | 'S'
  /** Turns of OP a day. */
  | 'reversals';

export const rankingRule: RankingRule = {
  cause: {
    stiction: 1,
    'lost-motion': 0.9,
    'tight-tuning': 0.7,
    'outside-disturbance': 0.3,
    'cannot-tell': 0.3,
    'not-oscillating': 0,
  },
  openConfidence: 0.5,
  severity: {
    swingOfRange: { full: 10, weight: 2 },
    swingOfNoise: { full: 50, weight: 1 },
    S: { full: 5, weight: 1 },
    reversals: { full: 3000, weight: 1 },
  },
  leastSeverity: 0.1,
  perShakenLoop: 0.25,
  mostShakenLoops: 8,
  shakenShare: 0.5,
};

export interface RankOptions {
  /** Parts of the rule to change. Default {@link rankingRule}. */
  readonly rule?: Partial<RankingRule>;
}

/**
 * Ranks the loops of an audit:
 *
 *     score = 100 x cause x confidence x (least + (1 - least) x severity) x (1 + 0.25 x loops it likely shakes)
 *
 * Severity is the weighted mean of those of its parts that are known, each counted up to where it is full: PV swing
 * against its range, PV swing against its own noise, S, reversals a day. A loop that is likely shaken by another one
 * counts at most half of its source, unless it was found sticking itself. Healthy loops have 0. Loops that could not be assessed are not ranked; they stand
 * in the audit's list of loops with their error.
 *
 * @param groups of {@link groupLoops} on the same loops
 * @returns highest score first, equal ones by tag; scores with one decimal
 * @throws WrongUse for an unknown option or part of the rule, or one outside its bounds
 */
export function rankLoops(
  loops: readonly FinishedLoop[],
  groups: readonly LoopGroup[],
  options: RankOptions = {},
): RankedLoop[] {
  refuseUnknownOptions('rankLoops', options, ['rule']);
  const rule = resolved(options.rule ?? {});
  const groupOf = new Map(groups.flatMap((group) => group.loops.map((loop) => [loop, group] as const)));
  const accused = new Set(
    loops.flatMap(({ result }) =>
      !hasFailed(result) && sticks.includes(result.cause.verdict) ? [result.loop] : [],
    ),
  );
  const own = loops.flatMap(({ result, signature }) =>
    hasFailed(result) || signature === null
      ? []
      : [scored(result, signature, groupOf.get(result.loop) ?? null, accused, rule)],
  );
  const scores = new Map(own.map(({ loop, score }) => [loop, score]));
  return own
    .map(({ loop, score, reasons }): RankedLoop => {
      const source = groupOf.get(loop)?.likelySource ?? null;
      if (source === null || source === loop || accused.has(loop)) {
        return { loop, score: rounded(score), reasons };
      }
      const most = rule.shakenShare * (scores.get(source) ?? 0);
      const words = `Likely shaken by ${source}: look there first. It counts at most ${rule.shakenShare} of the score of its source.`;
      return { loop, score: rounded(Math.min(score, most)), reasons: [...reasons, words] };
    })
    .sort((a, b) => b.score - a.score || order(a.loop, b.loop));
}

const rounded = (score: number): number => Math.round(10 * score) / 10;

function scored(
  result: Assessment,
  signature: LoopSignature,
  group: LoopGroup | null,
  accused: ReadonlySet<string>,
  rule: RankingRule,
): RankedLoop {
  const { cause, loop } = result;
  const weight = rule.cause[cause.verdict];
  const confidence = cause.confidence ?? rule.openConfidence;
  const parts = severityParts(result, signature);
  let sum = 0;
  let weights = 0;
  for (const { part, value } of parts) {
    const { full, weight: of } = rule.severity[part];
    sum += of * Math.min(1, value / full);
    weights += of;
  }
  const severity = weights > 0 ? sum / weights : 0;
  const source = group?.likelySource ?? null;
  const others = (group?.loops ?? []).filter((other) => other !== loop);
  const shakes = source === loop ? others.filter((other) => !accused.has(other)) : [];
  const score =
    100 *
    weight *
    confidence *
    (rule.leastSeverity + (1 - rule.leastSeverity) * severity) *
    (1 + rule.perShakenLoop * Math.min(shakes.length, rule.mostShakenLoops));
  const reasons = [causeWords(result), ...(weight > 0 ? parts.map(({ words }) => words) : [])];
  if (shakes.length > 0) reasons.push(`Likely shakes ${shakes.length} more: ${shakes.join(', ')}.`);
  else if (others.length > 0 && source === null) {
    reasons.push(`Shares its cycle with ${others.join(', ')}; which of them is the source cannot be told.`);
  } else if (source !== null && source !== loop && accused.has(loop)) {
    reasons.push(`Shares its cycle with ${source}, which is the likelier source.`);
  }
  return { loop, score, reasons };
}

interface KnownPart {
  readonly part: SeverityPart;
  readonly value: number;
  /** A sentence. */
  readonly words: string;
}

function severityParts({ severity, stiction }: Assessment, signature: LoopSignature): KnownPart[] {
  const { pvRange, pvNoise, pvUnit } = signature;
  const { pvSwing, reversalsPerDay } = severity;
  const parts: KnownPart[] = [];
  const swing = `PV swings by ${short(pvSwing)}${pvUnit === '' ? '' : ` ${pvUnit}`} peak to peak`;
  if (pvRange !== null) {
    const value = (100 * pvSwing) / (pvRange.high - pvRange.low);
    parts.push({ part: 'swingOfRange', value, words: `${swing}, ${short(value)} % of its range.` });
  }
  if (pvNoise > 0) {
    const value = pvSwing / pvNoise;
    const words = `${pvRange === null ? `${swing} (its range is not stated), ` : 'That is '}${short(value)} times its own fast noise.`;
    parts.push({ part: 'swingOfNoise', value, words });
  }
  if (stiction !== null) {
    const { value, low, high } = stiction.S;
    parts.push({ part: 'S', value, words: `S is ${short(value)} % (${short(low)} to ${short(high)}).` });
  }
  parts.push({
    part: 'reversals',
    value: reversalsPerDay,
    words: `The valve turns about ${Math.round(reversalsPerDay)} times a day.`,
  });
  return parts;
}

const short = (value: number): string => String(Number(value.toPrecision(2)));

const verdictWords: Record<Verdict, string> = {
  stiction: 'The final control assembly was found sticking',
  'lost-motion': 'The final control assembly was found with lost motion',
  'tight-tuning': 'Tight tuning makes the cycle',
  'outside-disturbance': 'The cycle comes from outside the loop',
  'not-oscillating': 'The loop does not cycle',
  'cannot-tell': 'What makes the cycle cannot be told from the record',
};

function causeWords({ cause, oscillation }: Assessment): string {
  if (cause.verdict === 'cannot-tell' && !oscillation.present) {
    return 'No regular cycle; whether the valve sticks cannot be told from the record.';
  }
  const sure = cause.confidence === null ? '' : ` (confidence ${Math.round(100 * cause.confidence)} %)`;
  return `${verdictWords[cause.verdict]}${sure}.`;
}

/** @throws WrongUse when a part is not known or out of bounds */
function resolved(changes: Partial<RankingRule>): RankingRule {
  refuseUnknownOptions('The option "rule" of rankLoops', changes, Object.keys(rankingRule));
  const rule = { ...rankingRule, ...changes };
  refuseUnknownOptions('"cause" of the ranking rule', rule.cause, Object.keys(rankingRule.cause));
  refuseUnknownOptions('"severity" of the ranking rule', rule.severity, Object.keys(rankingRule.severity));
  const within = (name: string, value: number | undefined, most: number): void => {
    if (value !== undefined && value >= 0 && value <= most) return;
    const bounds = most === Number.POSITIVE_INFINITY ? 'not below 0' : `from 0 to ${most}`;
    throw new WrongUse(`"${name}" of the ranking rule is a number ${bounds}. Received ${value}.`);
  };
  for (const verdict of Object.keys(rankingRule.cause) as Verdict[])
    within(`cause.${verdict}`, rule.cause[verdict], 1);
  for (const part of Object.keys(rankingRule.severity) as SeverityPart[]) {
    within(`severity.${part}.weight`, rule.severity[part]?.weight, Number.POSITIVE_INFINITY);
    if (!(rule.severity[part].full > 0)) {
      throw new WrongUse(
        `"severity.${part}.full" of the ranking rule is a number above 0. Received ${rule.severity[part].full}.`,
      );
    }
  }
  for (const name of ['openConfidence', 'leastSeverity', 'shakenShare'] as const) within(name, rule[name], 1);
  for (const name of ['perShakenLoop', 'mostShakenLoops'] as const)
    within(name, rule[name], Number.POSITIVE_INFINITY);
  return rule;
}
