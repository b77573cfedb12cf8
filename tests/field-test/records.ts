/** Test records made in the tests, and valves on a bench. */
import type { TestRecord } from '../../src/field-test/test-record';
import { seededRandom } from '../../src/signal/random';
import {
  type FrictionLaw,
  relayFriction,
  stepDownFriction,
  stribeckFriction,
} from '../../src/valve/friction-law';
import { type Bench, type BenchValve, bench, ramps } from './strokes';

/** A record with what is given; everything else is plain. */
export function testRecord(parts: Partial<TestRecord> & Pick<TestRecord, 'op' | 'samplePeriod'>): TestRecord {
  return {
    loop: '31-FC-104',
    source: 'made in a test',
    sha256: '0'.repeat(64),
    start: '2026-03-10T09:00:00.000Z',
    response: 'self-regulating',
    travel: null,
    pv: null,
    pvUnit: '',
    notes: [],
    ...parts,
  };
}

export const benchRecord = (
  { samplePeriod, op, travel, pressure }: Bench,
  parts: Partial<TestRecord> = {},
): TestRecord => testRecord({ samplePeriod, op, travel, pressure, pressureUnit: 'bar', ...parts });

export interface StrokeCase {
  readonly valve: BenchValve;
  /** % of span, as the friction makes them. */
  readonly S: number;
  readonly J: number;
  readonly samplePeriod: number;
  readonly noise: number;
  readonly record: TestRecord;
}

const area = 0.0645;
export const areaText = '645 cm2';

/**
 * Twelve valves on the bench: friction by the Stribeck curve from nearly no jump to one of more than half of S, sampled
 * every 0.1 to 1 s, with noise of 0.02 to 0.1 % of travel, an actuator lag up to 1 s, slow strokes between 35 and 65 %.
 */
export function twelveStrokes(seed: number): StrokeCase[] {
  const random = seededRandom(seed);
  return Array.from({ length: 12 }, (_, i) => {
    const spring = 2e4 * Math.exp(1.5 * random.uniform());
    const stroke = 0.02 + 0.08 * random.uniform();
    const newtonPerPercent = (spring * stroke) / 100;
    const S = 0.5 * Math.exp(2.3 * random.uniform());
    const J = S * [0.05, 0.2, 0.4, 0.6][i % 4]!;
    const samplePeriod = [0.1, 0.2, 0.5, 1][Math.floor(i / 3)]!;
    const noise = [0.02, 0.05, 0.1][i % 3]!;
    const actuatorLag = random.uniform();
    const rate = [0.1, 0.2, 0.4][(i + 1) % 3]!;
    const friction = stribeckFriction({
      static: ((S + J) / 2) * newtonPerPercent,
      coulomb: ((S - J) / 2) * newtonPerPercent,
      viscous: 612.9,
      stribeckSpeed: 2.54e-4,
    });
    const valve: BenchValve = { spring, stroke, mass: 1.361, area, friction, actuatorLag, benchLow: 0.2 };
    const { at, seconds } = ramps(
      [50, 65, 35, 65, 35, 50].map((op) => ({ op, rate })),
      10,
    );
    const record = benchRecord(bench(valve, at, seconds, samplePeriod, noise, 100 * seed + i));
    return { valve, S, J, samplePeriod, noise, record };
  });
}

export interface SpeedCase {
  readonly law: string;
  readonly valve: BenchValve;
  readonly friction: FrictionLaw;
  readonly record: TestRecord;
}

/**
 * Twelve valves, three of each law, stroked between 20 and 80 % at seven speeds. Viscous friction is large enough for the
 * stem to slide steadily: with less, air against a spring cannot hold a speed at which friction falls.
 */
export function twelveSpeedSets(seed: number): SpeedCase[] {
  const random = seededRandom(seed);
  const laws = ['relay', 'relay with viscous slope', 'step-down', 'Stribeck'] as const;
  return Array.from({ length: 12 }, (_, i) => {
    const law = laws[i % 4]!;
    const spring = 3e4 * Math.exp(0.8 * random.uniform());
    const stroke = 0.05 + 0.05 * random.uniform();
    const mass = 1.361;
    const coulomb = ((0.8 + 1.5 * random.uniform()) * spring * stroke) / 100;
    const excess = (0.25 + 0.5 * random.uniform()) * coulomb;
    const stribeckSpeed = 0.002 + 0.002 * random.uniform();
    const share = random.uniform();
    const damping = 2 * Math.sqrt(spring * mass);
    const rest = coulomb + excess;
    const friction = {
      relay: relayFriction({ coulomb, viscous: 0 }),
      'relay with viscous slope': relayFriction({ coulomb, viscous: coulomb * (15 + 25 * share) }),
      'step-down': stepDownFriction({ static: rest, coulomb, viscous: damping * (1.2 + share) }),
      Stribeck: stribeckFriction({
        static: rest,
        coulomb,
        viscous: (excess / stribeckSpeed) * (0.95 + 0.3 * share),
        stribeckSpeed,
      }),
    }[law];
    const valve: BenchValve = { spring, stroke, mass, area, friction, actuatorLag: 0.2, benchLow: 0.2 };
    const points = [0.5, 1, 1.5, 2.5, 4, 6, 9].flatMap((rate) =>
      [80, 20, 80, 20].map((op) => ({ op, rate })),
    );
    const { at, seconds } = ramps([{ op: 20, rate: 1 }, ...points], 4);
    const samplePeriod = [0.05, 0.1, 0.1][i % 3]!;
    const noise = [0.01, 0.02, 0.05][Math.floor(i / 4)]!;
    const record = benchRecord(bench(valve, at, seconds, samplePeriod, noise, 100 * seed + i));
    return { law, valve, friction, record };
  });
}
