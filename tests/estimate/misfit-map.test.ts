import { describe, expect, it } from 'vitest';
import { misfitMap } from '../../src/estimate/misfit-map';
import { swingOf } from '../../src/estimate/process-fit';
import { reconstructTravel } from '../../src/estimate/reconstruct-travel';
import { createTwoParameterValve } from '../../src/valve/two-parameter-steps';
import { expectClose } from '../closeness';
import { flowLoop, processSettings } from './loops';

describe('misfitMap', () => {
  const { pv, op } = flowLoop({
    valve: createTwoParameterValve({ S: 3.4, J: 1.6, start: 52 }),
    samples: 900,
  });
  const settings = processSettings({ period: 101 });
  const largest = swingOf(op);
  const [found] = reconstructTravel(pv, op, settings)!;
  const map = misfitMap(pv, op, found, settings, largest, found);

  it('has rising axes around the pair found and a value for each pair with J not above S', () => {
    for (const axis of [map.S, map.J]) {
      for (let i = 1; i < axis.length; i++) expect(axis[i]).toBeGreaterThan(axis[i - 1]);
    }
    expect(map.S[0]).toBeLessThan(found.S);
    expect(map.S[map.S.length - 1]).toBeGreaterThan(found.S);
    expect(map.J[0]).toBe(0);
    expect(map.J[map.J.length - 1]).toBeGreaterThan(found.J);
    expect(map.misfit.length).toBe(map.J.length);
    map.misfit.forEach((row, i) => {
      expect(row.length).toBe(map.S.length);
      row.forEach((value, k) => {
        if (map.J[i] > map.S[k]) expect(value).toBeNull();
        else expect(value! >= 0 && value! <= 1).toBe(true);
      });
    });
  });

  it('is lowest near S of the valve, and much higher where S is far off', () => {
    let least = { S: 0, value: 2 };
    map.misfit.forEach((row) => {
      row.forEach((value, k) => {
        if (value !== null && value < least.value) least = { S: map.S[k], value };
      });
    });
    const step = map.S[1] - map.S[0];
    // The map keeps the process near the one found, so its lowest place may lie a few steps off the pair.
    expectClose(least.S, 3.4, { absolute: 2 * step }, 'S of the lowest point');
    const atSmall = map.misfit.map((row) => row[0]).filter((value) => value !== null);
    expect(Math.min(...atSmall)).toBeGreaterThan(1.5 * least.value);
  });

  it('is the same each time', () => {
    expect(misfitMap(pv, op, found, settings, largest, found)).toEqual(map);
  });
});
