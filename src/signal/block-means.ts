/** Thins a signal without letting fast parts alias into slow ones. */
import { WrongUse } from '../errors';

/**
 * Means of `by` neighbouring samples each; a rest shorter than that is left out.
 *
 * @throws WrongUse when `by` is not a whole number of at least 1
 */
export function blockMeans(values: Float64Array, by: number): Float64Array {
  if (!Number.isInteger(by) || by < 1) {
    throw new WrongUse(`A block is a whole number of samples, at least 1. Received ${by}.`);
  }
  return new Float64Array(Math.floor(values.length / by)).map((_, i) => {
    let sum = 0;
    for (let k = i * by; k < (i + 1) * by; k++) sum += values[k]!;
    return sum / by;
  });
}
