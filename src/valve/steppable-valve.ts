/** What a closed-loop simulation needs of a valve, and the run of one over a logged controller output. */
import { WrongUse } from '../errors';

export interface SteppableValve {
  /** Travel now, % of span. */
  readonly travel: number;
  /** Holds controller output `op`, % of span, for `dt` seconds and returns the travel at their end, %. */
  advance(op: number, dt: number): number;
}

/**
 * Travel at the end of each sample, % of span, when each value of `op` (% of span) is held for `samplePeriod`
 * seconds. Same length as `op`.
 *
 * @throws WrongUse when the sample period is not above 0
 */
export function runValve(valve: SteppableValve, op: Float64Array, samplePeriod: number): Float64Array {
  if (!(samplePeriod > 0)) {
    throw new WrongUse(`The sample period must be above 0 s. Received ${samplePeriod}.`);
  }
  return Float64Array.from(op, (value) => valve.advance(value, samplePeriod));
}
