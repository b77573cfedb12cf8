/** Finds the scan of a controller that is slower than the log: OP then moves only at every so many samples. */
import { quantile } from '../signal/statistics';

export interface Scan {
  /** Samples from one scan to the next. */
  readonly every: number;
  /** Scans stand at the samples phase, phase + every, ... */
  readonly phase: number;
}

/** Share of OP's moves that must fall on the scans, and share of the scans at which OP must move (own choices). */
const onScan = 0.98;
const moving = 0.5;

/**
 * Looks for the longest beat on which nearly all moves of OP fall. An OP whose slow moves are rounded away moves
 * irregularly and reads as scanned at every sample.
 *
 * @param op one value a sample
 */
export function findScan(op: Float64Array): Scan {
  const moves: number[] = [];
  for (let i = 1; i < op.length; i++) if (op[i] !== op[i - 1]) moves.push(i);
  if (moves.length < 2) return { every: 1, phase: 0 };
  const distances = Float64Array.from(moves.slice(1), (at, i) => at - moves[i]!);
  const longest = Math.floor(quantile(distances, 1 - onScan));
  for (let every = longest; every > 1; every--) {
    if (moves.length < moving * (op.length / every)) continue;
    const onPhase = new Uint32Array(every);
    for (const at of moves) onPhase[at % every]!++;
    const most = onPhase.reduce((a, b) => Math.max(a, b), 0);
    if (most >= onScan * moves.length) return { every, phase: onPhase.indexOf(most) };
  }
  return { every: 1, phase: 0 };
}
