/** How well each pair of S and J explains PV, with the process found kept near: the map behind the estimate. */
import { createObjective } from './objective';
import { openingOf } from './opening';
import { lagged, type ProcessSettings } from './process-fit';
import type { Reconstruction } from './reconstruct-travel';
import { PairTrial } from './search';
import type { MisfitMap } from './stiction-fit';

const stepsS = 24;
const stepsJ = 17;
const onlyLag: readonly number[] = [0];

/**
 * Map around the pair `found`: S from 0.3 to 2 times its value (at most the largest), J from 0 to S. Each point is
 * the better of the two variants, with dead time free to move by a sample and the gain freely.
 */
export function misfitMap(
  pv: Float64Array,
  op: Float64Array,
  reconstruction: Reconstruction,
  settings: ProcessSettings,
  largest: number,
  found: { readonly S: number; readonly J: number },
): MisfitMap {
  const high = Math.min(largest * 1.02, 2 * found.S);
  const low = Math.min(0.3 * found.S, 0.9 * high);
  const S = Array.from({ length: stepsS }, (_, i) => low + ((high - low) * i) / (stepsS - 1));
  const highJ = Math.min(high, Math.max(2.2 * found.J, 0.5 * found.S));
  const J = Array.from({ length: stepsJ }, (_, i) => (highJ * i) / (stepsJ - 1));
  const { lag, delay, theta, actuatorLag } = reconstruction;
  const u = lagged(op, actuatorLag);
  const whole = Math.max(1, Math.round(delay));
  const delays = [whole - 1, whole, whole + 1].filter((d) => d >= 1);
  const objective = createObjective(pv, u, {
    ...settings,
    theta,
    lags: [lag * 0.8, lag, lag * 1.25],
    delays,
  });
  const trials = (['slides-on', 'sticks-again'] as const).map(
    (model) => new PairTrial(objective, u, model, 1, openingOf(u, settings.period)),
  );
  const misfit = (s: number, j: number): number =>
    Math.max(0, Math.min(...trials.map((trial) => trial.of(s, j, onlyLag).misfit[0])));
  return { S, J, misfit: J.map((j) => S.map((s) => (j > s ? null : misfit(s, j)))) };
}
