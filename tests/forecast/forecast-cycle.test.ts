/** Forecasts of the demo loops and of a few stem loops whose true loop is run again; `tests/accuracy/forecast.ts` measures more. */
import { beforeAll, describe, expect, it } from 'vitest';
import { assessLoop } from '../../src/assessment/assess-loop';
import { cautions } from '../../src/assessment/cautions';
import type { Findings } from '../../src/assessment/findings';
import { WrongUse } from '../../src/errors';
import type { Forecast, ForecastResult } from '../../src/forecast/forecast';
import { type ForecastOptions, forecastCycle } from '../../src/forecast/forecast-cycle';
import { readLoop } from '../../src/record/read-loop';
import { outcomesOf, scoreForecasts } from '../accuracy/forecast';
import { makeForecastLoop } from '../accuracy/forecast-loops';

const few: ForecastOptions = { rivals: 12, mapGains: [0.5, 1], mapIntegralTimes: [1, 2] };

function assessed(name: string, high: number): Findings {
  return assessLoop(readLoop(`data/${name}.csv`, { pvRange: { low: 0, high }, pvUnit: 'm3/h' }));
}

let findings: Findings;
let result: ForecastResult;
let forecast: Forecast;
beforeAll(() => {
  findings = assessed('31-FC-104', 120);
  result = forecastCycle(findings, few);
  forecast = result.forecast!;
});

describe('the sticky demo loop', () => {
  it('simulated as it runs now comes within the stated share of the record', () => {
    expect(result.refused).toEqual([]);
    for (const error of Object.values(forecast.error)) expect(Math.abs(error)).toBeLessThan(0.3);
    const { period } = findings.assessment.oscillation;
    expect(Math.abs(forecast.record.period / period! - 1)).toBeLessThan(0.1);
  });

  it('goes on cycling at every setting, slower at a lower gain, and ends when the valve is repaired', () => {
    const [halved] = forecast.others;
    expect(halved!.cycles).toBe(true);
    expect(halved!.period!.value).toBeGreaterThan(1.5 * forecast.now.period!.value);
    expect(forecast.retuningEndsIt).toBe(false);
    expect(forecast.inWords[0]).toMatch(/^Retuning does not remove this cycle/);
    expect(forecast.repaired.cycles).toBe(false);
    expect(forecast.repaired.pvSwing.high).toBeLessThan(0.4 * forecast.record.pvSwing);
  });

  it('keeps its PV swing while gain and integral time change, as a self-regulating loop does', () => {
    for (const { pvSwing } of forecast.others) {
      expect(Math.abs(pvSwing.value / forecast.record.pvSwing - 1)).toBeLessThan(0.25);
      expect(pvSwing.low).toBeLessThan(forecast.record.pvSwing);
    }
  });

  it('ends with an integral dead band that is wide enough, and goes on with one that is not', () => {
    const found = forecast.integralDeadBand!;
    expect(found.found).toBe(true);
    const narrow = forecastCycle(findings, { ...few, integralDeadBand: found.width / 10 }).forecast!;
    expect(narrow.integralDeadBand!.cycles).toBe(true);
  });

  it('has a larger gain margin at a lower gain', () => {
    const [row] = forecast.map;
    expect(row!.map(({ gain }) => gain / forecast.now.gain)).toEqual([0.5, 1]);
    expect(row![0]!.gainMargin! / row![1]!.gainMargin!).toBeCloseTo(2, 6);
  });

  it('still cycles with a valve that is only half as bad', () => {
    const { S } = findings.stiction.fit!;
    const half = { S: S.value / 2, J: S.value / 4 };
    expect(forecastCycle(findings, { ...few, repaired: half }).forecast!.repaired.cycles).toBe(true);
  });

  it('can be asked for settings of its own, without integral action too', () => {
    const settings = [
      { gain: 0.3, integralTime: 12 },
      { gain: 0.4, integralTime: null },
    ];
    const { others } = forecastCycle(findings, { ...few, settings }).forecast!;
    expect(others.map(({ gain }) => Number(gain.toFixed(6)))).toEqual([0.3, 0.4]);
    expect(others[0]!.integralTime).toBeCloseTo(12, 6);
    expect(others[1]!.integralTime).toBeNull();
    expect(others[1]!.cycles).toBe(false);
  });

  it('gives equal bytes for equal seeds, and its bands around its values', () => {
    expect(JSON.stringify(forecastCycle(findings, few))).toBe(JSON.stringify(result));
    for (const one of [forecast.now, ...forecast.others, forecast.repaired]) {
      for (const estimate of [one.period, one.pvSwing, one.opSwing]) {
        if (estimate === null) continue;
        expect(estimate.low).toBeLessThanOrEqual(estimate.value);
        expect(estimate.high).toBeGreaterThanOrEqual(estimate.value);
      }
    }
    expect(result.cautions).toEqual(cautions);
  });
});

describe('there is no forecast', () => {
  it('where the simulated loop misses the record by more than the stated share', () => {
    const { forecast: none, refused } = forecastCycle(findings, { ...few, largestMiss: 1e-6 });
    expect(none).toBeNull();
    expect(refused[0]).toMatch(/misses the record: period .* at most 0 % is asked for/);
  });

  it('without a fit, and of a cycle that the valve does not make', () => {
    const { forecast: none, refused } = forecastCycle(assessed('31-PC-122', 600), few);
    expect(none).toBeNull();
    expect(refused.join(' ')).toMatch(/no fit of the valve.*named tight-tuning/);
  });

  it('without a controller that can be read', () => {
    const random = findings.record.op.map((_, k) => 40 + ((k * 7919) % 101) / 5);
    const record = { ...findings.record, op: random };
    const { refused } = forecastCycle({ ...findings, record }, few);
    expect(refused[0]).toMatch(/controller .*(could not be read|explains)/i);
  });

  it('under a master that moves the set point', () => {
    const sp = findings.record.pv.map((_, k) => 63.5 + 0.01 * (k % 7));
    const record = { ...findings.record, sp };
    expect(forecastCycle({ ...findings, record }, few).refused.join(' ')).toMatch(/under a master/);
  });
});

describe('wrong options', () => {
  it.each([
    [{ gain: 2 }, /no option "gain"/],
    [{ settings: [{ gain: 0, integralTime: 5 }] }, /controller gain above 0/],
    [{ settings: [{ gain: 1, integralTime: -1 }] }, /integral time above 0/],
    [{ repaired: { S: 1, J: 2 } }, /0 <= J <= S/],
    [{ rivals: 0 }, /whole number of rivals/],
    [{ integralDeadBand: 0 }, /integral dead band above 0/],
  ] as [object, RegExp][])('%j are refused', (options, message) => {
    expect(() => forecastCycle(findings, options)).toThrow(WrongUse);
    expect(() => forecastCycle(findings, options)).toThrow(message);
  });
});

describe('stem loops whose true loop is run again at four settings and repaired', () => {
  it('are forecast right in most cases', () => {
    const outcomes = [4, 7, 9].flatMap((index) => outcomesOf(makeForecastLoop(71_000_000, index)).outcomes);
    expect(outcomes).toHaveLength(15);
    const { period, swing, cycles, swingHeld } = scoreForecasts(outcomes);
    for (const share of [period, swing, cycles, swingHeld]) expect(share.hits).toBeGreaterThanOrEqual(12);
  });
});
