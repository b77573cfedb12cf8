/**
 * The cycle as the describing function sees it: the loop cycles where its frequency response L(jw) meets -1/N(X), N
 * being the two-parameter valve's gain for a sine of amplitude X.
 *
 * Rough by nature, as a stick-slip cycle is far from a sine: on a published concentration loop OP swing 13-18 % low and
 * period 14-40 % high against simulation, on a published level loop within about 12 % (own simulations).
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
 * Period and swings of the stable solution of L(jw) N(X) = -1, that of the largest X; null where there is none.
 *
 * Where the phase falls through half a turn, a cycle is stable when a larger one is answered with less than 1; where
 * it rises through it, as under integral action on an integrating process, when it is answered with more.
 *
 * @param S dead band plus stick band, % of OP span, above 0
 * @param J slip jump, %
 */
export function balanceCycle(loop: BalanceLoop, S: number, J: number): BalanceForecast | null {
  if (!(S > 0)) return null;
  const last: Partial<Record<Crossing['way'], { X: number; w: number; size: number }>> = {};
  let found: { X: number; w: number } | null = null;
  for (const multiple of amplitudes) {
    const X = (multiple * S) / 2;
    const N = describingFunction(X, S, Math.min(J, S));
    const met = crossings(loop, N);
    for (const way of ['rises', 'falls'] as const) {
      const w = met.find((crossing) => crossing.way === way)?.w;
      const before = last[way];
      last[way] = w === undefined ? undefined : { X, w, size: abs(open(loop, N, w)) };
      const now = last[way];
      if (before === undefined || now === undefined) continue;
      const passes = way === 'falls' ? before.size >= 1 && now.size < 1 : before.size < 1 && now.size >= 1;
      if (!passes) continue;
      const share = Math.log(before.size) / Math.log(before.size / now.size);
      found = { X: before.X * (X / before.X) ** share, w: before.w * (now.w / before.w) ** share };
    }
  }
  if (found === null) return null;
  const { X, w } = found;
  const flow = abs(times(describingFunction(X, S, Math.min(J, S)), processResponse(loop, w)));
  return { period: (2 * Math.PI) / w, opSwing: 2 * X, pvSwing: 2 * X * flow };
}

interface Crossing {
  readonly w: number;
  readonly way: 'falls' | 'rises';
}

const abs = ({ re, im }: ComplexGain): number => Math.hypot(re, im);

function open(loop: BalanceLoop, N: ComplexGain, w: number): ComplexGain {
  return times(times(processResponse(loop, w), controllerResponse(loop, w)), N);
}

/** Frequencies at which the loop with the valve at this amplitude is half a turn behind, rising from low ones. */
function crossings(loop: BalanceLoop, N: ComplexGain): Crossing[] {
  const slowest = 1e-4 / (loop.deadTime + loop.scanPeriod + loop.lags.reduce((a, b) => a + b, 0));
  const fastest = Math.PI / loop.scanPeriod;
  const steps = 400;
  const at = (i: number): number => slowest * (fastest / slowest) ** (i / steps);
  const angle = (w: number): number => {
    const { re, im } = open(loop, N, w);
    return Math.atan2(im, re);
  };
  const found: Crossing[] = [];
  let last = angle(at(0));
  if (last > 0) last -= 2 * Math.PI;
  for (let i = 1; i <= steps; i++) {
    let now = angle(at(i));
    now -= 2 * Math.PI * Math.round((now - last) / (2 * Math.PI));
    if (last > -Math.PI !== now > -Math.PI) {
      const share = (last + Math.PI) / (last - now);
      found.push({ w: at(i - 1) * (at(i) / at(i - 1)) ** share, way: now < last ? 'falls' : 'rises' });
    }
    last = now;
  }
  return found;
}
