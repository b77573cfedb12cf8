/** How well each pair of S and J explains PV, with the process found kept near: the map behind the estimate. */
import { mapNear, type Reconstruction, type SearchSettings } from './search';
import type { MisfitMap } from './stiction-fit';

const stepsS = 28;
const stepsJ = 21;

/** Map around the pair `found`: S from a quarter to twice its value (at most the largest), J from 0 to S. */
export function misfitMap(
  pv: Float64Array,
  op: Float64Array,
  reconstruction: Reconstruction,
  settings: SearchSettings,
  largest: number,
  found: { S: number; J: number },
): MisfitMap {
  const high = Math.min(largest * 1.02, 2 * found.S);
  const low = Math.min(0.3 * found.S, 0.9 * high);
  const S = Array.from({ length: stepsS }, (_, i) => low + ((high - low) * i) / (stepsS - 1));
  const highJ = Math.min(high, Math.max(2.2 * found.J, 0.5 * found.S));
  const J = Array.from({ length: stepsJ }, (_, i) => (highJ * i) / (stepsJ - 1));
  const evaluate = mapNear(pv, op, reconstruction, settings);
  return { S, J, misfit: J.map((j) => S.map((s) => (j > s ? null : evaluate(s, j)))) };
}
