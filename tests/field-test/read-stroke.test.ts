import { describe, expect, it } from 'vitest';
import { readValveTest } from '../../src/field-test/read-valve-test';
import { seededRandom } from '../../src/signal/random';
import { relayFriction } from '../../src/valve/friction-law';
import { createPositionerStem } from '../../src/valve/positioner-stem';
import { twoParameterValve } from '../../src/valve/two-parameter';
import { expectClose } from '../closeness';
import { areaText, benchRecord, type StrokeCase, testRecord, twelveStrokes } from './records';
import { bench, ramps } from './strokes';

const told = ({ S, J, samplePeriod, noise }: StrokeCase): string =>
  `S ${S.toFixed(2)}, J ${J.toFixed(2)}, every ${samplePeriod} s, noise ${noise} %`;

describe('strokes of twelve valves with the stem, noise, sampled every 0.1 to 1 s', () => {
  const cases = [3, 5].flatMap(twelveStrokes);
  const read = cases.map((one) => ({
    one,
    found: readValveTest(one.record, { area: areaText, stroke: `${1000 * one.valve.stroke} mm` }),
  }));

  it('gives the dead band within 5 % or 0.05 % of span', () => {
    for (const { one, found } of read) {
      const allowed = Math.max(0.05 * one.S, 0.05);
      expectClose(found.reading.deadBand!.value, one.S, { absolute: allowed }, `dead band: ${told(one)}`);
    }
  });

  it('gives the spring rate within 2 %', () => {
    for (const { one, found } of read) {
      const rate = found.friction!.springRate!;
      expect(rate.unit).toBe('N/mm');
      expectClose(rate.value, one.valve.spring / 1000, { relative: 0.02 }, `spring rate: ${told(one)}`);
    }
  });

  it('gives the friction band (standing plus moving) within 5 %', () => {
    for (const { one, found } of read) {
      const newtonPerPercent = (one.valve.spring * one.valve.stroke) / 100;
      const band = found.friction!.frictionBand.force!.value;
      expectClose(band, one.S * newtonPerPercent, { relative: 0.05 }, `friction band: ${told(one)}`);
    }
  });

  it('claims no law of friction against speed from slowly sampled strokes at one speed', () => {
    for (const { found } of read) {
      expect(found.friction!.curve).toBeNull();
      expect(found.reading.notes.map(({ code }) => code)).toContain('no-friction-curve');
    }
  });

  it('gives intervals of S and J that hold the truth in at least 8 of 10', () => {
    const holds = (one: { low: number; high: number } | null, truth: number): boolean =>
      one !== null && one.low <= truth && truth <= one.high;
    const shares = [
      read.filter(({ one, found }) => holds(found.reading.S, one.S)).length,
      read.filter(({ one, found }) => found.reading.J === null || holds(found.reading.J, one.J)).length,
    ].map((count) => count / read.length);
    expect(Math.min(...shares), `S ${shares[0]}, J ${shares[1]}`).toBeGreaterThanOrEqual(0.8);
  });
});

describe('strokes of 60 more valves', () => {
  it('keep the tolerances in 19 of 20, and the intervals hold in at least 8 of 10', () => {
    const cases = [11, 12, 13, 14, 15].flatMap(twelveStrokes);
    const shares = { deadBand: 0, band: 0, spring: 0, holds: 0 };
    for (const { S, valve, record } of cases) {
      const { reading, friction } = readValveTest(record, {
        area: areaText,
        stroke: `${1000 * valve.stroke} mm`,
      });
      const deadBand = reading.deadBand!;
      const force = (S * valve.spring * valve.stroke) / 100;
      const near = (got: number, want: number, allowed: number): number =>
        Math.abs(got - want) <= allowed ? 1 : 0;
      shares.deadBand += near(deadBand.value, S, Math.max(0.05 * S, 0.05)) / cases.length;
      shares.band += near(friction!.frictionBand.force!.value, force, 0.05 * force) / cases.length;
      shares.spring +=
        near(friction!.springRate!.value, valve.spring / 1000, 2e-5 * valve.spring) / cases.length;
      shares.holds += (deadBand.low <= S && S <= deadBand.high ? 1 : 0) / cases.length;
    }
    expect(
      Math.min(shares.deadBand, shares.band, shares.spring),
      JSON.stringify(shares),
    ).toBeGreaterThanOrEqual(0.95);
    expect(shares.holds, JSON.stringify(shares)).toBeGreaterThanOrEqual(0.8);
  });
});

describe('a stroke', () => {
  const { at, seconds } = ramps(
    [50, 60, 40, 60, 40].map((op) => ({ op, rate: 0.1 })),
    5,
  );
  const op = Float64Array.from({ length: Math.floor(2 * seconds) }, (_, k) => at(k / 2));

  it('of either variant of the two-parameter valve gives back S and J, and the variant', () => {
    for (const model of ['slides-on', 'sticks-again'] as const) {
      const travel = twoParameterValve(op, { S: 3, J: 1.2, model, tolerance: 0.02 });
      const { reading, stroke } = readValveTest(testRecord({ op, travel, samplePeriod: 0.5 }));
      expect(reading.kind).toBe('stroke');
      expect(stroke!.variants[0]!.model).toBe(model);
      expectClose(reading.S!.value, 3, { absolute: 0.06 }, `S, ${model}`);
      expectClose(reading.J!.value, 1.2, { absolute: 0.06 }, `J, ${model}`);
      expectClose(reading.deadBand!.value, 3, { absolute: 0.06 }, `dead band, ${model}`);
    }
  });

  it('without jumps gives the resolution as a bound only', () => {
    const travel = twoParameterValve(op, { S: 2, J: 0 });
    const { reading } = readValveTest(testRecord({ op, travel, samplePeriod: 0.5 }));
    expectClose(reading.deadBand!.value, 2, { absolute: 0.05 });
    expect(reading.resolution!.low).toBe(0);
    expect(reading.resolution!.high).toBeLessThan(0.2);
    expect(reading.notes.map(({ code }) => code)).toContain('resolution-below-stroke');
  });

  it('without pressure says how much a lag would add, and with it takes the lag out', () => {
    const valve = {
      spring: 52538,
      stroke: 0.1016,
      mass: 1.361,
      area: 0.0645,
      friction: relayFriction({ coulomb: 0.01 * 5338, viscous: 612.9 }),
      actuatorLag: 2,
      benchLow: 0.2,
    };
    const logged = bench(valve, at, seconds, 0.5, 0.01, 7);
    const withPressure = readValveTest(benchRecord(logged));
    expectClose(withPressure.stroke!.lag!, 2, { absolute: 0.05 });
    expectClose(withPressure.reading.deadBand!.value, 2, { absolute: 0.05 });
    const without = readValveTest(benchRecord(logged, { pressure: null }));
    const note = without.reading.notes.find(({ code }) => code === 'lag-not-known')!;
    expect(note.text).toContain('adds 0.2 %');
    expectClose(without.reading.deadBand!.value, 2.4, { absolute: 0.1 }, 'lag of 2 s at 0.1 %/s both ways');
  });

  it('of a stem behind a positioner with a band gives that band, its slow moves included', () => {
    const slow = ramps(
      [50, 65, 35, 65, 35, 50].map((one) => ({ op: one, rate: 0.1 })),
      10,
    );
    const valve = createPositionerStem({ band: 1, lag: 1, startTravel: 50 });
    const random = seededRandom(4);
    const command = Float64Array.from({ length: Math.floor(2 * slow.seconds) }, (_, k) => slow.at(k / 2));
    const travel = command.map((u) => valve.advance(u, 0.5) + 0.03 * random.normal());
    const { reading } = readValveTest(testRecord({ op: command, travel, samplePeriod: 0.5 }));
    // S = J = band; the move's lag of 1 s adds up to 0.2 % at this pace.
    for (const one of [reading.deadBand!, reading.resolution!]) {
      expectClose(one.value, 1, { absolute: 0.1 });
    }
  });

  it('takes out a lag that is stated, and turns round a travel that falls with the command', () => {
    const [one] = twelveStrokes(3).slice(4);
    const { deadBand } = readValveTest(one!.record).reading;
    const lag = one!.valve.actuatorLag;
    const stated = readValveTest({ ...one!.record, pressure: null }, { lag }).reading;
    expectClose(stated.deadBand!.value, deadBand!.value, { absolute: 0.02 });
    const turned = readValveTest({ ...one!.record, travel: one!.record.travel!.map((x) => 100 - x) }).reading;
    expectClose(turned.deadBand!.value, deadBand!.value, { absolute: 1e-9 });
    expect(turned.notes.map(({ code }) => code)).toContain('travel-turned-round');
  });

  it('of an actuator that closes with more pressure shows the same friction, and the bench set as logged', () => {
    const [one] = twelveStrokes(3).slice(4);
    const opens = readValveTest(one!.record).friction!;
    const closes = readValveTest({ ...one!.record, pressure: one!.record.pressure!.map((p) => 2 - p) })
      .friction!;
    expect(closes.sense).toBe(-1);
    expectClose(closes.frictionBand.pressure.value, opens.frictionBand.pressure.value, { relative: 1e-6 });
    expectClose(closes.benchSet.closed.value, 2 - opens.benchSet.closed.value, { absolute: 1e-6 });
    expectClose(closes.benchSet.open.value, 2 - opens.benchSet.open.value, { absolute: 1e-6 });
  });

  it('of a stem that never moves resolves nothing and says so', () => {
    const travel = new Float64Array(op.length).fill(50);
    const { reading } = readValveTest(testRecord({ op, travel, samplePeriod: 0.5 }));
    expect([reading.deadBand, reading.resolution, reading.hysteresis, reading.S, reading.J]).toEqual(
      Array(5).fill(null),
    );
    expect(reading.notes.map(({ code }) => code)).toContain('no-dead-band');
  });
});
