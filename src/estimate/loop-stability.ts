/**
 * Gain margin of the linear loop that a controller reading and a process fit make together.
 *
 * A loop whose linear part is unstable would not hold a stick-slip cycle, it would swing out to its limits. So a fitted
 * process gain with no margin left is most likely too large, with a jump J too small to go with it.
 */
import type { ControllerReading } from '../process/read-controller';
import type { PlainProcess } from './objective';

export type LoopController = Pick<ControllerReading, 'form' | 'gain' | 'integralTime' | 'explains'>;

/** Phase of controller and process together at `w` radians a sample. `resetTime` in samples, null without integral action. */
function phase(w: number, process: PlainProcess, resetTime: number | null, integrating: boolean): number {
  const integral = resetTime === null ? 0 : -Math.atan(1 / (w * resetTime));
  const lags = -Math.atan(w * process.lag) - Math.atan(w * process.secondLag);
  return integral + lags - w * process.delay - (integrating ? Math.PI / 2 : 0);
}

/**
 * How many times the loop gain could grow before the linear loop becomes unstable; infinite where the phase never
 * gets to half a turn below the frequency of one turn in two samples.
 *
 * @param gain size of the process gain, PV units per % (per % and sample when integrating)
 * @param samplePeriod s
 */
export function gainMargin(
  controller: LoopController,
  process: PlainProcess,
  gain: number,
  integrating: boolean,
  samplePeriod: number,
): number {
  const integralOnly = controller.form === 'I';
  const resetTime = controller.integralTime === null ? null : controller.integralTime / samplePeriod;
  const turn = (w: number): number =>
    integralOnly
      ? phase(w, process, null, integrating) - Math.PI / 2
      : phase(w, process, resetTime, integrating);
  let low = 1e-5;
  let high = Math.PI;
  if (turn(high) > -Math.PI) return Number.POSITIVE_INFINITY;
  if (turn(low) < -Math.PI) return 0;
  for (let i = 0; i < 50; i++) {
    const middle = Math.sqrt(low * high);
    if (turn(middle) > -Math.PI) low = middle;
    else high = middle;
  }
  const w = Math.sqrt(low * high);
  const reset = resetTime === null ? 1 : Math.hypot(1, 1 / (w * resetTime));
  const control = Math.abs(controller.gain) * (integralOnly ? samplePeriod / w : reset);
  const size =
    (gain / Math.hypot(1, w * process.lag) / Math.hypot(1, w * process.secondLag)) *
    (integrating ? 1 / w : 1);
  return 1 / (control * size);
}
