import { describe, expect, it } from 'vitest';
import { readValveTest } from '../../src/field-test/read-valve-test';
import { seededRandom } from '../../src/signal/random';
import { testRecord } from './records';

const period = 100;

/** PV and OP that cycle for `before` periods, then `hold` periods of constant OP in which PV keeps `share` of its swing. */
function held(before: number, hold: number, share: number, drift = 0) {
  const random = seededRandom(9);
  const from = before * period;
  const samples = from + hold * period;
  const swing = (k: number): number => Math.sin((2 * Math.PI * k) / period);
  const pv = Float64Array.from(
    { length: samples },
    (_, k) => 50 + (k < from ? 1 : share) * swing(k) + Math.max(0, k - from) * drift + 0.05 * random.normal(),
  );
  const op = Float64Array.from(
    { length: samples },
    (_, k) => 40 + 2 * Math.cos((2 * Math.PI * Math.min(k, from)) / period),
  );
  return testRecord({ op, pv, pvUnit: 'm3/h', samplePeriod: 1 });
}

describe('a manual hold', () => {
  it.each([
    ['died', 0],
    ['stayed', 1],
    ['not-decided', 0.5],
  ] as const)('says that the cycle %s', (outcome, share) => {
    const { reading, hold } = readValveTest(held(10, 5, share));
    expect(reading.kind).toBe('hold');
    expect(hold!.outcome).toBe(outcome);
    expect(reading.notes.map(({ code }) => code)).toContain(
      outcome === 'not-decided' ? 'cycle-not-decided' : `cycle-${outcome}`,
    );
    expect([reading.deadBand, reading.S, reading.J]).toEqual([null, null, null]);
  });

  it('does not take a drift for a cycle', () => {
    expect(readValveTest(held(10, 5, 0, 0.01)).hold!.outcome).toBe('died');
  });

  it('is not decided by fewer than three periods', () => {
    const { hold } = readValveTest(held(10, 2, 0), { kind: 'hold' });
    expect(hold!.outcome).toBe('not-decided');
    expect(hold!.notes[0]!.text).toMatch(/at least 3 are needed/);
  });

  it('without cycles before it needs period and swing of the assessment', () => {
    const { op, pv, ...rest } = held(0, 5, 0);
    const record = { ...rest, op, pv };
    expect(readValveTest(record).hold!.outcome).toBe('not-decided');
    expect(readValveTest(record, { period, swing: 2 }).hold!.outcome).toBe('died');
    expect(() => readValveTest(record, { period: -1 })).toThrow(/"period" must be a number above 0/);
  });

  it('needs PV', () => {
    const { op, samplePeriod } = held(0, 5, 0);
    expect(() => readValveTest(testRecord({ op, travel: op, samplePeriod }))).toThrow(/hold without PV/);
  });
});
