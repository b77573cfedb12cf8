/** Counts how often a signal turns round, which is what wears a valve. */
import { WrongUse } from '../errors';

export interface Reversals {
  readonly count: number;
  /** Index of the sample at which the signal stood furthest before each turn. */
  readonly at: readonly number[];
}

/**
 * Changes of direction larger than `tolerance`: a turn counts once the signal has come back from its last
 * extreme by more than that. Smaller wiggles (noise, quantisation) do not count.
 *
 * @param values samples
 * @param tolerance unit of the signal, at least 0
 * @throws WrongUse when the tolerance is not a number of at least 0
 */
export function countReversals(values: Float64Array, tolerance: number): Reversals {
  if (!(tolerance >= 0)) {
    throw new WrongUse(`The tolerance of a reversal is a number of at least 0. Received ${tolerance}.`);
  }
  const at: number[] = [];
  let highest = 0;
  let lowest = 0;
  let direction = 0;
  for (let i = 1; i < values.length; i++) {
    const value = values[i]!;
    if (value > values[highest]!) highest = i;
    if (value < values[lowest]!) lowest = i;
    const fell = direction >= 0 && values[highest]! - value > tolerance;
    const rose = direction <= 0 && value - values[lowest]! > tolerance;
    if (!fell && !rose) continue;
    if (direction !== 0) at.push(fell ? highest : lowest);
    direction = fell ? -1 : 1;
    highest = i;
    lowest = i;
  }
  return { count: at.length, at };
}
