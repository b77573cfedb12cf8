/** All indicators, in the order in which they are shown. A new one is a file of its own and a line here. */
import { refuseUnknownOptions } from '../errors';
import type { Cycle } from '../oscillation/cycle';
import type { LoopRecord } from '../record/loop-record';
import { areaRatio } from './area-ratio';
import { bicoherence } from './bicoherence';
import { crossCorrelationHeights, crossCorrelationLags } from './cross-correlation';
import { derivativeHistogram } from './derivative-histogram';
import { ellipseWidth } from './ellipse-width';
import type { Evidence } from './evidence';
import { type Indicator, rowOf } from './indicator';
import { loopFacts } from './loop-facts';
import { oddHarmonics } from './odd-harmonics';
import { relayFit } from './relay-fit';
import { shapePairs } from './shape-pairs';
import { sineTriangle } from './sine-triangle';
import { surrogateIndicator } from './surrogate-test';

export const indicators: readonly Indicator[] = [
  crossCorrelationLags,
  crossCorrelationHeights,
  derivativeHistogram,
  areaRatio,
  sineTriangle,
  relayFit,
  shapePairs,
  oddHarmonics,
  bicoherence,
  surrogateIndicator,
  ellipseWidth,
];

export interface IndicatorOptions {
  /** Seed of the surrogates. Default 1. */
  readonly seed?: number;
}

/**
 * Runs every indicator on a loop: one row each, skipped ones with their reason.
 *
 * @param opCycle and pvCycle the cycles found in `record.op` and `record.pv`
 * @throws WrongUse for an unknown option
 */
export function runIndicators(
  record: LoopRecord,
  opCycle: Cycle,
  pvCycle: Cycle,
  options: IndicatorOptions = {},
): Evidence[] {
  refuseUnknownOptions('runIndicators', options, ['seed']);
  const facts = loopFacts(record, opCycle, pvCycle, options.seed ?? 1);
  return indicators.map((indicator) => rowOf(indicator, facts));
}
