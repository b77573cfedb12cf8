/**
 * Odd harmonics: the corners that a jumping valve puts into PV and OP; a linear loop's cycle has next to
 * none.
 */
import type { Cycle } from '../oscillation/cycle';
import { noiseLevel } from '../signal/statistics';
import { threeDigits } from '../signal/three-digits';
import { firstReason, needsShape } from './applies';
import { type Indicator, sayBetween } from './indicator';
import type { LoopFacts } from './loop-facts';

/** Half of a triangle's share (1/81 + 1/625 + 1/2401 against 1), and a seventh of it (own choice). */
const much = 0.007;
const little = 0.002;

interface Share {
  readonly name: string;
  readonly share: number;
  /** What white noise alone would put into three harmonics. */
  readonly noise: number;
}

function shareOf(name: string, cycle: Cycle, values: Float64Array): Share | null {
  if (cycle.oddHarmonicShare === null || cycle.amplitude === null) return null;
  const noise = (12 * noiseLevel(values) ** 2) / (cycle.amplitude ** 2 * values.length);
  return { name, share: cycle.oddHarmonicShare, noise };
}

const sharesOf = ({ op, pv, opCycle, pvCycle }: LoopFacts): Share[] =>
  [shareOf('OP', opCycle, op), shareOf('PV', pvCycle, pv)].filter((share) => share !== null);

export const oddHarmonics: Indicator = {
  name: 'odd harmonics',
  threshold: `${much} and more: stiction; below ${little}: not (triangle 0.014, square 0.146)`,
  source: 'common practice (sharp-cornered cycles), no single source; limits: own choice',
  skips: (facts) =>
    firstReason(
      needsShape(facts),
      sharesOf(facts).length > 0 ? null : 'A cycle has too few samples for a third harmonic.',
    ),
  evaluate(facts) {
    const most = sharesOf(facts).reduce((a, b) => (b.share > a.share ? b : a));
    if (most.noise > much / 2) return `Noise alone can make a share of ${threeDigits(most.noise)}.`;
    return {
      value: most.share,
      says: sayBetween(most.share, little, much),
      why: `Harmonics 3, 5 and 7 hold ${threeDigits(100 * most.share)} % of the power of ${most.name}'s cycle. A square disturbance from outside would show the same.`,
    };
  },
};
