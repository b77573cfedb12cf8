/**
 * Which fits PV's half cycles best: a sine, or the answer of a process to a relay (or a triangle, for
 * integrators).
 */
import { threeDigits } from '../signal/three-digits';
import { firstReason, needsPvCycle, needsShape } from './applies';
import { halfCycles, tooFewHalves } from './half-cycles';
import { type Indicator, sayBetween } from './indicator';
import { sumOfFits } from './shape-fits';

export const relayFit: Indicator = {
  name: 'relay, triangle, sine',
  threshold: 'above 0.21 (relay or triangle): stiction; below -0.21 (sine): not',
  source: 'Rossi, Scali 2005, J. Process Control 15:505-514; thresholds: value from memory',
  skips: (facts) => firstReason(needsPvCycle(facts), needsShape(facts)),
  evaluate({ error, pvCycle, record }) {
    const halves = halfCycles(error, pvCycle.period! / record.samplePeriod);
    const tooFew = tooFewHalves(halves);
    if (tooFew !== null) return tooFew;
    const { sine, triangle, relay } = sumOfFits(error, halves);
    const other = Math.min(triangle, relay);
    if (sine + other === 0) return 'All shapes fit equally well.';
    const value = (sine - other) / (sine + other);
    return {
      value,
      says: sayBetween(value, -0.21, 0.21),
      why: `Over ${halves.length} half cycles of PV the ${relay <= triangle ? 'relay' : 'triangle'} fits ${value >= 0 ? 'better' : 'worse'} than the sine: ${threeDigits(value)} on a scale from -1 to 1.`,
    };
  },
};
