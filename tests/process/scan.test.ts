import { describe, expect, it } from 'vitest';
import { findScan } from '../../src/process/scan';
import { seededRandom } from '../../src/signal/random';

/** An OP that takes a new value at the samples `phase`, `phase + every`, ... */
function held(every: number, phase: number, samples: number): Float64Array {
  const random = seededRandom(7);
  let value = 50;
  return Float64Array.from({ length: samples }, (_, i) => {
    if (i % every === phase) value += random.normal();
    return value;
  });
}

describe('findScan', () => {
  it.each([
    [1, 0],
    [2, 1],
    [5, 3],
    [60, 17],
  ])('finds a scan every %s samples from sample %s on', (every, phase) => {
    expect(findScan(held(every, phase, 3000))).toEqual({ every, phase });
  });

  it('takes irregular moves for a scan at every sample', () => {
    const rounded = Float64Array.from({ length: 3000 }, (_, i) => Math.round(5 * Math.sin(i / 90)) / 10);
    expect(findScan(rounded).every).toBe(1);
    expect(findScan(new Float64Array(100)).every).toBe(1);
  });
});
