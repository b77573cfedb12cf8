/** The contract of an indicator: a published rule that reads stiction from the shape of a loop's cycle. */
import type { Evidence } from './evidence';
import type { LoopFacts } from './loop-facts';

/** What an indicator found; `undecided` where its value lies between its limits. */
export interface Reading {
  readonly value: number;
  readonly says: 'stiction' | 'not' | 'undecided';
  /** One sentence with the numbers. */
  readonly why: string;
}

export interface Indicator {
  readonly name: string;
  readonly threshold: string;
  readonly source: string;
  /** Why the indicator does not apply to this loop, as a sentence; null when it does. */
  skips(facts: LoopFacts): string | null;
  /** Called only when it applies. A string says why no value can be had after all. */
  evaluate(facts: LoopFacts): Reading | string;
}

/** The row of one indicator; `facts` is null when the loop does not cycle. */
export function rowOf(indicator: Indicator, facts: LoopFacts | null): Evidence {
  const { name, threshold, source } = indicator;
  const skip = facts === null ? 'Neither OP nor PV has a regular cycle.' : indicator.skips(facts);
  const reading = skip ?? indicator.evaluate(facts!);
  return typeof reading === 'string'
    ? { indicator: name, value: null, threshold, says: 'skipped', why: reading, source }
    : { indicator: name, value: reading.value, threshold, says: reading.says, why: reading.why, source };
}

/**
 * A verdict by two limits: from `stiction` on it is, up to `not` it is not (either may be the larger one).
 */
export function sayBetween(value: number, not: number, stiction: number): Reading['says'] {
  const sign = Math.sign(stiction - not);
  if (sign * (value - stiction) >= 0) return 'stiction';
  return sign * (value - not) <= 0 ? 'not' : 'undecided';
}
