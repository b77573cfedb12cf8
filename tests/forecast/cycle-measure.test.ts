import { describe, expect, it } from 'vitest';
import { measureCycle, swingWithin } from '../../src/forecast/cycle-measure';
import { seededRandom } from '../../src/signal/random';
import { expectClose } from '../closeness';

const random = seededRandom(3);
const triangle = (k: number, period: number): number => 2 * Math.abs(2 * ((k / period) % 1) - 1) - 1;

describe('period and swings', () => {
  const samples = 3000;
  const op = Float64Array.from({ length: samples }, (_, k) => 50 + 2 * triangle(k, 100) + 0.001 * k);
  const pv = Float64Array.from(
    { length: samples },
    (_, k) => (k % 100 < 50 ? 6 : 4) + 0.05 * random.normal(),
  );

  it('are those of a triangle and a square wave, drift and noise left aside', () => {
    const found = measureCycle(pv, op, 2)!;
    expectClose(found.period, 200, { relative: 0.02 });
    expectClose(found.opSwing, 4, { relative: 0.03 });
    expectClose(found.pvSwing, 2, { relative: 0.1 });
  });

  it('are those of most cycles where a few are longer', () => {
    const lengths = [100, 100, 160, 100, 100, 100, 140, 100, 100, 100, 100, 100];
    const uneven = Float64Array.from(
      lengths.flatMap((length) => Array.from({ length }, (_, k) => triangle(k, length))),
    );
    expectClose(measureCycle(uneven, uneven, 1)!.period, 100, { relative: 0.03 });
  });

  it('are not told where OP does not turn', () => {
    const ramp = Float64Array.from({ length: 500 }, (_, k) => k / 10);
    expect(measureCycle(ramp, ramp, 1)).toBeNull();
    expect(measureCycle(new Float64Array(50), new Float64Array(50), 1)).toBeNull();
  });

  it('within a length of time is the median of its stretches', () => {
    const steps = Float64Array.from({ length: 90 }, (_, k) => (k < 30 ? k % 2 : k < 60 ? 3 * (k % 2) : 0));
    expect(swingWithin(steps, 60, 2)).toBe(1);
  });
});
