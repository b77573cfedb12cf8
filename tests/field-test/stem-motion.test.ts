import { describe, expect, it } from 'vitest';
import { commandLegs } from '../../src/field-test/command';
import { restNoise, stemMotion } from '../../src/field-test/stem-motion';
import { seededRandom } from '../../src/signal/random';
import { twoParameterValve } from '../../src/valve/two-parameter';
import { expectClose } from '../closeness';
import { ramps } from './strokes';

const { at, seconds } = ramps(
  [50, 60, 40, 60].map((op) => ({ op, rate: 0.1 })),
  10,
);
const op = Float64Array.from({ length: Math.floor(2 * seconds) }, (_, k) => at(k / 2));
const noisy = (values: Float64Array, noise: number): Float64Array => {
  const random = seededRandom(1);
  return values.map((value) => value + noise * random.normal());
};

describe('noise at rest', () => {
  it('is that of the transmitter, however the stem jumps', () => {
    const travel = noisy(twoParameterValve(op, { S: 2, J: 1, model: 'sticks-again' }), 0.05);
    expectClose(restNoise(op, travel), 0.05, { relative: 0.25 });
  });

  it('of a rounded travel is what rounding leaves', () => {
    const travel = op.map((value) => Math.round(5 * value) / 5);
    expectClose(restNoise(op, travel), 0.2 / Math.sqrt(12), { relative: 1e-6 });
  });
});

describe('the motion of a stem', () => {
  it('is told as slips of the right size and number where it sticks again', () => {
    const travel = noisy(twoParameterValve(op, { S: 2, J: 1, model: 'sticks-again' }), 0.03);
    const { legs } = stemMotion(op, op, 1, travel, commandLegs(op));
    const back = legs[1]!;
    // It lands on the command of its sample, up to a sample further.
    expectClose(back.jump, 1.025, { absolute: 0.05 });
    // 20 % down: 2 % of dead band, then a slip for each 1 %.
    expectClose(back.slips.length, 17, { absolute: 1 });
    for (const slip of back.slips) expectClose(slip, 1, { absolute: 0.12 });
    expect(back.stretches.every(({ slides }) => !slides)).toBe(true);
  });

  it('is told as a slide from a bend where there is no jump', () => {
    const travel = noisy(twoParameterValve(op, { S: 2, J: 0 }), 0.03);
    const { legs } = stemMotion(op, op, 1, travel, commandLegs(op));
    const back = legs[1]!;
    expect(back.jump).toBe(0);
    expect(back.stretches.every(({ slides }) => slides)).toBe(true);
    // 2 % at 0.05 % a sample after the turn.
    expectClose(back.breaks! - back.leg.from, 20 + 40, { absolute: 2 });
  });

  it('is none where it never moves', () => {
    const { legs } = stemMotion(op, op, 1, new Float64Array(op.length).fill(3), commandLegs(op));
    expect(legs.map(({ moves }) => moves)).toEqual([null, null, null]);
  });
});
