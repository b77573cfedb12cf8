/**
 * The cycle as the describing function sees it: the loop cycles where its frequency response L(jw) meets -1/N(X), N
 * being the two-parameter valve's gain for a sine of amplitude X.
 *
 * Rough by nature, as a stick-slip cycle is far from a sine: on a published concentration loop OP swing 13-18 % low and
 * period 14-39 % high against simulation, on a published level loop within about 10 % (own simulations).
 */
import { type ComplexGain, describingFunction } from '../valve/describing-function';
import type { BalanceForecast } from './forecast';

export interface BalanceLoop {
  readonly response: 'self-regulating' | 'integrating';
  /** PV units per % (per % and s when integrating); its sign is that of the controller's action. */
  readonly gain: number;
  readonly lags: readonly number[];
  readonly deadTime: number;
  readonly controller: {
    readonly form: 'P' | 'PI' | 'PID' | 'I';
    readonly gain: number;
    readonly integralTime: number;
    readonly derivativeTime?: number;
  };
  /** s; a held OP acts half a scan late on average. */
  readonly scanPeriod: number;
}

const times = (a: ComplexGain, b: ComplexGain): ComplexGain => ({
  re: a.re * b.re - a.im * b.im,
  im: a.re * b.im + a.im * b.re,
});

/** Frequency response from travel to PV, `w` in radians a second; the process gain without its sign. */
export function processResponse(loop: BalanceLoop, w: number): ComplexGain {
  const angle = -w * (loop.deadTime + loop.scanPeriod / 2);
  let g: ComplexGain = {
    re: Math.abs(loop.gain) * Math.cos(angle),
    im: Math.abs(loop.gain) * Math.sin(angle),
  };
  for (const lag of loop.lags) {
    const size = 1 + (w * lag) ** 2;
    g = times(g, { re: 1 / size, im: (-w * lag) / size });
  }
  return loop.response === 'integrating' ? times(g, { re: 0, im: -1 / w }) : g;
}

/** Frequency response of the controller from error to OP. */
export function controllerResponse({ controller }: BalanceLoop, w: number): ComplexGain {
  const { form, gain, integralTime, derivativeTime = 0 } = controller;
  const integral = form === 'P' ? 0 : -gain / (integralTime * w);
  return { re: form === 'I' ? 0 : gain, im: integral + (form === 'PID' ? gain * derivativeTime * w : 0) };
}

/** Amplitudes tried, as multiples of S/2, from just above it to a hundred times. */
const amplitudes = Array.from({ length: 160 }, (_, i) => 1.0005 * 100 ** (i / 159));

/**
 * Period and swings where L(jw) N(X) = -1, of the largest X at which the cycle is stable (the loop answers a larger
 * one with less than 1); null where there is none.
 *
 * @param S dead band plus stick band, % of OP span, above 0
 * @param J slip jump, %
 */
export function balanceCycle(loop: BalanceLoop, S: number, J: number): BalanceForecast | null {
  if (!(S > 0)) return null;
  let before: { X: number; w: number; size: number } | null = null;
  let found: { X: number; w: number } | null = null;
  for (const multiple of amplitudes) {
    const X = (multiple * S) / 2;
    const N = describingFunction(X, S, Math.min(J, S));
    const w = crossing(loop, N);
    if (w === null) {
      before = null;
      continue;
    }
    const size = abs(open(loop, N, w));
    if (before !== null && before.size >= 1 && size < 1) {
      const share = Math.log(before.size) / Math.log(before.size / size);
      found = {
        X: before.X * (X / before.X) ** share,
        w: before.w * (w / before.w) ** share,
      };
    } else if (before === null && multiple === amplitudes[0] && size < 1 && J > 0) {
      // The locus of -1/N begins inside: the smallest swing that moves the valve already decays, no cycle.
      return null;
    }
    before = { X, w, size };
  }
  if (found === null) return null;
  const { X, w } = found;
  const flow = abs(times(describingFunction(X, S, Math.min(J, S)), processResponse(loop, w)));
  return { period: (2 * Math.PI) / w, opSwing: 2 * X, pvSwing: 2 * X * flow };
}

const abs = ({ re, im }: ComplexGain): number => Math.hypot(re, im);

function open(loop: BalanceLoop, N: ComplexGain, w: number): ComplexGain {
  return times(times(processResponse(loop, w), controllerResponse(loop, w)), N);
}

/** Frequency at which the loop with the valve at this amplitude is half a turn behind, unwrapped from low frequencies. */
function crossing(loop: BalanceLoop, N: ComplexGain): number | null {
  const slowest = 1e-4 / (loop.deadTime + loop.scanPeriod + loop.lags.reduce((a, b) => a + b, 0));
  const fastest = Math.PI / loop.scanPeriod;
  const steps = 400;
  const at = (i: number): number => slowest * (fastest / slowest) ** (i / steps);
  const angle = (w: number): number => {
    const { re, im } = open(loop, N, w);
    return Math.atan2(im, re);
  };
  let turned = angle(at(0));
  if (turned > 0) turned -= 2 * Math.PI;
  let last = turned;
  for (let i = 1; i <= steps; i++) {
    let now = angle(at(i));
    now -= 2 * Math.PI * Math.round((now - last) / (2 * Math.PI));
    if (last > -Math.PI && now <= -Math.PI) {
      const share = (last + Math.PI) / (last - now);
      return at(i - 1) * (at(i) / at(i - 1)) ** share;
    }
    last = now;
  }
  return null;
}
