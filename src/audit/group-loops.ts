/** Which loops share one oscillation, and what speaks for one of them being its source. */
import { duration } from '../assessment/make-answer-card';
import { refuseUnknownOptions, WrongUse } from '../errors';
import type { FinishedLoop, LoopGroup } from './audit';
import { hasFailed } from './audit';
import { averageLinkage } from './average-linkage';
import { type CyclingLoop, likelySource } from './likely-source';
import { cyclesOfBoth, fewestCommonCycles, keepingStep, likeness, spectralLikeness } from './likeness';

export interface GroupOptions {
  /**
   * Average likeness (spectra times step kept, 0 to 1) from which loops share a cycle. Default 0.65 (own choice, set on
   * simulated loops: loops shaken by one sticking valve mostly reach 0.8 and more; two unrelated loops of one design,
   * periods within 3 %, reach 0.65 in one pair of ten over some 20 common cycles and in none over 50).
   */
  readonly leastLikeness?: number;
}

/**
 * Groups loops by how alike their whole power spectra are and whether their cycles keep step (see `likeness.ts`), by
 * average linkage. Loops of the same period by chance differ in spectrum or drift out of step, and stay apart. Loops
 * whose records share fewer than eight cycles in time are never put together, whatever their periods: nothing then
 * shows that they share one.
 *
 * Limits: two unrelated cycles whose periods agree within about a quarter of a cycle over the common time keep step by
 * chance; a longer record parts them, and the reasons say where it is short. A loop is grouped by its main cycle only.
 *
 * Papers: grouping of loops by power spectra, Thornhill, Shah, Huang, Vishnubhotla 2002, Control Eng. Pract.
 * 10:833-846; the index of likeness and the measure of keeping step stand in `likeness.ts`.
 *
 * @param loops of an audit, in any order
 * @returns groups of two loops and more: the largest first, then the faster; loops in a group by tag
 * @throws WrongUse for an unknown option or a likeness outside 0..1
 */
export function groupLoops(loops: readonly FinishedLoop[], options: GroupOptions = {}): LoopGroup[] {
  refuseUnknownOptions('groupLoops', options, ['leastLikeness']);
  const { leastLikeness = 0.65 } = options;
  if (!(leastLikeness > 0 && leastLikeness <= 1)) {
    throw new WrongUse(`The least likeness is a number above 0 and at most 1. Received ${leastLikeness}.`);
  }
  const cycling = cyclingLoops(loops);
  const alike = (i: number, j: number): number => likeness(cycling[i]!.signature, cycling[j]!.signature);
  return averageLinkage(cycling.length, alike, leastLikeness)
    .filter((members) => members.length > 1)
    .map((members) => groupOf(members, cycling))
    .sort(
      (a, b) => b.loops.length - a.loops.length || a.period - b.period || order(a.loops[0]!, b.loops[0]!),
    );
}

/** Loops that were assessed and cycle, by tag, so that the order of the audit changes nothing. */
function cyclingLoops(loops: readonly FinishedLoop[]): CyclingLoop[] {
  return loops
    .flatMap(({ result, signature }) =>
      hasFailed(result) || signature === null || signature.clock === null ? [] : [{ result, signature }],
    )
    .sort((a, b) => order(a.result.loop, b.result.loop));
}

/** By code units: the same on every machine. */
export function order(a: string, b: string): number {
  return a < b ? -1 : a > b ? 1 : 0;
}

/** @param members their places in `cycling`, which holds all loops that cycle */
function groupOf(members: readonly number[], cycling: readonly CyclingLoop[]): LoopGroup {
  const loops = members.map((i) => cycling[i]!);
  const others = cycling.filter((_, i) => !members.includes(i));
  const periods = loops.map(({ signature }) => signature.clock!.period).sort((a, b) => a - b);
  const middle = (periods.length - 1) / 2;
  const median = (periods[Math.floor(middle)]! + periods[Math.ceil(middle)]!) / 2;
  const period = Number(median.toPrecision(6));
  const { source, reasons } = likelySource(loops);
  return {
    period,
    loops: loops.map(({ result }) => result.loop),
    likelySource: source,
    reasons: [sharedReason(loops, period), ...reasons, ...leftOutReasons(others, loops, period)],
  };
}

/** Loops whose period is that of the group within this share are told when they are not in it (own choice). */
const samePeriod = 0.05;
/** Of more than this many the rest is counted. */
const mostNamed = 10;

/** Who has the same period and yet is not in the group, and why. */
function leftOutReasons(
  others: readonly CyclingLoop[],
  loops: readonly CyclingLoop[],
  period: number,
): string[] {
  const near = others.filter(
    ({ signature }) => Math.abs(signature.clock!.period - period) <= samePeriod * period,
  );
  const together = (one: CyclingLoop): boolean =>
    loops.some(
      ({ signature }) => keepingStep(one.signature.clock!, signature.clock!, fewestCommonCycles) !== null,
    );
  const names = (which: readonly CyclingLoop[]): string => {
    const tags = which.slice(0, mostNamed).map(({ result }) => result.loop);
    return tags.join(', ') + (which.length > mostNamed ? ` and ${which.length - mostNamed} more` : '');
  };
  const apart = near.filter(together);
  const elsewhere = near.filter((one) => !together(one));
  const reasons: string[] = [];
  if (apart.length > 0) {
    reasons.push(`Of about this period but not in the group, as spectrum or step differ: ${names(apart)}.`);
  }
  if (elsewhere.length > 0) {
    reasons.push(
      `Of about this period but logged at other times, so that nothing shows whether they share the cycle: ${names(elsewhere)}.`,
    );
  }
  return reasons;
}

/** With fewer common cycles the reasons warn of chance (own choice). */
const manyCommonCycles = 30;

function sharedReason(loops: readonly CyclingLoop[], period: number): string {
  let spectral = 1;
  let kept = 1;
  let common = Number.POSITIVE_INFINITY;
  loops.forEach(({ signature: a }, i) => {
    for (const { signature: b } of loops.slice(i + 1)) {
      const both = cyclesOfBoth(a, b)!;
      spectral = Math.min(spectral, spectralLikeness(a.spectrum, b.spectrum, both.slowest));
      kept = Math.min(kept, keepingStep(both.a, both.b, fewestCommonCycles)?.kept ?? 0);
      const since = Math.max(both.a.began ?? a.from, both.b.began ?? b.from);
      common = Math.min(common, (Math.min(a.to, b.to) - since) / period);
    }
  });
  const cycles = Math.max(0, Math.floor(common));
  return (
    `${loops.length} loops cycle with a period of about ${duration(period)}: of each two the spectra are alike by at ` +
    `least ${spectral.toFixed(2)} and the cycles keep step by at least ${kept.toFixed(2)} (1 is the most), over at ` +
    `least ${cycles} cycles logged at the same time.${cycles < manyCommonCycles ? ' Over so few, unrelated cycles of like period can keep step by chance: a longer record tells.' : ''}`
  );
}
