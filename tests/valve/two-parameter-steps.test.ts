import { describe, expect, it } from 'vitest';
import { seededRandom } from '../../src/signal/random';
import { runValve } from '../../src/valve/steppable-valve';
import { twoParameterValve } from '../../src/valve/two-parameter';
import { createTwoParameterValve } from '../../src/valve/two-parameter-steps';

describe('two-parameter valve in steps', () => {
  it('is the same element as the one that takes a whole record', () => {
    const random = seededRandom(4);
    for (const model of ['slides-on', 'sticks-again'] as const) {
      for (const tolerance of [0, 0.02]) {
        for (const [S, J] of [
          [3, 1],
          [3, 0],
          [2, 2],
          [0.5, 0.1],
        ]) {
          let wandering = 50;
          const op = Float64Array.from({ length: 500 }, (_, k) => {
            wandering += random.normal() * 0.2;
            return wandering + 3 * Math.sin(k / 15);
          });
          const options = { S, J, model, tolerance, start: op[0] };
          expect([...runValve(createTwoParameterValve(options), op, 1)]).toEqual([
            ...twoParameterValve(op, options),
          ]);
        }
      }
    }
  });

  it('refuses what cannot be', () => {
    expect(() => createTwoParameterValve({ S: 1, J: 2 })).toThrow(/0 <= J <= S/);
    expect(() => createTwoParameterValve({ S: 1, J: 0, start: 5, jump: 1 } as never)).toThrow(
      /no option "jump"/,
    );
  });
});
