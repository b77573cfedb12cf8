/**
 * Reads a manual-hold test: with the controller in manual at constant OP, did the cycle of PV die or did it stay? A cycle
 * that dies was made in the loop, one that stays comes from outside.
 */

import { findCycle } from '../oscillation/find-cycle';
import type { Note } from '../record/loop-record';
import { leastSquares } from '../signal/least-squares';
import { threeDigits } from '../signal/three-digits';
import { commandSteps } from './command';
import type { TestRecord } from './test-record';

export interface HoldFindings {
  readonly outcome: 'died' | 'stayed' | 'not-decided';
  /** The stretch at constant command: first sample, and the first after it. */
  readonly from: number;
  readonly to: number;
  /** Period looked at, s, and where it is from; null when there is none. */
  readonly period: number | null;
  /** Length of the hold in periods; null without one. */
  readonly periods: number | null;
  /** Peak-to-peak swing of PV at that period before the hold and in it, unit of PV. */
  readonly swingBefore: number | null;
  readonly swingIn: number | null;
  readonly notes: readonly Note[];
}

/** Periods that a hold has to last (common practice, no source). */
export const shortestHold = 3;
/** Samples from which a cycle can be looked for. */
const fewestBefore = 20;
/** Of the swing before: below the first it died, above the second it stayed (own choice). */
const left = { died: 0.3, stayed: 0.7 };

/**
 * @param period s, when known from an assessment; else it is read from the record before the hold
 * @param swing peak-to-peak swing of PV before the hold, when known
 */
export function readHold(record: TestRecord, period: number | null, swing: number | null): HoldFindings {
  const pv = record.pv!;
  const { samplePeriod } = record;
  const { from, to } = longestRest(record.op);
  const used = period ?? periodBefore(record, from);
  const seconds = (to - from) * samplePeriod;
  const decided = (
    outcome: HoldFindings['outcome'],
    text: string,
    swingBefore: number | null,
    swingIn: number | null,
  ): HoldFindings => ({
    outcome,
    from,
    to,
    period: used,
    periods: used === null ? null : seconds / used,
    swingBefore,
    swingIn,
    notes: [{ code: outcome === 'not-decided' ? 'cycle-not-decided' : `cycle-${outcome}`, text }],
  });
  if (used === null) {
    return decided(
      'not-decided',
      'No period is known: log PV before the hold for some cycles, or state the period of the assessment.',
      null,
      null,
    );
  }
  const n = Math.round(used / samplePeriod);
  if (n < 4) return decided('not-decided', 'The record has fewer than four samples in a period.', null, null);
  const swingBefore =
    swing ?? (from >= 2 * n ? swingAt(pv.subarray(Math.max(0, from - 6 * n), from), n) : null);
  // The first period is left out, as a cycle takes time to die.
  const swingIn = to - from >= 2 * n ? swingAt(pv.subarray(from + n, to), n) : null;
  const unit = record.pvUnit;
  const amount = (value: number): string => `${threeDigits(value)} ${unit}`.trim();
  if (seconds < shortestHold * used) {
    return decided(
      'not-decided',
      `The hold lasts ${threeDigits(seconds / used)} periods; at least ${shortestHold} are needed.`,
      swingBefore,
      swingIn,
    );
  }
  if (swingBefore === null || swingIn === null || swingBefore === 0) {
    return decided(
      'not-decided',
      'How far PV swung before the hold is not known: log some cycles before it, or state the swing of the assessment.',
      swingBefore,
      swingIn,
    );
  }
  const share = swingIn / swingBefore;
  const numbers = `PV swung by ${amount(swingBefore)} at a period of ${threeDigits(used)} s before, and by ${amount(swingIn)} in the hold.`;
  if (share < left.died)
    return decided('died', `The cycle died: ${numbers} It was made in the loop.`, swingBefore, swingIn);
  if (share > left.stayed) {
    return decided(
      'stayed',
      `The cycle stayed: ${numbers} It comes from outside the loop.`,
      swingBefore,
      swingIn,
    );
  }
  return decided(
    'not-decided',
    `${numbers} That is neither gone nor as before; hold again, or longer, in a quiet hour.`,
    swingBefore,
    swingIn,
  );
}

/** Period of the cycle before sample `to`, s, in PV or else in OP; null without one. */
function periodBefore({ pv, op, samplePeriod }: TestRecord, to: number): number | null {
  if (to < fewestBefore) return null;
  return (
    findCycle(pv!.subarray(0, to), samplePeriod).period ?? findCycle(op.subarray(0, to), samplePeriod).period
  );
}

/** The longest stretch without a change of the command. */
function longestRest(op: Float64Array): { from: number; to: number } {
  const steps = commandSteps(op);
  let best = { from: 0, to: steps[0]?.at ?? op.length };
  for (const { at, until } of steps) if (until - at > best.to - best.from) best = { from: at, to: until };
  return best;
}

/**
 * Peak-to-peak swing of the sine of period `n` samples that is in `values`: median over windows of two periods, each
 * freed of its own straight line.
 */
function swingAt(values: Float64Array, n: number): number {
  const found: number[] = [];
  const length = 2 * n;
  for (let from = 0; from + length <= values.length; from += n) {
    const part = values.subarray(from, from + length);
    const angle = (k: number): number => (2 * Math.PI * k) / n;
    const sine = Float64Array.from({ length }, (_, k) => Math.sin(angle(k)));
    const cosine = Float64Array.from({ length }, (_, k) => Math.cos(angle(k)));
    const line = Float64Array.from({ length }, (_, k) => k);
    const { coefficients } = leastSquares([sine, cosine, line], part);
    found.push(2 * Math.hypot(coefficients[1]!, coefficients[2]!));
  }
  found.sort((a, b) => a - b);
  return found[Math.floor((found.length - 1) / 2)] ?? 0;
}
