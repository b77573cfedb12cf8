/** Weighs what speaks for one loop of a group being the source of the oscillation that they share. */
import type { Assessment, Verdict } from '../assessment/assessment';
import { duration } from '../assessment/make-answer-card';
import { fewestCommonCycles, keepingStep } from './likeness';
import type { LoopSignature } from './signature';

/** A loop that cycles, as grouping and the search for the source see it. */
export interface CyclingLoop {
  readonly result: Assessment;
  readonly signature: LoopSignature;
}

export interface LikelySource {
  /** Null when it cannot be told. */
  readonly source: string | null;
  readonly reasons: readonly string[];
}

/** Causes that accuse the final control assembly. */
export const sticks: readonly Verdict[] = ['stiction', 'lost-motion'];
/** Rows of the evidence that tell a nonlinear cycle from a linear one, without asking where it is made. */
const nonlinearityRows: readonly string[] = ['surrogate test', 'bicoherence', 'odd harmonics'];
/** A loop is first when the others began at least this many cycles later (own choice: half a cycle leaves the order open). */
const cyclesAhead = 1;

/**
 * In this order: a loop whose valve was found sticking; where several were, the one that cycled first; without any, the
 * one loop with tight tuning; without that, the loop that cycled first while its cause is open. A loop that was not the
 * first, where that is known, is never named. What is left is said to be open. Nonlinearity and phase are told for the
 * reader and name nothing: a cycle is most nonlinear near its source and less so the further processes filter it
 * (Thornhill 2005, IEEE Trans. Control Syst. Technol. 13:434-443), but a noisy source shows it less than a quiet
 * neighbour.
 *
 * @param loops that share a cycle, by tag
 */
export function likelySource(loops: readonly CyclingLoop[]): LikelySource {
  const first = firstInTime(loops);
  const choice = chosen(loops, first);
  const names = (which: readonly CyclingLoop[]): string => which.map(({ result }) => result.loop).join(', ');
  const { source } = choice;
  const reasons = [choice.why, strongestNonlinearity(loops, source), orderInTime(loops, first)];
  if (source === null) return { source: null, reasons };
  const victims = loops.filter((loop) => loop !== source);
  const accused = victims.filter(({ result }) => sticks.includes(result.cause.verdict));
  reasons.push(phases(source, victims));
  const shaken = victims.filter((loop) => !accused.includes(loop));
  if (shaken.length > 0) reasons.push(`Likely shaken by it: ${names(shaken)}.`);
  if (accused.length > 0) reasons.push(`Also found sticking, so perhaps not only shaken: ${names(accused)}.`);
  return { source: source.result.loop, reasons };
}

interface Choice {
  readonly source: CyclingLoop | null;
  readonly why: string;
}

function chosen(loops: readonly CyclingLoop[], first: CyclingLoop | null): Choice {
  const named = (which: readonly CyclingLoop[]): string => which.map(({ result }) => result.loop).join(', ');
  /** @param because a clause in which the loop is called `it` or by its tag */
  const unlessLater = (source: CyclingLoop, because: (whose: string) => string): Choice => {
    const { loop } = source.result;
    if (first === null || first === source) {
      return { source, why: `The likely source is ${loop}: ${because('its')}.` };
    }
    return {
      source: null,
      why: `The source cannot be told: ${because(`${loop}'s`)}, but ${first.result.loop} cycled before it.`,
    };
  };
  const sticking = loops.filter(({ result }) => sticks.includes(result.cause.verdict));
  if (sticking.length === 1) {
    const [only] = sticking as [CyclingLoop];
    return unlessLater(
      only,
      (whose) => `of these loops only ${whose} final control assembly was found ${found(only.result)}`,
    );
  }
  if (sticking.length > 1) {
    const all = `${sticking.length} of them were found sticking (${named(sticking)})`;
    if (first !== null && sticking.includes(first)) {
      return {
        source: first,
        why: `The likely source is ${first.result.loop}: ${all}, and it cycled first.`,
      };
    }
    return {
      source: null,
      why: `The source cannot be told: ${all}, and nothing shows which of them cycled first. Each may drive the others.`,
    };
  }
  const tight = loops.filter(({ result }) => result.cause.verdict === 'tight-tuning');
  if (tight.length === 1) {
    const [only] = tight as [CyclingLoop];
    return unlessLater(
      only,
      (whose) =>
        `no valve among them was found sticking, and only ${whose} tuning looks tight (confidence ${confidence(only.result)})`,
    );
  }
  if (tight.length > 1) {
    return {
      source: null,
      why: `The source cannot be told: ${tight.length} of them show signs of tight tuning (${named(tight)}), and coupled loops can cycle together.`,
    };
  }
  if (first?.result.cause.verdict === 'cannot-tell') {
    return {
      source: first,
      why: `The likely source is ${first.result.loop}, by time alone: no cause was found in it or the others, and it cycled before them.`,
    };
  }
  return {
    source: null,
    why: 'The source cannot be told: none of them shows a sticking valve or tight tuning. A source outside these loops is suspected: equipment, a loop that is not in this audit, or one whose record allows no verdict.',
  };
}

function found({ cause, stiction }: Assessment): string {
  const what = cause.verdict === 'stiction' ? 'sticking' : 'with lost motion';
  const S = stiction && `, S ${stiction.S.value.toPrecision(2)} % of OP span`;
  return `${what} (confidence ${confidence({ cause })}${S ?? ', S not to be had'})`;
}

function confidence({ cause }: Pick<Assessment, 'cause'>): string {
  return `${Math.round(100 * (cause.confidence ?? 0))} %`;
}

function nonlinearRows(result: Assessment): number {
  return result.evidence.filter(
    ({ indicator, says }) => nonlinearityRows.includes(indicator) && says === 'stiction',
  ).length;
}

function surrogateValue({ evidence }: Assessment): number | null {
  return evidence.find(({ indicator }) => indicator === 'surrogate test')?.value ?? null;
}

/** The most nonlinear cycle by the surrogate test, where it could be run on two loops at least. */
function strongestNonlinearity(loops: readonly CyclingLoop[], source: CyclingLoop | null): string {
  const values = loops
    .flatMap(({ result }) => {
      const value = surrogateValue(result);
      return value === null ? [] : [{ loop: result.loop, value, rows: nonlinearRows(result) }];
    })
    .sort((a, b) => b.value - a.value);
  const [most, next] = values;
  if (most === undefined || next === undefined) {
    return 'Where the cycle is most nonlinear cannot be told: the surrogate test ran on fewer than two of them.';
  }
  if (most.value <= 1) {
    return `None of the cycles is clearly nonlinear (surrogate test at most ${most.value.toFixed(1)}, in ${most.loop}; above 1 is nonlinear).`;
  }
  return (
    `Nonlinearity is strongest in ${most.loop} (surrogate test ${most.value.toFixed(1)}, above 1 is nonlinear; ` +
    `${most.rows} of ${nonlinearityRows.length} tests say so), then in ${next.loop} (${next.value.toFixed(1)}): it tends to be strongest near the source${
      source === null || source.result.loop === most.loop
        ? ''
        : ', so this speaks for another loop than the one named'
    }.`
  );
}

/** The loop that was cycling when none of the others was yet. */
function firstInTime(loops: readonly CyclingLoop[]): CyclingLoop | null {
  const ahead = (one: CyclingLoop, other: CyclingLoop): boolean => {
    const { began, period } = other.signature.clock!;
    return began !== null && began - cyclingBy(one) >= cyclesAhead * period;
  };
  return loops.find((one) => loops.every((other) => other === one || ahead(one, other))) ?? null;
}

/** s since 1970 at which the loop was surely cycling. */
function cyclingBy({ signature }: CyclingLoop): number {
  return signature.clock!.began ?? signature.from;
}

function orderInTime(loops: readonly CyclingLoop[], first: CyclingLoop | null): string {
  if (first !== null) {
    const next = Math.min(
      ...loops.filter((loop) => loop !== first).map((loop) => loop.signature.clock!.began!),
    );
    return `${first.result.loop} cycled first: the next one began at least ${duration(next - cyclingBy(first))} later.`;
  }
  const seen = loops.filter(({ signature }) => signature.clock!.began !== null).length;
  return seen === 0
    ? 'Which cycled first cannot be told: all cycle from the beginning of their records.'
    : 'Which cycled first cannot be told: the records do not show one of them cycling while the others still rest.';
}

function phases(source: CyclingLoop, victims: readonly CyclingLoop[]): string {
  const told = victims.flatMap(({ result, signature }) => {
    const step = keepingStep(source.signature.clock!, signature.clock!, fewestCommonCycles);
    if (step === null) return [];
    const size = Math.abs(step.lag).toFixed(2);
    return [`${result.loop} ${step.lag >= 0 ? 'behind' : 'ahead'} by ${size} of a cycle`];
  });
  if (told.length === 0) {
    return `How the others lie in phase to ${source.result.loop} cannot be told: too few cycles were logged at the same time.`;
  }
  return (
    `Phase against ${source.result.loop}: ${told.join(', ')}. Phase alone does not tell who drives whom: a lag of more ` +
    'than half a cycle looks like a lead, and a process that answers the other way adds half a cycle.'
  );
}
