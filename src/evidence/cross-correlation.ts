/**
 * Cross-correlation of OP and PV: an odd function of the lag for stiction, an even one for tuning or a
 * disturbance. Two ratios read how odd it is: from the zero crossings nearest lag 0, and from the heights
 * between.
 */
import { crossCorrelation } from '../signal/autocorrelation';
import { threeDigits } from '../signal/three-digits';
import { firstReason, needsBothCycles, needsSelfRegulating, needsShape } from './applies';
import { type Indicator, sayBetween } from './indicator';
import type { LoopFacts } from './loop-facts';

const source = 'Horch 1999, Control Eng. Practice 7:1221-1231; thresholds: value from memory';

const skips = (facts: LoopFacts): string | null =>
  firstReason(needsSelfRegulating(facts), needsBothCycles(facts), needsShape(facts));

interface CorrelationShape {
  /** Zero crossings nearest lag 0, samples, both as distances. */
  readonly left: number;
  readonly right: number;
  /** Value at lag 0, and the largest between the crossings, with the sign that the value at lag 0 has. */
  readonly atZero: number;
  readonly extreme: number;
}

/** null when the correlation does not cross zero within a period on both sides. */
function correlationShape(op: Float64Array, pv: Float64Array, period: number): CorrelationShape | null {
  const maxLag = Math.min(op.length - 1, Math.ceil(period));
  const r = crossCorrelation(op, pv, maxLag);
  const at = (lag: number): number => r[lag + maxLag]!;
  const crossing = (direction: 1 | -1): number | null => {
    for (let lag = 1; lag <= maxLag; lag++) {
      const before = at(direction * (lag - 1));
      const after = at(direction * lag);
      if (before > 0 !== after > 0) return lag - 1 + before / (before - after);
    }
    return null;
  };
  const right = crossing(1);
  const left = crossing(-1);
  if (left === null || right === null) return null;
  let extreme = 0;
  for (let lag = -Math.floor(left); lag <= Math.floor(right); lag++) {
    extreme = Math.max(extreme, Math.abs(at(lag)));
  }
  return { left, right, atZero: Math.abs(at(0)), extreme };
}

const noCrossing = 'The correlation of OP and PV does not cross zero within a period on both sides.';

export const crossCorrelationLags: Indicator = {
  name: 'cross-correlation, lags',
  threshold: '2/3 and more: stiction; up to 1/3: not',
  source,
  skips,
  evaluate({ op, pv, period }) {
    const shape = correlationShape(op, pv, period);
    if (shape === null) return noCrossing;
    const { left, right } = shape;
    const value = Math.abs(left - right) / (left + right);
    return {
      value,
      says: sayBetween(value, 1 / 3, 2 / 3),
      why: `The correlation of OP and PV crosses zero ${threeDigits(left)} samples before and ${threeDigits(right)} after lag 0: ratio ${threeDigits(value)}.`,
    };
  },
};

export const crossCorrelationHeights: Indicator = {
  name: 'cross-correlation, heights',
  threshold: '1/3 and more: stiction; up to 0.072: not',
  source,
  skips,
  evaluate({ op, pv, period }) {
    const shape = correlationShape(op, pv, period);
    if (shape === null) return noCrossing;
    const { atZero, extreme } = shape;
    const value = (extreme - atZero) / (extreme + atZero);
    return {
      value,
      says: sayBetween(value, 0.072, 1 / 3),
      why: `The correlation of OP and PV is ${threeDigits(atZero)} at lag 0 and ${threeDigits(extreme)} at most beside it: ratio ${threeDigits(value)}.`,
    };
  },
};
