import { describe, expect, it } from 'vitest';
import { readValveTest } from '../../src/field-test/read-valve-test';
import { simulateProcess } from '../../src/process/linear-process';
import { seededRandom } from '../../src/signal/random';
import { twoParameterValve } from '../../src/valve/two-parameter';
import { expectClose } from '../closeness';
import { testRecord } from './records';

const dwell = 30;

/** Command that stands at each level for `dwell` samples. */
function staircase(levels: readonly number[]): Float64Array {
  return Float64Array.from({ length: dwell * levels.length }, (_, k) => levels[Math.floor(k / dwell)]!);
}

function withNoise(values: Float64Array, noise: number, seed: number): Float64Array {
  const random = seededRandom(seed);
  return values.map((value) => value + noise * random.normal());
}

/** Levels from the first one on, each so much above the one before. */
function sums(start: number, moves: readonly number[]): number[] {
  const levels = [start];
  for (const move of moves) levels.push(levels[levels.length - 1]! + move);
  return levels;
}

describe('a step test', () => {
  const levels = sums(50, [
    ...Array(8).fill(0.5),
    ...Array(12).fill(-0.5),
    ...Array(12).fill(0.5),
    5,
    -5,
    -5,
    5,
  ]);
  const op = staircase(levels);

  it('reads dead band and resolution of a stuck-and-slipping valve in brackets that hold S and J', () => {
    const travel = withNoise(twoParameterValve(op, { S: 2.2, J: 0.8, model: 'sticks-again' }), 0.02, 1);
    const { reading } = readValveTest(testRecord({ op, travel, samplePeriod: 1 }));
    expect(reading.kind).toBe('step');
    for (const [one, truth] of [
      [reading.deadBand!, 2.2],
      [reading.resolution!, 0.8],
    ] as const) {
      expect(one.low).toBeLessThanOrEqual(truth);
      expect(one.high).toBeGreaterThanOrEqual(truth);
      expect(one.high - one.low).toBeLessThanOrEqual(1.01);
    }
    // From the command at the last movement to the step that moved it.
    expect(reading.steps.filter(({ reversal }) => reversal).length).toBe(4);
    expect(reading.steps.every(({ moved, note }) => moved || note !== '')).toBe(true);
  });

  it('gives each step its change, and the times of a valve with a lag', () => {
    const followed = simulateProcess(op, 1, { lags: [3], deadTime: 2, restInput: 50, restOutput: 50 });
    const travel = withNoise(followed, 0.01, 2);
    const { reading, step } = readValveTest(testRecord({ op, travel, samplePeriod: 1 }));
    const large = reading.steps.filter(({ from, to }) => Math.abs(to - from) === 5);
    expect(large.length).toBe(4);
    for (const { change, T63, T86, overshoot, from, to } of large) {
      expectClose(change!.value, to - from, { absolute: 0.05 });
      // The row of a simulated process holds what it came to by the end of its sample: a sample early.
      for (const [time, truth] of [
        [T63!, 2 + 3 - 1],
        [T86!, 2 + 6 - 1],
      ] as const) {
        expectClose(time.value, truth, { absolute: 0.35 });
        expect(time.low).toBeLessThanOrEqual(time.value);
        expect(time.high).toBeGreaterThanOrEqual(truth + 1 - 0.35);
      }
      expect(overshoot!.low).toBe(0);
    }
    const { deadTime, T63, T86 } = step!.overall;
    // Sampling leaves the same open in every step: many steps do not make it less.
    expect(T63!.high - T63!.low).toBeGreaterThanOrEqual(1);
    expect(deadTime!.low <= T63!.low && T63!.low <= T86!.low).toBe(true);
    expect(deadTime!.high <= T63!.high && T63!.high <= T86!.high).toBe(true);
    // Every step moves it, so that both are known as bounds only.
    expect(reading.deadBand!.low).toBe(0);
    expect(reading.resolution!.low).toBe(0);
    expect(reading.notes.map(({ code }) => code)).toEqual(
      expect.arrayContaining(['dead-band-below-steps', 'resolution-below-steps']),
    );
  });

  it('sees an overshoot', () => {
    const plain = Float64Array.from(op);
    const travel = plain.map((value, k) => {
      const since = k % dwell;
      const before = k >= dwell ? op[k - dwell]! : value;
      return value + 0.2 * (value - before) * Math.exp(-since / 3) * (since > 0 ? 1 : 0);
    });
    const { reading } = readValveTest(
      testRecord({ op, travel: withNoise(travel, 0.005, 3), samplePeriod: 1 }),
    );
    const large = reading.steps.find(({ from, to }) => to - from === 5)!;
    expectClose(
      large.overshoot!.value,
      11,
      { absolute: 2 },
      'mean of the first three samples past the change',
    );
  });

  it('reads the dead band from PV where there is no travel, and no hysteresis', () => {
    const travel = twoParameterValve(op, { S: 2.2, J: 0.8, model: 'sticks-again' });
    const pv = withNoise(
      simulateProcess(travel, 1, { gain: 1.5, lags: [2], deadTime: 1, restInput: 50, restOutput: 60 }),
      0.05,
      4,
    );
    const { reading } = readValveTest(testRecord({ op, pv, pvUnit: 'm3/h', samplePeriod: 1 }));
    expect(reading.deadBand!.low).toBeLessThanOrEqual(2.2);
    expect(reading.deadBand!.high).toBeGreaterThanOrEqual(2.2);
    expect(reading.hysteresis).toBeNull();
    expect(reading.steps[0]!.change!.unit).toBe('m3/h');
  });

  it('reads it from the slope of a PV that integrates, without times', () => {
    const travel = twoParameterValve(op, { S: 2.2, J: 0.8, model: 'sticks-again' });
    const pv = withNoise(
      simulateProcess(travel, 1, { response: 'integrating', gain: -0.02, restInput: 50, restOutput: 60 }),
      0.01,
      5,
    );
    const { reading } = readValveTest(
      testRecord({ op, pv, pvUnit: '%', samplePeriod: 1, response: 'integrating' }),
    );
    expect(reading.deadBand!.low).toBeLessThanOrEqual(2.2);
    expect(reading.deadBand!.high).toBeGreaterThanOrEqual(2.2);
    expect(reading.steps.every(({ T63 }) => T63 === null)).toBe(true);
    expect(reading.steps.find(({ moved }) => moved)!.note).toMatch(/integrates/);
  });

  it('of a valve that does not answer says so, step by step', () => {
    const { reading } = readValveTest(
      testRecord({ op, travel: withNoise(new Float64Array(op.length).fill(50), 0.02, 6), samplePeriod: 1 }),
    );
    expect(reading.steps.filter(({ moved }) => moved).length).toBeLessThanOrEqual(1);
    expect(reading.deadBand).toBeNull();
    expect(reading.notes.map(({ code }) => code)).toContain('no-dead-band');
  });
});
