/** Long records: the search runs on the busiest window, the rest of the record is then followed from what it found. */

import { countReversals } from '../oscillation/reversals';
import { quantile } from '../signal/statistics';

/** Samples searched at most. Own choice: enough for 20 cycles of 200 samples, and the search stays within its second. */
export const longestSearch = 4000;
/** Turns of OP that count, as a share of its range without the outermost 2 per cent. Own choice. */
const leastTurn = 0.25;

/** Window of at most {@link longestSearch} samples in which OP turns most often; the whole record when it is shorter. */
export function busiestWindow(op: Float64Array): { from: number; to: number } {
  const samples = op.length;
  if (samples <= longestSearch) return { from: 0, to: samples };
  const range = quantile(op, 0.98) - quantile(op, 0.02);
  const { at } = countReversals(op, leastTurn * range);
  const step = longestSearch / 4;
  let best = { from: 0, to: longestSearch };
  let most = -1;
  for (let start = 0; start < samples - longestSearch + step; start += step) {
    const from = Math.min(start, samples - longestSearch);
    const to = from + longestSearch;
    const turns = at.filter((sample) => sample >= from && sample < to).length;
    if (turns > most) {
      most = turns;
      best = { from, to };
    }
  }
  return best;
}
