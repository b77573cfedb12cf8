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

/** Ramps from the first point to the others, % of span, each at its rate in %/s, resting `dwell` s at each. */
export function ramps(
  points: readonly { readonly op: number; readonly rate: number }[],
  dwell: number,
): { at: (time: number) => number; seconds: number } {
  const start = points[0]!.op;
  const knots = [
    { time: 0, op: start },
    { time: dwell, op: start },
  ];
  for (const { op, rate } of points.slice(1)) {
    const last = knots[knots.length - 1]!;
    const time = last.time + Math.abs(op - last.op) / rate;
    knots.push({ time, op }, { time: time + dwell, op });
  }
  let place = 1;
  const at = (time: number): number => {
    while (place < knots.length - 1 && time > knots[place]!.time) place++;
    while (place > 1 && time <= knots[place - 1]!.time) place--;
    const [a, b] = [knots[place - 1]!, knots[place]!];
    const share = b.time > a.time ? (time - a.time) / (b.time - a.time) : 1;
    return a.op + (b.op - a.op) * Math.min(1, Math.max(0, share));
  };
  return { at, seconds: knots[knots.length - 1]!.time };
}
