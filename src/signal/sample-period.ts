/** The one check of a sample period. */
import { WrongUse } from '../errors';

/** @throws WrongUse when the sample period is not a finite number above 0 */
export function checkSamplePeriod(samplePeriod: number): void {
  if (!(samplePeriod > 0 && Number.isFinite(samplePeriod))) {
    throw new WrongUse(`A sample period is a number of seconds above 0. Received ${samplePeriod}.`);
  }
}
