import { describe, expect, it } from 'vitest';
import { describeTravel, TravelMisfit } from '../../src/estimate/describe-travel';
import { seededRandom } from '../../src/signal/random';
import { textbookStem } from '../../src/valve/stem';
import { runValve } from '../../src/valve/steppable-valve';
import { twoParameterValve } from '../../src/valve/two-parameter';
import { expectClose } from '../closeness';

const samples = 2400;
const random = seededRandom(8);
const op = Float64Array.from(
  { length: samples },
  (_, k) => 50 + 4 * Math.sin(k / 60) + 1.5 * Math.sin(k / 170 + 1) + 0.02 * random.normal(),
);
const swing = 11;
const models = ['slides-on', 'sticks-again'] as const;

describe('describeTravel', () => {
  for (const model of models) {
    it(`gives back S, J and variant of the element behind a travel: ${model}`, () => {
      for (const [S, J] of [
        [3, 1],
        [3, 2.9],
        [5, 1],
        [7, 3],
      ]) {
        const exact = twoParameterValve(op, { S, J, model });
        const travel = exact.map((value) => value + 0.03 * random.normal());
        for (const near of [null, { S: 1.06 * S, J: 0.85 * J }]) {
          const found = describeTravel(op, travel, { near, largest: swing });
          const where = `S ${S}, J ${J}, ${near ? 'from nearby' : 'from nowhere'}`;
          expectClose(found.S, S, { relative: 0.03 }, where);
          expectClose(found.J, J, { absolute: 0.05 * S }, where);
          expect(found.explains, where).toBeGreaterThan(0.98);
          // Where J is near S the element has no place to slide.
          if (J < 0.8 * S) expect(found.model, where).toBe(model);
        }
      }
    });
  }

  it('takes dead band alone for J = 0', () => {
    const found = describeTravel(op, twoParameterValve(op, { S: 2, J: 0 }), { near: null, largest: swing });
    expectClose(found.S, 2, { relative: 0.02 });
    expectClose(found.J, 0, { absolute: 0.04 });
  });

  it('does not mind a travel that stands off by a calibration error', () => {
    const travel = twoParameterValve(op, { S: 3, J: 1 });
    const exact = describeTravel(op, travel, { near: null, largest: swing });
    const off = describeTravel(
      op,
      travel.map((value) => value - 7.5),
      { near: null, largest: swing },
    );
    expectClose(off.S, exact.S, { relative: 0.01 });
    expectClose(off.J, exact.J, { absolute: 0.03 });
  });

  it('finds the element where OP swings by S but not by S + J, whichever way and wherever the travel began', () => {
    // From a start in the middle of OP's swing such a valve would never break loose at all.
    for (const sign of [1, -1]) {
      const saw = Float64Array.from(
        { length: samples },
        (_, k) => 50 + sign * (1.9 - (3.8 * (k % 120)) / 120),
      );
      for (const start of [49, 51]) {
        const travel = twoParameterValve(saw, { S: 3.5, J: 1.4, start });
        const found = describeTravel(saw, travel, { near: null, largest: 4 });
        expectClose(found.S, 3.5, { relative: 0.03 }, `S, saw ${sign} from ${start}`);
        expectClose(found.J, 1.4, { absolute: 0.05 * 3.5 }, `J, saw ${sign} from ${start}`);
      }
    }
  });

  it('tells how little of another travel it explains', () => {
    const other = Float64Array.from({ length: samples }, () => random.normal());
    const found = describeTravel(op, other, { near: null, largest: swing });
    expect(found.explains).toBeLessThan(0.1);
    expect(
      describeTravel(op, new Float64Array(samples).fill(40), { near: null, largest: swing }),
    ).toMatchObject({ explains: 0 });
  });

  it('keeps within the largest S and J within S', () => {
    const travel = twoParameterValve(op, { S: 5, J: 4.5 });
    const { S, J } = describeTravel(op, travel, { near: null, largest: 3 });
    expect(S).toBeLessThanOrEqual(3);
    expect(J).toBeLessThanOrEqual(S);
    expect(J).toBeGreaterThanOrEqual(0);
  });

  it('reads a stem of mass and friction as it was set up', () => {
    const travel = runValve(textbookStem({ S: 3, J: 1, startOp: op[0] }), op, 1);
    const found = describeTravel(op, travel, { near: null, largest: swing });
    expectClose(found.S, 3, { relative: 0.05 });
    expectClose(found.J, 1, { absolute: 0.1 * 3 });
  });

  it('gives the same answer twice and leaves its input alone', () => {
    const travel = twoParameterValve(op, { S: 3, J: 1 }).map((value) => value + 0.1 * random.normal());
    const before = [Array.from(op), Array.from(travel)];
    const near = Object.freeze({ S: 3, J: 1 });
    const one = describeTravel(op, travel, Object.freeze({ near, largest: swing }));
    expect(describeTravel(op, travel, { near, largest: swing })).toEqual(one);
    expect([Array.from(op), Array.from(travel)]).toEqual(before);
  });
});

describe('TravelMisfit', () => {
  it('is the share of the variance that is left, sample by sample, the first tenth not counted', () => {
    const travel = twoParameterValve(op, { S: 3, J: 1, start: 48 }).map(
      (value) => value + 0.2 * random.normal(),
    );
    const misfit = new TravelMisfit(op, travel);
    const first = samples / 10;
    const squares = (values: Float64Array): number => {
      const counted = values.subarray(first);
      const mean = counted.reduce((sum, value) => sum + value, 0) / counted.length;
      return counted.reduce((sum, value) => sum + (value - mean) ** 2, 0);
    };
    for (const model of models) {
      for (const [S, J] of [
        [3, 1],
        [2, 0],
        [4, 4],
        [1.5, 1],
      ]) {
        const element = twoParameterValve(op, { S, J, model, start: travel[0] });
        const left = squares(element.map((value, k) => value - travel[k])) / squares(travel);
        expectClose(misfit.of(S, J, model), left, { absolute: 1e-9 }, `${model} S ${S} J ${J}`);
      }
    }
  });
});
