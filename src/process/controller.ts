/** The controller: P, PI, PID or integral action alone, with output limits, anti-windup and direction of action. */
import { refuseUnknownOptions, WrongUse } from '../errors';

export interface ControllerOptions {
  /** Default `PI`. */
  readonly form?: 'P' | 'PI' | 'PID' | 'I';
  /** % of OP per unit of PV, above 0. Default 1. For `I` the output moves at gain/integralTime times the error. */
  readonly gain?: number;
  /** s; not used by `P`. Default 60. */
  readonly integralTime?: number;
  /** s; used by `PID` alone, on PV, behind a lag of a tenth of it (common practice, no source). Default 0. */
  readonly derivativeTime?: number;
  /** `reverse` (default): OP rises when PV is below SP. `direct`: the opposite. */
  readonly action?: 'reverse' | 'direct';
  /** Limits of OP, %. Default 0 and 100. */
  readonly low?: number;
  readonly high?: number;
  /** OP while the error is zero and nothing has been integrated, %. Default 50. */
  readonly bias?: number;
  /** While the error is no larger than this, PV units, nothing is integrated. Default 0: all is. */
  readonly integralDeadBand?: number;
}

export interface Controller {
  /** One scan: set point and PV in PV units, answer in % of OP. */
  scan(sp: number, pv: number): number;
}

/**
 * A controller that is called once a scan of `scanPeriod` seconds (ideal, ISA standard form:
 * gain (e + integral of e / integralTime - derivativeTime dPV/dt)). While OP stands at a limit, the integral does
 * not go further that way.
 *
 * @throws WrongUse for a gain, integral time or scan period that is not above 0, crossed limits, or an unknown option
 */
export function createController(options: ControllerOptions, scanPeriod: number): Controller {
  refuseUnknownOptions('createController', options, [
    'form',
    'gain',
    'integralTime',
    'derivativeTime',
    'action',
    'low',
    'high',
    'bias',
    'integralDeadBand',
  ]);
  const {
    form = 'PI',
    gain = 1,
    integralTime = 60,
    derivativeTime = 0,
    action = 'reverse',
    low = 0,
    high = 100,
    bias = 50,
    integralDeadBand = 0,
  } = options;
  if (!(gain > 0 && integralTime > 0 && scanPeriod > 0 && derivativeTime >= 0)) {
    throw new WrongUse(
      'A controller needs gain, integral time and scan period above 0 and a derivative time of 0 or more. ' +
        `Received ${gain}, ${integralTime} s, ${scanPeriod} s and ${derivativeTime} s.`,
    );
  }
  if (!(low < high)) {
    throw new WrongUse(`The low limit of OP must be below the high one. Received ${low} and ${high}.`);
  }
  if (!(integralDeadBand >= 0)) {
    throw new WrongUse(`An integral dead band is 0 or more, in PV units. Received ${integralDeadBand}.`);
  }
  const direction = action === 'reverse' ? 1 : -1;
  const proportional = form === 'I' ? 0 : gain;
  const integral = form === 'P' ? 0 : (gain * scanPeriod) / integralTime;
  const derivative = form === 'PID' ? gain * derivativeTime : 0;
  const keep = derivativeTime > 0 ? Math.exp((-10 * scanPeriod) / derivativeTime) : 0;
  let sum = bias;
  let slope = 0;
  let lastPv: number | null = null;
  return {
    scan(sp: number, pv: number): number {
      const error = direction * (sp - pv);
      if (lastPv !== null) slope = keep * slope + ((1 - keep) * (pv - lastPv)) / scanPeriod;
      lastPv = pv;
      const acting = proportional * error - direction * derivative * slope;
      const moved = Math.abs(error) > integralDeadBand ? sum + integral * error : sum;
      const wanted = acting + moved;
      const windsUp = (wanted > high && error > 0) || (wanted < low && error < 0);
      if (!windsUp) sum = moved;
      return Math.min(high, Math.max(low, acting + sum));
    },
  };
}
