/**
 * Second derivative of PV in integrating loops. A valve that jumps makes PV a triangle: its second derivative
 * is noise about zero, one hump. A sine stays a sine: its histogram has two humps, at the turning points.
 */
import { savitzkyGolay } from '../signal/filter';
import { noiseLevel, quantile, standardDeviation } from '../signal/statistics';
import { threeDigits } from '../signal/three-digits';
import { firstReason, needsIntegrating, needsPvCycle, needsShape } from './applies';
import { type Indicator, sayBetween } from './indicator';

const bins = 41;
/**
 * The sine in the two-hump curve is this many times the noise in it, or more: below, its two humps merge into
 * one.
 */
const leastSine = 1.7;

export interface HumpFit {
  /** Sums of squared distances of the histogram to the best curve with one hump and with two. */
  readonly one: number;
  readonly two: number;
}

/** Fits the histogram of `values` by a normal density, and by that of a sine in normal noise. */
export function fitHumps(values: Float64Array): HumpFit {
  const deviation = standardDeviation(values);
  const half = 3 * deviation;
  const width = (2 * half) / bins;
  const share = new Float64Array(bins);
  const middle = quantile(values, 0.5);
  for (const value of values) {
    const bin = Math.floor((value - middle + half) / width);
    if (bin >= 0 && bin < bins) share[bin]! += 1 / (values.length * width);
  }
  const misfit = (density: (x: number) => number): number =>
    share.reduce((sum, observed, i) => sum + (observed - density(-half + (i + 0.5) * width)) ** 2, 0);
  const normal = (x: number, sd: number): number =>
    Math.exp(-0.5 * (x / sd) ** 2) / (sd * Math.sqrt(2 * Math.PI));
  let one = Number.POSITIVE_INFINITY;
  for (let factor = 0.2; factor <= 1.2; factor += 0.05) {
    one = Math.min(
      one,
      misfit((x) => normal(x, factor * deviation)),
    );
  }
  let two = Number.POSITIVE_INFINITY;
  for (let amplitude = 0.6; amplitude <= 1.5; amplitude += 0.1) {
    for (let sine = leastSine; sine <= 20; sine *= 1.35) {
      const a = amplitude * deviation;
      const sd = a / sine;
      // Mean over one turn of the sine, at angles evenly spread over it.
      const density = (x: number): number => {
        let sum = 0;
        for (let k = 0; k < turns; k++) sum += normal(x - a * sineOf[k]!, sd);
        return sum / turns;
      };
      two = Math.min(two, misfit(density));
    }
  }
  return { one, two };
}

const turns = 24;
const sineOf = Float64Array.from({ length: turns }, (_, k) =>
  Math.sin((Math.PI * (k + 0.5)) / turns - Math.PI / 2),
);

export const derivativeHistogram: Indicator = {
  name: 'derivative histogram',
  threshold: '0.6 and more (one hump fits better): stiction; up to 0.4 (two humps): not',
  source: 'Horch 2000, thesis, KTH; rule: value from memory; index and its limits: own choice',
  skips: (facts) => firstReason(needsIntegrating(facts), needsPvCycle(facts), needsShape(facts)),
  evaluate({ pv, pvCycle, record }) {
    const period = pvCycle.period! / record.samplePeriod;
    const window = 2 * Math.max(1, Math.round(period / 12)) + 1;
    const second = savitzkyGolay(pv, window, 2, 2);
    // What noise alone leaves after the smoothing, against the second derivative of a sine of this amplitude.
    const gain = 720 / (window * (window ** 2 - 1) * (window ** 2 - 4));
    const noise = noiseLevel(pv) * Math.sqrt(gain);
    const sine = pvCycle.amplitude! * ((2 * Math.PI) / period) ** 2;
    if (noise > sine / leastSine) {
      return `The noise of PV hides its curvature: ${threeDigits(noise / sine)} of that of a sine of its size.`;
    }
    const { one, two } = fitHumps(second);
    const value = two / (one + two);
    return {
      value,
      says: sayBetween(value, 0.4, 0.6),
      why: `The second derivative of PV is fitted ${value >= 0.5 ? 'better' : 'worse'} by one hump than by two: two humps leave ${threeDigits(value)} of the misfit of both.`,
    };
  },
};
