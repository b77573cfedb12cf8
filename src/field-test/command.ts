/** What the command did during a test: which kind of test it was, its steps, its ramps and where it turned. */
import { rangeOf } from '../signal/statistics';
import type { ValveTestKind } from './valve-test-reading';

/** A step of the command. The new value stands from sample `at` on, until sample `until` (not included). */
export interface CommandStep {
  readonly at: number;
  readonly until: number;
  readonly from: number;
  readonly to: number;
}

/** A stretch in which the command only rises (direction 1) or only falls (-1), from its first to its last sample. */
export interface CommandLeg {
  readonly from: number;
  readonly to: number;
  readonly direction: 1 | -1;
}

/** Changes of the command below this, % of span, are rounding. */
const rounding = 1e-6;
/** Samples over which one step may be spread (rate limits, sampling in between). */
const spread = 3;
/** Samples that a command has to stand still after a step so that it is one (own choice). */
const dwell = 5;
/** Share of the record that a rest takes so that the whole is a hold, where no mode tells (own choice). */
const holdShare = 0.3;
/** Samples that the command has to stand still within a ramp so that it counts as a stop (own choice). */
const shortestStop = 10;
/** Turns of the command by less than this share of its whole range are none (own choice). */
const smallestTurn = 0.02;

/** The command as steps; a change spread over a few samples in one direction counts as one. */
export function commandSteps(op: Float64Array): CommandStep[] {
  const steps: { at: number; last: number; from: number; to: number }[] = [];
  for (let k = 1; k < op.length; k++) {
    const change = op[k]! - op[k - 1]!;
    if (Math.abs(change) <= rounding) continue;
    const before = steps[steps.length - 1];
    if (
      before &&
      k - before.last <= 1 &&
      k - before.at < spread &&
      Math.sign(change) === Math.sign(before.to - before.from)
    ) {
      before.last = k;
      before.to = op[k]!;
    } else {
      steps.push({ at: k, last: k, from: op[k - 1]!, to: op[k]! });
    }
  }
  return steps.map(({ at, from, to }, i) => ({ at, until: steps[i + 1]?.at ?? op.length, from, to }));
}

/**
 * What kind of test a command was made for.
 *
 * @param automatic 1 where the controller was in automatic; null when no mode was logged
 */
export function kindOf(op: Float64Array, automatic: Float64Array | null = null): ValveTestKind {
  const steps = commandSteps(op);
  if (steps.length === 0) return 'hold';
  const dwells = steps.map(({ at, until }) => until - at).sort((a, b) => a - b);
  const longest = Math.max(steps[0]!.at, dwells[dwells.length - 1]!);
  const median = dwells[Math.floor((dwells.length - 1) / 2)]!;
  // A controller that was moving OP before it was put in manual leaves one long rest.
  const movedInManual = automatic?.some(
    (flag, k) => k > 1 && flag === 0 && automatic[k - 1] === 0 && op[k] !== op[k - 1],
  );
  const wasAutomatic = automatic?.includes(1) ?? false;
  if (wasAutomatic && !movedInManual && automatic!.includes(0)) return 'hold';
  if (longest >= holdShare * op.length && median < dwell) return 'hold';
  // A ramp logged in coarse steps has many of them, each small against its whole range.
  const range = rangeOf(op);
  const sizes = steps.map(({ from, to }) => Math.abs(to - from)).sort((a, b) => a - b);
  const isFine = steps.length > 60 && sizes[Math.floor(sizes.length / 2)]! < range / 40;
  return median >= dwell && !isFine ? 'step' : 'stroke';
}

/** Legs between the turns and stops of the command, in order. */
export function commandLegs(op: Float64Array): CommandLeg[] {
  const least = Math.max(smallestTurn * rangeOf(op), rounding);
  const turns: number[] = [];
  let direction = 0;
  let extreme = 0;
  let start = 0;
  for (let k = 1; k < op.length; k++) {
    if (direction === 0) {
      if (Math.abs(op[k]! - op[start]!) > least) {
        direction = Math.sign(op[k]! - op[start]!);
        extreme = k;
        while (start + 1 < k && Math.abs(op[start + 1]! - op[0]!) <= rounding) start++;
        turns.push(start);
      }
      continue;
    }
    const ahead = direction * (op[k]! - op[extreme]!);
    if (ahead > rounding) extreme = k;
    else if (-ahead > least) {
      turns.push(extreme);
      direction = -direction;
      extreme = k;
    }
  }
  if (direction !== 0) turns.push(extreme);
  return turns
    .slice(1)
    .flatMap((to, i) => splitAtStops(op, turns[i]!, to, op[to]! > op[turns[i]!]! ? 1 : -1));
}

/** One leg for each ramp between stops: what is in between says nothing on how the stem moves. */
function splitAtStops(op: Float64Array, from: number, to: number, direction: 1 | -1): CommandLeg[] {
  const changes: number[] = [];
  for (let k = from + 1; k <= to; k++) if (Math.abs(op[k]! - op[k - 1]!) > rounding) changes.push(k);
  const gaps = changes.slice(1).map((k, i) => k - changes[i]!);
  const usual = [...gaps].sort((a, b) => a - b)[Math.floor(gaps.length / 2)] ?? 1;
  const legs: CommandLeg[] = [];
  let start = from;
  gaps.forEach((gap, i) => {
    if (gap < Math.max(shortestStop, 3 * usual)) return;
    legs.push({ from: start, to: changes[i]!, direction });
    start = changes[i]!;
  });
  return [...legs, { from: start, to, direction }];
}
