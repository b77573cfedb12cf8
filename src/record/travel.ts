/** Whether a logged valve travel is alive: not frozen, and not the command handed back. */

import { resolution } from '../signal/resolution';
import { mean, standardDeviation } from '../signal/statistics';

/** Share of OP's spread within which a travel that follows it at once is an echo (own choice: no stem is that good). */
const echoShare = 0.002;
/** Spread that two roundings leave, over the sum of their steps: 1/sqrt(12), with a fifth more. */
const roundings = 0.35;
/** Share of OP's spread below which a travel that should follow does not move (own choice). */
const frozenShare = 0.01;

/**
 * Says why the travel cannot be used, or null when it can.
 *
 * @param travel measured valve travel, %
 * @param op controller output, %, as long
 */
export function deadTravel(travel: Float64Array, op: Float64Array): string | null {
  if (travel.length < 3) return 'it is too short to tell whether it is alive';
  const spread = standardDeviation(travel);
  const opSpread = standardDeviation(op);
  if (spread === 0) return 'it never moves: the transmitter is frozen or the valve stands still';
  if (spread < frozenShare * opSpread) {
    return `it hardly moves (standard deviation ${spread.toPrecision(2)} % against ${opSpread.toPrecision(2)} % of OP)`;
  }
  if (opSpread === 0) return null;
  const allowed = Math.max(echoShare * opSpread, roundings * (resolution(travel) + resolution(op)));
  // Compared with OP at once, and one sample later as a slow bus hands it back.
  for (const late of [0, 1]) {
    const differ = awayFromLine(op.subarray(0, op.length - late), travel.subarray(late));
    if (differ <= allowed) {
      return `it is OP itself handed back${late > 0 ? ' one sample later' : ''} (they differ by ${differ.toPrecision(2)} %)`;
    }
  }
  return null;
}

/** Root mean square distance of y from its line over x. */
function awayFromLine(x: Float64Array, y: Float64Array): number {
  const xMean = mean(x);
  const yMean = mean(y);
  let xx = 0;
  let xy = 0;
  for (let i = 0; i < x.length; i++) {
    xx += (x[i]! - xMean) ** 2;
    xy += (x[i]! - xMean) * (y[i]! - yMean);
  }
  const slope = xx > 0 ? xy / xx : 0;
  let squares = 0;
  for (let i = 0; i < x.length; i++) squares += (y[i]! - yMean - slope * (x[i]! - xMean)) ** 2;
  return Math.sqrt(squares / x.length);
}
