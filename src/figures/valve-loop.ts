/** Geometry of the fitted valve's own loop: its corners, where it lies, and which part of the record goes behind it. */
import type { Findings } from '../assessment/findings';
import type { SingleCycle } from '../oscillation/cycle';
import type { ValveModel } from '../valve/two-parameter';
import { extent } from './plain-numbers';

/** A jump smaller than this share of the swing is drawn as none: its dimension would be two arrow heads. */
export const smallestJump = 0.02;
/** OP swing that just moves the valve, in S, and a little more. */
const leastSwing = 1.03;
/** Cycles shown on either side of the one drawn, and points of them at most. */
const cyclesAround = 2;
const pointsAround = 800;

/**
 * The ends of the OP swing to draw, those of the most usual single cycle of the record but far enough apart to move
 * the valve, and the samples to show behind it.
 */
export function drawnSwing(
  { record, opCycle }: Findings,
  S: number,
): { low: number; high: number; enlarged: boolean; around: number[] } {
  const { op, samplePeriod } = record;
  const usual = opCycle.amplitude ?? 0;
  const off = (cycle: SingleCycle): number => Math.abs(cycle.amplitude - usual);
  const chosen = [...opCycle.single].sort((a, b) => off(a) - off(b))[0];
  const last = op.length - 1;
  const at = (seconds: number): number => Math.min(last, Math.max(0, Math.round(seconds / samplePeriod)));
  const from = chosen ? at(chosen.from) : 0;
  const to = chosen ? at(chosen.to) : last;
  const ends = extent(op.subarray(from, to + 1));
  const swing = Math.max(ends.high - ends.low, leastSwing * S);
  const middle = (ends.low + ends.high) / 2;
  const first = Math.max(0, from - cyclesAround * (to - from));
  const end = Math.min(last, to + cyclesAround * (to - from));
  const step = Math.max(1, Math.ceil((end - first) / pointsAround));
  return {
    low: middle - swing / 2,
    high: middle + swing / 2,
    enlarged: swing > ends.high - ends.low,
    around: Array.from({ length: Math.floor((end - first) / step) + 1 }, (_, i) => first + i * step),
  };
}

/** Travel of the model lies within (S + J)/2 of OP on either side; the middle of that band is the offset between them. */
export function travelOffset(op: Float64Array, modelTravel: Float64Array): number {
  let lowest = Number.POSITIVE_INFINITY;
  let highest = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < op.length; i++) {
    const apart = modelTravel[i] - op[i];
    lowest = Math.min(lowest, apart);
    highest = Math.max(highest, apart);
  }
  return (lowest + highest) / 2;
}

/**
 * Corners of the closed loop that the two-parameter element runs through while OP goes from `low` to about `high` and
 * back, starting at the lower turn. With `sticks-again` OP turns right after a slip, so `high` moves by up to J/2.
 */
export function valveLoop(
  model: ValveModel,
  S: number,
  J: number,
  low: number,
  high: number,
): { x: number[]; y: number[] } {
  const behind = (S - J) / 2;
  const steps = model === 'sticks-again' && J > smallestJump * (high - low);
  const slips = steps ? Math.max(0, Math.round((high - low - S) / J)) : 0;
  const turn = steps ? low + S + slips * J : high;
  const x = [low, low + S, low + S];
  const y = [low + behind, low + behind, low + behind + J];
  for (let slip = 1; slip <= slips; slip++) {
    x.push(low + S + slip * J, low + S + slip * J);
    y.push(low + behind + slip * J, low + behind + (slip + 1) * J);
  }
  if (!steps) {
    x.push(turn);
    y.push(turn - behind);
  }
  // The way down is the way up turned about the middle of the loop.
  const corners = x.length;
  for (let i = 0; i < corners; i++) {
    x.push(low + turn - x[i]);
    y.push(low + turn - y[i]);
  }
  return { x, y };
}
