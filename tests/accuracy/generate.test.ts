import { describe, expect, it } from 'vitest';
import { compressByException, compressBySwingingDoor } from './compress';
import { makeCase } from './generate';

describe('cases of the accuracy suite', () => {
  it('are the same for the same seed and others for another', () => {
    const one = makeCase('stiction', 5, 2);
    expect(makeCase('stiction', 5, 2)).toEqual(one);
    expect(makeCase('stiction', 6, 2).record.sha256).not.toBe(one.record.sha256);
  });

  it('are complete records of the stated sort', () => {
    for (const group of ['stiction', 'other'] as const) {
      for (let index = 0; index < 6; index++) {
        const made = makeCase(group, 5, index);
        const { record } = made;
        expect(record.op.length).toBeGreaterThanOrEqual(1800);
        expect(record.op.length).toBeLessThanOrEqual(7200);
        for (const column of [record.pv, record.op, record.sp, made.trueTravel]) {
          expect(column?.length).toBe(record.op.length);
          expect(column?.every(Number.isFinite)).toBe(true);
        }
        expect(made.cause === 'stiction').toBe(group === 'stiction');
        if (group === 'stiction') expect(made.truth).not.toBeNull();
        if (index % 2 === 0 && made.kind !== 'lost-motion') expect(made.service).toBe('flow');
      }
    }
  });
});

describe('compression', () => {
  const values = Float64Array.from(
    { length: 400 },
    (_, k) => 5 * Math.sin(k / 20) + 0.1 * Math.sin(37 * k * k),
  );

  it('stays within its deviation and leaves straight pieces', () => {
    const door = compressBySwingingDoor(values, 0.3);
    const exception = compressByException(values, 0.3);
    for (const thin of [door, exception]) {
      let straight = 0;
      for (let k = 0; k < values.length; k++) {
        expect(Math.abs(thin[k] - values[k])).toBeLessThanOrEqual(0.6 + 1e-12);
        if (k > 1 && Math.abs(thin[k] - 2 * thin[k - 1] + thin[k - 2]) < 1e-9) straight++;
      }
      expect(straight).toBeGreaterThan(100);
    }
    expect(door[399]).toBe(values[399]);
  });
});
