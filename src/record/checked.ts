/** What the checks of a record look at, and how they say what they found. */
import type { Cycle } from '../oscillation/cycle';
import type { ControllerReading } from '../process/read-controller';
import { resolution } from '../signal/resolution';
import type { Forbids } from './fitness';
import type { LoopRecord } from './loop-record';

export interface Checked {
  readonly record: LoopRecord;
  readonly opCycle: Cycle;
  readonly pvCycle: Cycle;
  readonly controller: ControllerReading | null;
  /** Period of OP's cycle, else of PV's, s; null without one. */
  readonly period: number | null;
  /** Usual swing from crest to trough of the cycle, else from lowest to highest value. */
  readonly opSwing: number;
  readonly pvSwing: number;
  /** Step between the values that occur. */
  readonly opStep: number;
  readonly pvStep: number;
}

export function checked(
  record: LoopRecord,
  opCycle: Cycle,
  pvCycle: Cycle,
  controller: ControllerReading | null,
): Checked {
  return {
    record,
    opCycle,
    pvCycle,
    controller,
    period: opCycle.present ? opCycle.period : pvCycle.period,
    opSwing: swing(opCycle, record.op),
    pvSwing: swing(pvCycle, record.pv),
    opStep: resolution(record.op),
    pvStep: resolution(record.pv),
  };
}

function swing(cycle: Cycle, values: Float64Array): number {
  if (cycle.present && cycle.amplitude !== null) return 2 * cycle.amplitude;
  const low = values.reduce((a, b) => Math.min(a, b), Infinity);
  const high = values.reduce((a, b) => Math.max(a, b), -Infinity);
  return high - low;
}

/** What a failure takes away: everything, what rests on causes, or the numbers alone. */
export const all: readonly Forbids[] = ['cycle', 'cause', 'numbers'];
export const causeAndNumbers: readonly Forbids[] = ['cause', 'numbers'];
export const numbers: readonly Forbids[] = ['numbers'];
export const warns: readonly Forbids[] = [];

export function percent(share: number): string {
  const value = 100 * share;
  return `${value === 0 || value >= 10 ? value.toFixed(0) : value.toPrecision(2)} %`;
}

/** A number with three digits, plainly written. */
export function short(value: number): string {
  return value === 0 ? '0' : String(Number(value.toPrecision(3)));
}
