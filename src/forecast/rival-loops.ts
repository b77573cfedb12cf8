/**
 * Rival loops: pairs of S and J from the region that the record allows, each with the process that goes with it best,
 * and how near each comes to the record when it is simulated as it runs now.
 *
 * S and J trade against the process gain: a smaller jump through a larger gain gives the same PV. As every rival gets
 * the gain that fits its own S and J, a forecast from all of them carries that trade.
 */
import { seededRandom } from '../signal/random';
import { type CycleMeasure, measureCycle } from './cycle-measure';
import { type LoopModel, type ModelSource, modelWith, runModel } from './loop-model';

export interface RivalLoop {
  readonly model: LoopModel;
  readonly now: CycleMeasure;
  /** Largest of the three relative misses (period, PV swing, OP swing), as |ln ratio|. */
  readonly miss: number;
  readonly seed: number;
  /** J grows with the inverse of OP's speed to this power: see {@link jumpAt}. */
  readonly slowness: number;
}

/** Length of a simulation, cycles of the record. */
export const simulatedCycles = 25;
/** Least J of a rival whose J is not resolved, as a share of S (own choice). */
const leastJumpShare = 0.05;
/** Range of the power in {@link jumpAt}. Own choice, set on simulated stems. */
const slownessRange = { low: 0, high: 0.2 };

/** At most `count` rivals, the fit itself among them, those that come nearest to the record first. */
export function drawRivals(
  source: ModelSource,
  record: CycleMeasure,
  { count, seed }: { readonly count: number; readonly seed: number },
): RivalLoop[] {
  const { fit } = source;
  const random = seededRandom(seed);
  const between = (low: number, high: number): number => low + (high - low) * random.uniform();
  const rivals: RivalLoop[] = [];
  for (let i = 0; i < count; i++) {
    const S = i === 0 ? fit.S.value : between(fit.S.low, fit.S.high);
    const low = fit.J?.low ?? leastJumpShare * S;
    const high = fit.J?.high ?? S;
    const J = i === 0 ? fit.jumpDrawn : between(low, high);
    if (!(S > 0)) continue;
    const model = modelWith(source, { model: fit.model, S, J: Math.min(J, S) });
    if (model === null) continue;
    const of = seed + 10 * i;
    const run = runModel(model, {}, { period: record.period, cycles: simulatedCycles, seed: of });
    const now = measureCycle(run.pv, run.op, model.scanPeriod);
    const slowness = between(slownessRange.low, slownessRange.high);
    if (now !== null) rivals.push({ model, now, miss: missOf(now, record), seed: of, slowness });
  }
  return rivals.sort((a, b) => a.miss - b.miss);
}

function missOf(one: CycleMeasure, record: CycleMeasure): number {
  return Math.max(
    Math.abs(Math.log(one.period / record.period)),
    Math.abs(Math.log(one.pvSwing / record.pvSwing)),
    Math.abs(Math.log(one.opSwing / record.opSwing)),
  );
}

/**
 * Slip jump where OP ramps `speed` times as fast as in the record. Friction falls while a stem speeds up (Stribeck
 * curve), so a slow drive lets it jump further than a fast one, which it follows in a glide; how much depends on the
 * valve and is not in one record.
 */
export function jumpAt({ model: { valve }, slowness }: RivalLoop, speed: number): number {
  return Math.min(valve.S, valve.J * speed ** -slowness);
}
