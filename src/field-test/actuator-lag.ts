/** The first-order lag between command and actuator, so that a stroke is read as if it had been slow. */
import { refuseUnknownOptions } from '../errors';

/** What a first-order lag of `lag` s makes of a signal that is held between its samples. */
export function lagged(op: Float64Array, lag: number, samplePeriod: number): Float64Array {
  if (lag === 0) return op;
  const keeps = Math.exp(-samplePeriod / lag);
  const drive = new Float64Array(op.length);
  drive[0] = op[0]!;
  for (let k = 1; k < op.length; k++) {
    // Between two samples the command goes along a straight line.
    const rate = (op[k]! - op[k - 1]!) / samplePeriod;
    const behind = rate * lag;
    drive[k] = op[k]! - behind + (drive[k - 1]! - op[k - 1]! + behind) * keeps;
  }
  return drive;
}

/**
 * The lag, s, with which the actuator pressure follows the command: the one whose line on the lagged command leaves
 * least of the pressure unexplained. Between 0 and `longest`.
 */
export function pressureLag(
  op: Float64Array,
  pressure: Float64Array,
  samplePeriod: number,
  options: { readonly longest?: number } = {},
): number {
  refuseUnknownOptions('pressureLag', options, ['longest']);
  const { longest = 30 } = options;
  const left = (lag: number): number => awayFromLine(lagged(op, lag, samplePeriod), pressure);
  // Coarse, then golden section around the best.
  const tried = Array.from({ length: 25 }, (_, i) => (i === 0 ? 0 : samplePeriod * 0.2 * 1.35 ** i)).filter(
    (lag) => lag <= longest,
  );
  let best = 0;
  tried.forEach((lag, i) => {
    if (left(lag) < left(tried[best]!)) best = i;
  });
  let low = tried[Math.max(0, best - 1)]!;
  let high = tried[Math.min(tried.length - 1, best + 1)]!;
  const share = (Math.sqrt(5) - 1) / 2;
  for (let i = 0; i < 24; i++) {
    const a = high - share * (high - low);
    const b = low + share * (high - low);
    if (left(a) < left(b)) high = b;
    else low = a;
  }
  return (low + high) / 2;
}

function awayFromLine(x: Float64Array, y: Float64Array): number {
  const n = x.length;
  let sx = 0;
  let sy = 0;
  for (let k = 0; k < n; k++) {
    sx += x[k]!;
    sy += y[k]!;
  }
  let xx = 0;
  let xy = 0;
  let yy = 0;
  for (let k = 0; k < n; k++) {
    const a = x[k]! - sx / n;
    const b = y[k]! - sy / n;
    xx += a * a;
    xy += a * b;
    yy += b * b;
  }
  return xx > 0 ? yy - (xy * xy) / xx : yy;
}
