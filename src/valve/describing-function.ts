/**
 * Describing function of the two-parameter valve: gain and phase with which it passes the fundamental of a sine.
 *
 * N = -(A - jB)/(pi X) with phi = asin((X - S)/X),
 * A = (X/2) sin 2phi - 2X cos phi - X (pi/2 + phi) + 2 (S - J) cos phi,
 * B = -3X/2 + (X/2) cos 2phi + 2X sin phi - 2 (S - J) sin phi
 * (Choudhury, Thornhill, Shah 2005, Control Eng. Practice 13:641-658; formula from memory, checked in the tests against
 * the element's own Fourier term).
 *
 * A loop cycles, roughly, where its frequency response meets -1/N. Predictions of amplitude and period made with it
 * are rough: a stick-slip cycle is far from a sine.
 */
import { WrongUse } from '../errors';

export interface ComplexGain {
  readonly re: number;
  readonly im: number;
}

/**
 * Gain of the valve for an OP sine.
 *
 * @param amplitude of OP from its mean, %; below S/2 the valve does not move and the gain is 0
 * @param S dead band plus stick band, %
 * @param J slip jump, %
 * @throws WrongUse unless 0 <= J <= S and the amplitude is above 0
 */
export function describingFunction(amplitude: number, S: number, J: number): ComplexGain {
  if (!(J >= 0 && S >= J && amplitude > 0 && Number.isFinite(amplitude))) {
    throw new WrongUse(
      `A describing function needs an amplitude above 0 and 0 <= J <= S. Received ${amplitude}, S = ${S}, J = ${J}.`,
    );
  }
  const X = amplitude;
  if (X < S / 2) return { re: 0, im: 0 };
  const phi = Math.asin((X - S) / X);
  const behind = 2 * (S - J);
  const A =
    (X / 2) * Math.sin(2 * phi) - 2 * X * Math.cos(phi) - X * (Math.PI / 2 + phi) + behind * Math.cos(phi);
  const B = (-3 * X) / 2 + (X / 2) * Math.cos(2 * phi) + 2 * X * Math.sin(phi) - behind * Math.sin(phi);
  return { re: -A / (Math.PI * X), im: B / (Math.PI * X) };
}
