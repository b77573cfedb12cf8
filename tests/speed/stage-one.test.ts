import { describe, expect, it } from 'vitest';
import { openingOf } from '../../src/estimate/opening';
import { gridSteps } from '../../src/estimate/search';
import { seededRandom } from '../../src/signal/random';
import { expectClose } from '../closeness';
import { type Problem, pairsTried, searchFast, VARIANTS } from './problem';
import { compileRival, numpyRival } from './rivals';
import { compareVariant } from './stage-one';

/**
 * A noisy cycle in OP that stands still at its end, where the travel then rests too: the fast search counts the last
 * samples of a delayed travel that lie beyond the end of PV, brute force does not, and here they are zero.
 */
function problemThatRests(integrating: boolean): Problem {
  const random = seededRandom(integrating ? 2 : 1);
  const moving = 500;
  const samples = 900;
  const op = new Float64Array(samples);
  const pv = new Float64Array(samples);
  let lagged = 0;
  let sum = 0;
  for (let k = 1; k < samples; k++) {
    const along = (k / 60) % 1;
    op[k] = k < moving ? 50 + 8 * Math.abs(along - 0.5) + 0.1 * random.normal() : op[moving - 1];
    lagged = 0.8 * lagged + 0.2 * (op[k - 1] - 50);
    sum += 0.05 * lagged;
    pv[k] = (integrating ? sum : lagged) + 0.1 * random.normal();
  }
  op[0] = 50;
  const largest = 4;
  const pairs = Array.from({ length: gridSteps * gridSteps }, (_, i) => {
    const s = Math.floor(i / gridSteps);
    const j = i % gridSteps;
    const S = ((s + 1) / gridSteps) * largest;
    return { s, j, S, J: (S * j) / (gridSteps - 1) };
  });
  const options = {
    theta: 0.7,
    integrating,
    lags: [0, 1.5, 4],
    delays: [1, 2, 5],
    sign: 1 as const,
    gainLow: 0,
    gainHigh: Number.POSITIVE_INFINITY,
  };
  return { pv, op, options, smallest: 0, largest, opening: openingOf(op, 60), pairs };
}

describe.each([
  ['C', compileRival(['-O3'])],
  ['NumPy', numpyRival()],
])('brute force in %s', (_, rival) => {
  it.skipIf(rival === null).each([false, true])(
    'gives every pair the misfit that the fast search gives it (integrating: %s)',
    (integrating) => {
      const problem = problemThatRests(integrating);
      const { misfits } = rival!.run(problem);
      searchFast(problem).forEach((points, variant) => {
        const tried = pairsTried(points, problem);
        expect(tried.length).toBeGreaterThan(50);
        for (const { s, j, misfit } of tried) {
          const what = `misfit of ${VARIANTS[variant]} at ${s},${j}`;
          expectClose(misfit, misfits[variant][s * gridSteps + j], { absolute: 1e-9 }, what);
        }
      });
    },
  );
});

describe('compareVariant', () => {
  const pairs = [
    { s: 3, j: 5, S: 4, J: 1 },
    { s: 3, j: 6, S: 4, J: 1.2 },
    { s: 7, j: 5, S: 8, J: 2 },
  ];
  const problem = { ...problemThatRests(false), pairs };

  it('takes a neighbour of the best as found and tells how far the misfits lie apart', () => {
    const compared = compareVariant([{ s: 3, j: 5, misfit: 0.25 }], Float64Array.of(0.2, 0.1, 0.3), problem);
    expect(compared.found).toBe(true);
    expect(compared.brute).toEqual({ s: 3, j: 6, misfit: 0.1 });
    expectClose(compared.furthestOff, 0.05, { absolute: 1e-12 });
  });

  it('takes a pair further off as missed', () => {
    const compared = compareVariant([{ s: 3, j: 5, misfit: 0.2 }], Float64Array.of(0.2, 0.3, 0.1), problem);
    expect(compared.found).toBe(false);
  });
});
