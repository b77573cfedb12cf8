/** Strokes of simulated stems, as a test bench would log them: command, travel with noise, actuator pressure. */
import { seededRandom } from '../../src/signal/random';
import type { FrictionLaw } from '../../src/valve/friction-law';
import { createStem } from '../../src/valve/stem';

export interface BenchValve {
  /** N/m, m, kg, m2 */
  readonly spring: number;
  readonly stroke: number;
  readonly mass: number;
  readonly area: number;
  readonly friction: FrictionLaw;
  /** s */
  readonly actuatorLag: number;
  /** Pressure at 0 % of travel without friction, bar. */
  readonly benchLow: number;
}

export interface Bench {
  readonly samplePeriod: number;
  readonly op: Float64Array;
  readonly travel: Float64Array;
  /** bar */
  readonly pressure: Float64Array;
}

/** Simulated steps a sample. */
const inner = 10;

/**
 * Logs a command, given as a function of time in s, for `seconds`. Noise in % of travel; that of the pressure is the
 * same share of the spring's range.
 */
export function bench(
  valve: BenchValve,
  command: (time: number) => number,
  seconds: number,
  samplePeriod: number,
  noise: number,
  seed: number,
): Bench {
  const random = seededRandom(seed);
  const { spring, stroke, mass, friction, actuatorLag, area, benchLow } = valve;
  const stem = createStem({ spring, stroke, mass, friction, actuatorLag, startOp: command(0) });
  const samples = Math.floor(seconds / samplePeriod);
  const op = new Float64Array(samples);
  const travel = new Float64Array(samples);
  const pressure = new Float64Array(samples);
  const range = (spring * stroke) / area / 1e5;
  const dt = samplePeriod / inner;
  let drive = command(0);
  for (let k = 0; k < samples; k++) {
    for (let i = 1; i <= inner; i++) {
      const now = command((k - 1 + i / inner) * samplePeriod);
      stem.advance(now, dt);
      drive = actuatorLag > 0 ? now + (drive - now) * Math.exp(-dt / actuatorLag) : now;
    }
    op[k] = command(k * samplePeriod);
    travel[k] = stem.travel + noise * random.normal();
    pressure[k] = benchLow + (range * (drive + noise * random.normal())) / 100;
  }
  return { samplePeriod, op, travel, pressure };
}

/** Ramps between `points`, % of span, at `rate` %/s, resting `dwell` s at each. */
export function ramps(
  points: readonly number[],
  rate: number,
  dwell: number,
): { at: (time: number) => number; seconds: number } {
  const knots: { time: number; value: number }[] = [{ time: 0, value: points[0]! }];
  let time = dwell;
  knots.push({ time, value: points[0]! });
  for (let i = 1; i < points.length; i++) {
    time += Math.abs(points[i]! - points[i - 1]!) / rate;
    knots.push({ time, value: points[i]! });
    time += dwell;
    knots.push({ time, value: points[i]! });
  }
  const at = (now: number): number => {
    if (now <= 0) return points[0]!;
    for (let i = 1; i < knots.length; i++) {
      const [a, b] = [knots[i - 1]!, knots[i]!];
      if (now <= b.time)
        return b.time === a.time
          ? b.value
          : a.value + ((b.value - a.value) * (now - a.time)) / (b.time - a.time);
    }
    return points[points.length - 1]!;
  };
  return { at, seconds: time };
}
