/** The answer to a whole unit as short plain sentences, made once and shown by terminal, notebook and page alike. */
import type { Assessment, Verdict } from '../assessment/assessment';
import { duration, withInterval } from '../assessment/make-answer-card';
import type { Audit, LoopGroup, RankedLoop } from './audit';
import { hasFailed } from './audit';

export interface AuditCard {
  /** How many cycle, and what to look at first. */
  readonly headline: string;
  /** The time that the records cover; '' when none was read. */
  readonly records: string;
  /** How many loops have which cause. */
  readonly counts: string;
  readonly figures: readonly { readonly label: string; readonly value: string; readonly note: string }[];
  /** The first of the ranking, each with why in one line. */
  readonly first: readonly { readonly loop: string; readonly line: string }[];
  /** Loops that share a cycle, a sentence a group. */
  readonly together: readonly string[];
  readonly cautions: readonly string[];
}

/** Loops named on the card at most; the ranking has all (own choice: what fits on a screen). */
const namedFirst = 5;
const namedGroups = 5;
const accused: readonly Verdict[] = ['stiction', 'lost-motion'];

export function auditCard({ loops, groups, ranking, cautions }: Audit): AuditCard {
  const assessed = loops.flatMap((one) => (hasFailed(one) ? [] : [one]));
  const cycling = assessed.filter(({ oscillation }) => oscillation.present).length;
  const failed = loops.length - assessed.length;
  const worth = ranking.filter(({ score }) => score > 0);
  const accusedOf = accused.map(
    (verdict) => assessed.filter(({ cause }) => cause.verdict === verdict).length,
  );
  const told = groups.filter(({ likelySource }) => likelySource !== null).length;
  const lineOf = (one: RankedLoop): string => {
    const group = groups.find((shared) => shared.loops.includes(one.loop)) ?? null;
    return inOneLine(assessed.find(({ loop }) => loop === one.loop)!, one.reasons, group);
  };
  return {
    headline: headline(cycling, assessed.length, failed, worth),
    records: recordsInWords(assessed),
    counts: countsInWords(loops),
    figures: [
      { label: 'Loops that cycle', value: `${cycling} of ${assessed.length}`, note: 'of those assessed' },
      {
        label: 'Final control assembly accused',
        value: String(accusedOf.reduce((sum, n) => sum + n, 0)),
        note: accused.map((verdict, i) => `${accusedOf[i]} ${verdict}`).join(', '),
      },
      {
        label: 'Cycles shared by several loops',
        value: String(groups.length),
        note: groups.length === 0 ? '' : `${told} with a likely source`,
      },
      { label: 'Not assessed', value: String(failed), note: failed === 0 ? '' : 'each with its error' },
    ],
    first: worth.slice(0, namedFirst).map((one) => ({ loop: one.loop, line: lineOf(one) })),
    together: [
      ...groups.slice(0, namedGroups).map(groupSentence),
      ...(groups.length > namedGroups ? [`And ${groups.length - namedGroups} more.`] : []),
    ],
    cautions,
  };
}

function recordsInWords(assessed: readonly Assessment[]): string {
  if (assessed.length === 0) return '';
  const starts = assessed.map(({ record }) => Date.parse(record.start));
  const ends = assessed.map(
    ({ record }, i) => starts[i]! + 1000 * record.samplePeriod * (record.samples - 1),
  );
  const [from, to] = [Math.min(...starts), Math.max(...ends)].map((ms) => new Date(ms).toISOString());
  const inWords = (iso: string): string => `${iso.slice(0, 10)} ${iso.slice(11, 16)}`;
  return `records from ${inWords(from!)} to ${inWords(to!)} UTC`;
}

/** How many loops have which cause, the most frequent first. */
export function countsInWords(loops: Audit['loops']): string {
  const counts = new Map<string, number>();
  for (const result of loops) {
    const key = hasFailed(result) ? 'failed' : result.cause.verdict;
    counts.set(key, (counts.get(key) ?? 0) + 1);
  }
  const counted = [...counts].sort(([a, n], [b, m]) => m - n || (a < b ? -1 : 1));
  return `${countOf(loops.length, 'loop')}: ${counted.map(([verdict, n]) => `${n} ${verdict}`).join(', ')}.`;
}

function headline(cycling: number, of: number, failed: number, [first]: readonly RankedLoop[]): string {
  const all = failed > 0 ? countOf(of, 'assessed loop') : countOf(of, 'loop');
  const cycle = `${cycling === 0 ? 'None' : cycling} of ${all} ${cycling > 1 ? 'cycle' : 'cycles'}`;
  if (first === undefined) return `${cycle}; nothing stands out to be looked at first.`;
  return `${cycle}. Look first at ${first.loop}.`;
}

/** Why a loop stands where it stands: its cause, its dead band where there is one, and who cycles with it. */
export function inOneLine(
  { loop, stiction }: Assessment,
  reasons: readonly string[],
  group: LoopGroup | null,
): string {
  const parts = [reasons[0] ?? ''];
  if (stiction !== null) parts.push(`S is ${withInterval(stiction.S)}.`);
  if (group !== null) parts.push(sharedWords(loop, group));
  return parts.join(' ');
}

function sharedWords(loop: string, { loops, likelySource }: LoopGroup): string {
  const others = countOf(loops.length - 1, 'other loop');
  if (likelySource === loop) return `Likely shakes ${others}.`;
  if (likelySource !== null) return `Likely shaken by ${likelySource}.`;
  return `Shares its cycle with ${others}; the source cannot be told.`;
}

export function groupSentence({ period, loops, likelySource }: LoopGroup): string {
  const source = likelySource === null ? 'The source cannot be told.' : `Likely source: ${likelySource}.`;
  return `${loops.join(', ')} share a cycle of ${duration(period)}. ${source}`;
}

function countOf(count: number, what: string): string {
  return `${count} ${what}${count === 1 ? '' : 's'}`;
}
