/** Disturbances from outside the loop, as one value a step. */
import { WrongUse } from '../errors';
import { seededRandom } from '../signal/random';

export type Disturbance =
  /** amplitude sin(2 pi t/period + phase); phase in radians, default 0. */
  | { readonly kind: 'sine'; readonly amplitude: number; readonly period: number; readonly phase?: number }
  /** Plus and minus `amplitude`, half a period each; phase as above. */
  | { readonly kind: 'square'; readonly amplitude: number; readonly period: number; readonly phase?: number }
  /** Sum of normal steps; `spread` is the standard deviation that it gains in one second. */
  | { readonly kind: 'random-walk'; readonly spread: number; readonly seed: number }
  /**
   * Integrated moving average of order (1,1) at each `every` seconds: it steps by a(k) - theta a(k-1), a normal
   * with standard deviation `spread`, 0 <= theta <= 1.
   */
  | {
      readonly kind: 'ima';
      readonly spread: number;
      readonly theta: number;
      readonly every: number;
      readonly seed: number;
    }
  /**
   * A signal from elsewhere, such as the PV of a neighbouring loop: a value at the start and after each `every`
   * seconds, straight lines between them, the last one held.
   */
  | { readonly kind: 'signal'; readonly values: Float64Array; readonly every: number };

/**
 * Values at the ends of `count` steps of `step` seconds, in the unit of the amplitude or spread.
 *
 * @throws WrongUse for a period or time step that is not above 0, a theta outside 0..1 or a signal without values
 */
export function disturbanceValues(disturbance: Disturbance, count: number, step: number): Float64Array {
  const values = new Float64Array(count);
  switch (disturbance.kind) {
    case 'sine':
    case 'square': {
      const { amplitude, period, phase = 0 } = disturbance;
      if (!(period > 0)) {
        throw new WrongUse(`A disturbance needs a period above 0 s. Received ${period}.`);
      }
      for (let k = 0; k < count; k++) {
        const wave = Math.sin((2 * Math.PI * (k + 1) * step) / period + phase);
        values[k] = amplitude * (disturbance.kind === 'sine' ? wave : wave >= 0 ? 1 : -1);
      }
      return values;
    }
    case 'random-walk': {
      const random = seededRandom(disturbance.seed);
      const spread = disturbance.spread * Math.sqrt(step);
      let sum = 0;
      for (let k = 0; k < count; k++) {
        sum += spread * random.normal();
        values[k] = sum;
      }
      return values;
    }
    case 'ima': {
      const { spread, theta, every, seed } = disturbance;
      if (!(theta >= 0 && theta <= 1) || !(every > 0)) {
        throw new WrongUse(
          `An IMA disturbance needs theta from 0 to 1 and a time step above 0 s. Received ${theta} and ${every}.`,
        );
      }
      const random = seededRandom(seed);
      let sum = 0;
      let before = 0;
      let done = 0;
      for (let k = 0; k < count; k++) {
        for (; done < Math.floor(((k + 1) * step) / every + 1e-9); done++) {
          const shock = spread * random.normal();
          sum += shock - theta * before;
          before = shock;
        }
        values[k] = sum;
      }
      return values;
    }
    case 'signal': {
      const { values: signal, every } = disturbance;
      if (!(every > 0) || signal.length === 0) {
        throw new WrongUse(
          `A signal from elsewhere needs values and a time step above 0 s. Received ${signal.length} values every ${every} s.`,
        );
      }
      for (let k = 0; k < count; k++) {
        const at = Math.min(((k + 1) * step) / every, signal.length - 1);
        const below = Math.floor(at);
        const above = Math.min(below + 1, signal.length - 1);
        values[k] = signal[below]! + (at - below) * (signal[above]! - signal[below]!);
      }
      return values;
    }
  }
}
