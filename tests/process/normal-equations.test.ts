import { describe, expect, it } from 'vitest';
import { solveNormal } from '../../src/process/normal-equations';
import { leastSquares } from '../../src/signal/least-squares';
import { seededRandom } from '../../src/signal/random';
import { expectAllClose, expectClose } from '../closeness';

const random = seededRandom(11);
const columns = [0, 1, 2].map(() => Float64Array.from({ length: 200 }, () => random.normal()));
const y = Float64Array.from(
  { length: 200 },
  (_, i) => 2 * columns[0]![i]! - columns[2]![i]! + random.normal(),
);
const dot = (a: Float64Array, b: Float64Array): number => a.reduce((sum, value, i) => sum + value * b[i]!, 0);
const table = (of: Float64Array[]): Float64Array[] => of.map((a) => Float64Array.from(of, (b) => dot(a, b)));

describe('solveNormal', () => {
  it('agrees with the QR decomposition', () => {
    const fit = leastSquares(columns, y, { intercept: false });
    const got = solveNormal(
      table(columns),
      Float64Array.from(columns, (a) => dot(a, y)),
      dot(y, y),
    )!;
    expectAllClose(got.coefficients, fit.coefficients, { relative: 1e-10 });
    expectClose(got.squares, dot(fit.residuals, fit.residuals), { relative: 1e-10 });
  });

  it('has no answer for a regressor that the others give', () => {
    const twice = [columns[0]!, columns[1]!, columns[0]!.map((value, i) => value + columns[1]![i]!)];
    expect(
      solveNormal(
        table(twice),
        Float64Array.from(twice, (a) => dot(a, y)),
        dot(y, y),
      ),
    ).toBeNull();
    const zero = [new Float64Array(200)];
    expect(
      solveNormal(
        table(zero),
        Float64Array.from(zero, (a) => dot(a, y)),
        dot(y, y),
      ),
    ).toBeNull();
  });
});
