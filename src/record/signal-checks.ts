/** Checks on the signals themselves: standing still, rounding, limits, compression. */

import { rangeOf } from '../signal/statistics';
import { all, type Checked, causeAndNumbers, numbers, percent, short, warns } from './checked';
import { type Compression, compressionOf } from './compression';
import type { FitnessCheck, Forbids } from './fitness';

/** OP that moves less than this in all, %, does not control anything. */
const constantOp = 0.01;
/** Longest run of one PV value: share of the record, and of the cycle when that is more. */
const mostFrozen = 0.2;
const fewestLevels = 5;
const farTooFewLevels = 3;
/** Share of samples with OP at a limit. */
const mostClipped = 0.02;
const farTooMuchClipped = 0.2;
/** OP closer than this to 0 or 100 % stands there. */
const atEnd = 0.05;
const mostCompressed = 3;
/** Moves of OP over what rounding may take from them, from which samples can be accounted for one by one. */
const movesOverTolerance = 3;
/** Share of OP's moves that an honest controller explains at least. */
const vouches = 0.9;

export function signalChecks(checked: Checked): FitnessCheck[] {
  const accounted = accountedFor(checked);
  return [
    opConstant(checked),
    pvFrozen(checked),
    levels('pv', checked.pvSwing, checked.pvStep, checked.pvCycle.present),
    levels('op', checked.opSwing, checked.opStep, checked.opCycle.present),
    clipped(checked),
    compression('pv', checked.record.pv, checked, accounted),
    compression('op', checked.record.op, checked, accounted),
  ];
}

function opConstant({ record: { op } }: Checked): FitnessCheck {
  const range = rangeOf(op);
  const passed = range > constantOp;
  return {
    code: 'op-constant',
    title: 'movement of OP',
    value: range,
    unit: '%',
    limit: `more than ${constantOp} %`,
    source: 'own choice: no valve answers less',
    passed,
    forbids: passed ? [] : all,
    text: passed
      ? `OP moves over ${short(range)} %.`
      : `OP stands still (it moves over ${short(range)} %): the loop was not controlling, or another column was taken for OP.`,
  };
}

function pvFrozen({ record: { pv }, period, record }: Checked): FitnessCheck {
  let longest = 0;
  for (let i = 0; i < pv.length; ) {
    let end = i + 1;
    while (end < pv.length && pv[end] === pv[i]) end++;
    longest = Math.max(longest, end - i);
    i = end;
  }
  const constant = longest === pv.length;
  const cycle = period === null ? 0 : period / record.samplePeriod;
  const passed = longest <= Math.max(mostFrozen * pv.length, cycle);
  // Without a cycle a coarsely rounded PV may well rest.
  const forbids: readonly Forbids[] = constant ? all : period === null ? warns : causeAndNumbers;
  return {
    code: 'pv-frozen',
    title: 'longest time in which PV keeps one value',
    value: longest * record.samplePeriod,
    unit: 's',
    limit: `at most ${percent(mostFrozen)} of the record, or one cycle`,
    source: 'own choice: longer than a sticking valve holds a loop that cycles',
    passed,
    forbids: passed ? [] : forbids,
    text: constant
      ? 'PV never changes: the transmitter or its logging is frozen.'
      : `PV keeps one value for ${short(longest * record.samplePeriod)} s at most${passed ? '' : ', as if the transmitter had been frozen'}.`,
  };
}

function levels(signal: 'pv' | 'op', swing: number, step: number, cycles: boolean): FitnessCheck {
  const name = signal.toUpperCase();
  const value = step > 0 ? swing / step : null;
  const passed = value === null || value >= fewestLevels;
  return {
    code: `${signal}-quantised`,
    title: `rounding steps in the swing of ${name}`,
    value,
    unit: '',
    limit: `at least ${fewestLevels}; below ${farTooFewLevels} no cause either`,
    source:
      'own choice: with fewer, S is known to no better than a fifth and the shape is that of the rounding',
    passed,
    forbids: passed || !cycles ? warns : value < farTooFewLevels ? causeAndNumbers : numbers,
    text:
      value === null
        ? `${name} has one value only.`
        : `${name} is written in steps of ${short(step)}, ${short(value)} of them in its ${cycles ? 'swing' : 'range'}.`,
  };
}

function clipped({ record: { op }, controller }: Checked): FitnessCheck {
  const low = Math.max(atEnd, controller?.limits.low ?? -Infinity);
  const high = Math.min(100 - atEnd, controller?.limits.high ?? Infinity);
  const share = (stands: (value: number) => boolean): number =>
    op.reduce((count, value) => count + (stands(value) ? 1 : 0), 0) / op.length;
  const atLow = share((value) => value <= low);
  const atHigh = share((value) => value >= high);
  const value = atLow + atHigh;
  const passed = value <= mostClipped;
  const where = [
    ...(atLow > 0 ? [`its low limit of ${low === atEnd ? 0 : short(low)} %`] : []),
    ...(atHigh > 0 ? [`its high limit of ${high === 100 - atEnd ? 100 : short(high)} %`] : []),
  ];
  return {
    code: 'op-clipped',
    title: 'samples with OP at a limit',
    value,
    unit: '',
    limit: `at most ${percent(mostClipped)}; beyond ${percent(farTooMuchClipped)} no cause either`,
    source: 'own choice: at a limit the loop is open, and the shape of the cycle is that of the limit',
    passed,
    forbids: passed ? [] : value > farTooMuchClipped ? causeAndNumbers : numbers,
    text:
      value === 0
        ? 'OP stays off its limits.'
        : `OP stands at ${where.join(' or ')} in ${percent(value)} of the samples.`,
  };
}

function compression(
  signal: 'pv' | 'op',
  values: Float64Array,
  { period, record }: Checked,
  accounted: Uint8Array | null,
): FitnessCheck {
  const name = signal.toUpperCase();
  const cycle = period === null ? null : period / record.samplePeriod;
  const found: Compression = compressionOf(values, cycle, accounted);
  const passed = found.factor <= mostCompressed;
  const how =
    found.kind === 'held'
      ? 'holds each value that was kept'
      : 'draws straight lines between the values that were kept';
  return {
    code: `${signal}-compressed`,
    title: `samples of ${name} for each value that was kept`,
    value: found.factor,
    unit: '',
    limit: `at most ${mostCompressed}`,
    source:
      'Thornhill, Choudhury, Shah 2004, J. Process Control 14:389-398 (value from memory); longer strides, and values held: own choice with the same limit',
    passed,
    forbids: passed ? [] : causeAndNumbers,
    text: passed
      ? `Nothing points to a compression of ${name} that matters${found.factor > 1 ? ` (factor ${short(found.factor)})` : ''}.`
      : `${name} was compressed by about ${short(found.factor)}: the historian ${how}. That imitates a sticking valve.`,
  };
}

/**
 * Samples of OP that the controller makes from the logged SP and PV: they, and the PV behind them, are as measured. Where
 * OP moves too little to tell sample by sample, a controller that explains OP over longer intervals vouches for all,
 * and one that does not for none. null when there is no controller to vouch.
 */
function accountedFor({ record, controller, opStep, pvStep }: Checked): Uint8Array | null {
  const { op } = record;
  if (controller === null) return null;
  const tolerance = 1.01 * (opStep + (controller.form === 'I' ? 0 : Math.abs(controller.gain) * pvStep));
  let squares = 0;
  for (let i = 1; i < op.length; i++) squares += (op[i]! - op[i - 1]!) ** 2;
  if (Math.sqrt(squares / op.length) >= movesOverTolerance * tolerance) {
    return Uint8Array.from(op, (value, i) =>
      Math.abs(value - controller.reproduced[i]!) <= tolerance ? 1 : 0,
    );
  }
  if (controller.explains >= vouches) return new Uint8Array(op.length).fill(1);
  return record.sp === null ? null : new Uint8Array(op.length);
}
