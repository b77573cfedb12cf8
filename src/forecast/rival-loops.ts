/**
 * Rival loops: pairs of S and J from the region that the record allows, each with the process that goes with it best,
 * and how near each comes to the record when it is simulated as it runs now.
 *
 * S and J trade against the process gain: a smaller jump through a larger gain gives the same PV. As every rival gets
 * the gain that fits its own S and J, a forecast from all of them carries that trade.
 */
import type { Findings } from '../assessment/findings';
import { seededRandom } from '../signal/random';
import type { CycleMeasure } from './cycle-measure';
import { measureCycle } from './cycle-measure';
import { type LoopModel, type ModelSource, modelWith, runModel } from './loop-model';

export interface RivalLoop {
  readonly model: LoopModel;
  readonly now: CycleMeasure;
  /** Largest of the three relative misses (period, PV swing, OP swing), as |ln ratio|. */
  readonly miss: number;
  readonly seed: number;
}

/** Length of a simulation, cycles of the record. */
export const simulatedCycles = 25;
/** Least J of a rival whose J is not resolved, as a share of S (own choice). */
const leastJumpShare = 0.05;

/** `count` rivals, the best fit first, those that come nearest to the record first among the others. */
export function drawRivals(
  source: ModelSource,
  findings: Findings,
  record: CycleMeasure,
  { count, seed }: { readonly count: number; readonly seed: number },
): RivalLoop[] {
  const fit = findings.stiction.fit;
  if (fit === null) return [];
  const random = seededRandom(seed);
  const between = (low: number, high: number): number => low + (high - low) * random.uniform();
  const rivals: RivalLoop[] = [];
  for (let i = 0; i < count; i++) {
    const S = i === 0 ? fit.S.value : between(fit.S.low, fit.S.high);
    const low = fit.J?.low ?? leastJumpShare * S;
    const high = fit.J?.high ?? S;
    const J = i === 0 ? fit.jumpDrawn : between(low, high);
    if (!(S > 0)) continue;
    const model = modelWith(source, { model: fit.model, S, J: Math.min(J, S) }, findings);
    if (model === null) continue;
    const of = seed + 10 * i;
    const run = runModel(model, {}, { period: record.period, cycles: simulatedCycles, seed: of });
    const now = measureCycle(run.pv, run.op, model.scanPeriod);
    if (now !== null) rivals.push({ model, now, miss: missOf(now, record), seed: of });
  }
  return rivals.sort((a, b) => a.miss - b.miss);
}

export function missOf(one: CycleMeasure, record: CycleMeasure): number {
  return Math.max(
    Math.abs(Math.log(one.period / record.period)),
    Math.abs(Math.log(one.pvSwing / record.pvSwing)),
    Math.abs(Math.log(one.opSwing / record.opSwing)),
  );
}
