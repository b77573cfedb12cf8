/**
 * Sine against triangle: after an integrator, the jumps of a sticking valve show as a triangle, in OP where
 * the controller is the first integrator (self-regulating process), in PV where the process is.
 */
import { threeDigits } from '../signal/three-digits';
import { firstReason, needsKnownResponse, needsOpCycle, needsPvCycle, needsShape } from './applies';
import { halfCycles, tooFewHalves } from './half-cycles';
import { type Indicator, sayBetween } from './indicator';
import { sumOfFits } from './shape-fits';

export const sineTriangle: Indicator = {
  name: 'sine against triangle',
  threshold: '0.6 and more (triangle fits better): stiction; up to 0.4 (sine): not',
  source: 'He, Wang, Pottmann, Qin 2007, Ind. Eng. Chem. Res. 46:4549-4560; thresholds: value from memory',
  skips: (facts) =>
    firstReason(
      needsKnownResponse(facts),
      facts.record.response === 'integrating' ? needsPvCycle(facts) : needsOpCycle(facts),
      needsShape(facts),
    ),
  evaluate({ op, pv, period, record }) {
    const inPv = record.response === 'integrating';
    const signal = inPv ? pv : op;
    const halves = halfCycles(signal, period);
    const tooFew = tooFewHalves(halves);
    if (tooFew !== null) return tooFew;
    const { sine, triangle } = sumOfFits(signal, halves);
    if (sine + triangle === 0) return 'Sine and triangle fit equally well.';
    const value = sine / (sine + triangle);
    return {
      value,
      says: sayBetween(value, 0.4, 0.6),
      why: `Over ${halves.length} half cycles of ${inPv ? 'PV' : 'OP'} the sine leaves ${threeDigits(value)} of the misfit of sine and triangle together.`,
    };
  },
};
