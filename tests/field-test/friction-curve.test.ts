import { describe, expect, it } from 'vitest';
import { stemPoints } from '../../src/field-test/friction-curve';
import { readValveTest } from '../../src/field-test/read-valve-test';
import { simulateStroke } from '../../src/field-test/simulate-stroke';
import { measuredFriction } from '../../src/valve/friction-law';
import { expectClose } from '../closeness';
import { areaText, twelveSpeedSets } from './records';

const cases = twelveSpeedSets(1);
const read = cases.map((one) => ({
  one,
  found: readValveTest(one.record, { area: areaText, stroke: `${1000 * one.valve.stroke} mm` }),
}));

describe('strokes at seven speeds of twelve valves', () => {
  it('name the right law in at least ten', () => {
    const named = read.map(
      ({ one, found }) => `${one.law}: ${found.friction!.curve?.chosen.law ?? 'not resolved'}`,
    );
    const right = named.filter((text) => text.split(': ')[0] === text.split(': ')[1]);
    expect(right.length, named.join('\n')).toBeGreaterThanOrEqual(10);
  });

  it('give points within 3 % of the friction that was put in', () => {
    for (const { one, found } of read) {
      for (const { speed, force, low, high } of found.friction!.curve?.points ?? []) {
        const truth = speed === 0 ? one.friction.breakaway : one.friction.sliding(speed);
        expectClose(force, truth, { relative: speed === 0 ? 0.06 : 0.03 }, `${one.law} at ${speed} m/s`);
        expect(low).toBeLessThanOrEqual(force);
        expect(high).toBeGreaterThanOrEqual(force);
      }
    }
  });

  it('give a curve that the stem takes as its law and that follows the measured travel', () => {
    for (const { one, found } of read.filter((each) => each.found.friction!.curve).slice(0, 4)) {
      const law = measuredFriction(stemPoints(found.friction!.curve!));
      const { chosen } = found.friction!.curve!;
      expectClose(law.breakaway, chosen.static, { relative: 0.05 }, `${one.law} at rest`);
      // Noise of travel is 0.01 %; strokes cover 60 %.
      expect(simulateStroke(found).distance, one.law).toBeLessThan(0.4);
    }
  });

  it('of fewer than five speeds stay unresolved', () => {
    const { record, valve } = cases[1]!;
    const fewer = Math.floor(0.75 * record.op.length);
    const cut = (values: Float64Array): Float64Array => values.subarray(0, fewer);
    const found = readValveTest(
      { ...record, op: cut(record.op), travel: cut(record.travel!), pressure: cut(record.pressure!) },
      { area: areaText, stroke: `${1000 * valve.stroke} mm` },
    );
    expect(found.friction!.curve).toBeNull();
    expect(() => simulateStroke(found)).toThrow(/five steady speeds/);
  });
});
