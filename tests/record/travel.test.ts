import { describe, expect, it } from 'vitest';
import { deadTravel } from '../../src/record/travel';
import { seededRandom } from '../../src/signal/random';
import { twoParameterValve } from '../../src/valve/two-parameter';

const random = seededRandom(5);
const op = Float64Array.from({ length: 1000 }, (_, i) => 40 + 3 * Math.sin(i / 30) + 0.1 * random.normal());
const rounded = (signal: Float64Array, step: number): Float64Array =>
  signal.map((v) => Math.round(v / step) * step);

describe('deadTravel', () => {
  it('lets the travel of a sticking valve pass, also a slightly sticking one', () => {
    for (const [S, J] of [
      [2, 1],
      [0.4, 0.1],
    ] as const) {
      const travel = rounded(twoParameterValve(op, { S, J, model: 'slides-on' }), 0.1);
      expect(deadTravel(travel, rounded(op, 0.01))).toBeNull();
    }
  });

  it.each([
    ['frozen', op.map(() => 38), /never moves/],
    ['all but frozen', op.map((_, i) => 38 + (i % 100 === 0 ? 0.05 : 0)), /hardly moves/],
    ['the command', op, /handed back \(/],
    ['the command, rounded', rounded(op, 0.1), /handed back \(/],
    ['the command, one sample later', op.map((_, i) => op[Math.max(0, i - 1)]!), /one sample later/],
  ])('tells one that is %s', (_, travel, why) => {
    expect(deadTravel(travel, op)).toMatch(why);
  });

  it('does not call a travel an echo of an OP that stands still', () => {
    expect(
      deadTravel(
        op,
        op.map(() => 40),
      ),
    ).toBeNull();
  });
});
