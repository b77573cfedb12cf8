/** What the program answered on one case, beside what is true of it: one plain row of the accuracy suite. */
import type { ValveTruth } from '../../data/make/truth';
import { assessLoop } from '../../src/assessment/assess-loop';
import type { Verdict } from '../../src/assessment/assessment';
import { type ValveSigns, valveSigns } from '../../src/cause/valve-odds';
import type { Estimate } from '../../src/estimate/stiction-fit';
import type { AccuracyCase } from './generate';

export interface Outcome
  extends Pick<
    AccuracyCase,
    'id' | 'kind' | 'cause' | 'service' | 'noise' | 'form' | 'cascade' | 'compressed' | 'visible'
  > {
  readonly sort: AccuracyCase['valve']['sort'];
  readonly samples: number;
  readonly truth: ValveTruth | null;
  readonly verdict: Verdict;
  readonly confidence: number | null;
  /** Null when the numbers were withheld, J also when it was not resolved. */
  readonly S: Estimate | null;
  readonly J: Estimate | null;
  /** The best fit even where its numbers were withheld: to look into misses, never scored. */
  readonly drawn: { readonly S: number; readonly J: number; readonly explains: number } | null;
  /** What the valve's part in the cause is weighed by; null where it was not. */
  readonly signs: ValveSigns | null;
  /** Why there are no numbers; see {@link reasonOf}. */
  readonly refusals: readonly string[];
  /** Why no cause was named; empty when one was. */
  readonly causeRefusals: readonly string[];
  /** s for the whole assessment. */
  readonly seconds: number;
}

export function outcomeOf(made: AccuracyCase): Outcome {
  const { id, kind, cause, service, noise, form, cascade, compressed, visible, truth } = made;
  const start = performance.now();
  const { assessment, fitness, stiction, opCycle, pvCycle } = assessLoop(made.record);
  const { drawn, test } = stiction;
  const weighed = fitness.allows.cause && test && drawn;
  const seconds = (performance.now() - start) / 1000;
  const reason = (text: string): string => reasonOf(text, fitness.checks);
  const { verdict, confidence, reasons } = assessment.cause;
  return {
    id,
    kind,
    cause,
    service,
    noise,
    form,
    cascade,
    compressed,
    visible,
    sort: made.valve.sort,
    samples: made.record.op.length,
    truth,
    verdict,
    confidence,
    S: assessment.stiction?.S ?? null,
    J: assessment.stiction?.J ?? null,
    drawn: drawn && { S: drawn.S.value, J: drawn.jumpDrawn, explains: drawn.explains },
    signs: weighed ? valveSigns(opCycle, pvCycle, test, drawn) : null,
    refusals: [...new Set(assessment.stictionRefused.map(reason))],
    causeRefusals: verdict === 'cannot-tell' ? [...new Set(reasons.map(reason))] : [],
    seconds,
  };
}

/**
 * A name under which equal reasons can be counted: the code of the fitness check whose sentence it is, else the
 * sentence with its numbers masked.
 */
export function reasonOf(
  text: string,
  checks: readonly { readonly code: string; readonly text: string }[],
): string {
  return checks.find((check) => check.text === text)?.code ?? text.replace(/-?\d+(\.\d+)?/g, '#');
}
