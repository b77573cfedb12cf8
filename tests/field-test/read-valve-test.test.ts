/** Whatever is logged: a reading with finite, ordered numbers, or a sentence that says why not. */
import { readFileSync } from 'node:fs';
import Ajv from 'ajv';
import { describe, expect, it } from 'vitest';
import { StickbandError } from '../../src/errors';
import { readValveTest } from '../../src/field-test/read-valve-test';
import { seededRandom } from '../../src/signal/random';
import { testRecord } from './records';

const schema = JSON.parse(readFileSync('src/field-test/valve-test.schema.json', 'utf8'));
const validate = new Ajv({ allErrors: true, strict: false }).compile(schema);

/** Path of the first number that is not finite; null without one. */
function notFinite(value: unknown, path = ''): string | null {
  if (typeof value === 'number') return Number.isFinite(value) ? null : path;
  if (value instanceof Float64Array) return value.every(Number.isFinite) ? null : path;
  for (const [key, one] of Object.entries(value ?? {})) {
    const found = typeof one === 'string' ? null : notFinite(one, `${path}.${key}`);
    if (found) return found;
  }
  return null;
}

describe('records of any kind', () => {
  it('give finite numbers inside their intervals, or are refused with a sentence', () => {
    const random = seededRandom(6);
    let read = 0;
    let refused = 0;
    for (let i = 0; i < 400; i++) {
      const samples = 1 + Math.floor(400 * random.uniform() * random.uniform());
      const style = Math.floor(5 * random.uniform());
      let walk = 50;
      const op = new Float64Array(samples).map((_, k) => {
        if (style === 0) return 50;
        if (style === 1) {
          if (random.uniform() < 0.05) walk += 4 * (random.uniform() - 0.5);
          return walk;
        }
        if (style === 2) return 50 + 5 * Math.sin(k / 20);
        if (style === 3) return 50 + Math.round(10 * Math.sin(k / 30)) / 5;
        walk += random.uniform() - 0.5;
        return walk;
      });
      const [noise, step] = [random.uniform() < 0.3 ? 0 : 0.05, random.uniform() < 0.3 ? 0.5 : 0];
      let stem = 50;
      const travel = op.map((value) => {
        if (Math.abs(value - stem) > 1) stem = value;
        const seen = stem + noise * random.normal();
        return step > 0 ? Math.round(seen / step) * step : seen;
      });
      const record = testRecord({
        op,
        samplePeriod: [0.01, 1, 60][i % 3]!,
        travel: random.uniform() < 0.3 ? null : random.uniform() < 0.1 ? op.map(() => 7) : travel,
        pv: random.uniform() < 0.5 ? null : travel.map((value) => 2 * value),
        pressure: random.uniform() < 0.5 ? null : travel.map((value) => value / 50),
        pressureUnit: 'bar',
        response: random.uniform() < 0.5 ? 'integrating' : 'self-regulating',
      });
      if (record.travel === null && record.pv === null) continue;
      const kind = (['hold', 'step', 'stroke', undefined, undefined] as const)[
        Math.floor(5 * random.uniform())
      ];
      try {
        const findings = readValveTest(record, { area: '645 cm2', stroke: '10 mm', ...(kind && { kind }) });
        const { reading } = findings;
        expect(notFinite(findings), `case ${i}, ${reading.kind}`).toBeNull();
        expect(validate(JSON.parse(JSON.stringify(reading))), JSON.stringify(validate.errors)).toBe(true);
        const { deadBand, resolution, hysteresis, S, J, steps } = reading;
        const times = steps.flatMap(({ change, deadTime, T63, T86, overshoot }) => [
          change,
          deadTime,
          T63,
          T86,
          overshoot,
        ]);
        for (const one of [deadBand, resolution, hysteresis, S, J, ...times]) {
          if (!one) continue;
          expect(one.low).toBeLessThanOrEqual(one.value + 1e-9);
          expect(one.high).toBeGreaterThanOrEqual(one.value - 1e-9);
        }
        read++;
      } catch (error) {
        if (!(error instanceof StickbandError)) throw error;
        refused++;
      }
    }
    expect(read).toBeGreaterThan(200);
    expect(refused).toBeGreaterThan(20);
  });
});
