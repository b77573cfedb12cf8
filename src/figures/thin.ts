/** Thins long traces for drawing without losing a peak: in every stretch the lowest and the highest value stay. */
import { WrongUse } from '../errors';

/**
 * Indices of the samples to draw, rising, at most `limit` of them. The samples between the first and the last,
 * which always stay, are cut into equal stretches; of each its lowest and its highest sample stay, in their order.
 * A trace that is no longer than `limit` stays whole. Values that are not finite are never chosen within a stretch.
 *
 * @param values one value a sample
 * @param limit default 2000, about two samples a pixel on a wide screen; at least 4
 * @throws WrongUse when `limit` is below 4 or not a whole number
 */
export function thin(values: ArrayLike<number>, limit = 2000): number[] {
  if (!(Number.isInteger(limit) && limit >= 4)) {
    throw new WrongUse(`A trace is thinned to a whole number of at least 4 points. Received ${limit}.`);
  }
  const samples = values.length;
  if (samples <= limit) return Array.from({ length: samples }, (_, i) => i);
  const stretches = Math.floor((limit - 2) / 2);
  const kept = [0];
  for (let stretch = 0; stretch < stretches; stretch++) {
    const from = 1 + Math.floor((stretch * (samples - 2)) / stretches);
    const to = 1 + Math.floor(((stretch + 1) * (samples - 2)) / stretches);
    let lowest = -1;
    let highest = -1;
    for (let i = from; i < to; i++) {
      if (!Number.isFinite(values[i])) continue;
      if (lowest < 0 || values[i] < values[lowest]) lowest = i;
      if (highest < 0 || values[i] > values[highest]) highest = i;
    }
    if (lowest < 0) continue;
    kept.push(Math.min(lowest, highest));
    if (lowest !== highest) kept.push(Math.max(lowest, highest));
  }
  kept.push(samples - 1);
  return kept;
}
