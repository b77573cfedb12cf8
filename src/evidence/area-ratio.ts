/**
 * Area under each half cycle of the control error before its peak over the area behind it. A valve that
 * sticks and jumps makes the error of a self-regulating loop rise slowly to a late peak and then switch over;
 * a sine is the same on both sides.
 */
import { studentTQuantile } from '../signal/distributions';
import { mean, standardDeviation } from '../signal/statistics';
import { threeDigits } from '../signal/three-digits';
import { slowTrend } from '../signal/trend';
import { firstReason, needsPvCycle, needsSelfRegulating, needsShape } from './applies';
import { type HalfCycle, halfCycles, tooFewHalves } from './half-cycles';
import type { Indicator } from './indicator';

/** Ratios up to this count as about 1 (own choice). */
const aboutOne = 1.15;

/** Share of the area of one half cycle that lies before its peak, 0..1. */
export function shareBeforePeak(values: Float64Array, { from, to, sign }: HalfCycle): number {
  let peak = Math.ceil(from);
  for (let i = peak; i <= to; i++) if (sign * values[i]! > sign * values[peak]!) peak = i;
  // Trapezoids between the samples; at the ends from and to zero at the crossings.
  const first = Math.ceil(from);
  const last = Math.floor(to);
  let before = (Math.max(0, sign * values[first]!) * (first - from)) / 2;
  let behind = (Math.max(0, sign * values[last]!) * (to - last)) / 2;
  for (let i = first; i < last; i++) {
    const area = Math.max(0, sign * (values[i]! + values[i + 1]!)) / 2;
    if (i < peak) before += area;
    else behind += area;
  }
  // A half cycle lies above zero somewhere; should noise leave nothing, neither side has more.
  return before + behind > 0 ? before / (before + behind) : 0.5;
}

export const areaRatio: Indicator = {
  name: 'area ratio',
  threshold: `above 1: stiction; about 1: not (drawn at ${aboutOne}, with 95 % certainty)`,
  source:
    'Singhal, Salsbury 2005, J. Process Control 15:371-382; rule: value from memory; where the line is drawn: own choice',
  skips: (facts) => firstReason(needsSelfRegulating(facts), needsPvCycle(facts), needsShape(facts)),
  evaluate({ error, pvCycle, record }) {
    const period = pvCycle.period! / record.samplePeriod;
    const smooth = slowTrend(error, Math.max(1, Math.floor(period / 12)));
    const halves = halfCycles(error, period);
    const tooFew = tooFewHalves(halves);
    if (tooFew !== null) return tooFew;
    const all = Float64Array.from(halves, (half) => shareBeforePeak(smooth, half));
    const share = Math.min(0.98, Math.max(0.02, mean(all)));
    const reach = (studentTQuantile(0.975, all.length - 1) * standardDeviation(all)) / Math.sqrt(all.length);
    const value = share / (1 - share);
    const line = aboutOne / (1 + aboutOne);
    const says = share - reach > line ? 'stiction' : share + reach < line ? 'not' : 'undecided';
    return {
      value,
      says,
      why: `Over ${all.length} half cycles of the error, the area before the peak is ${threeDigits(value)} times that behind it${says === 'undecided' ? ', too scattered to tell from 1' : ''}.`,
    };
  },
};
