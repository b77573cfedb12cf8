import { expect, test } from 'vitest';
import { leastSquares } from '../../src/signal/least-squares';
import { expectAllClose, expectClose } from '../closeness';

const x = Float64Array.of(1, 2, 3, 4);

test('a line without scatter', () => {
  const fit = leastSquares(
    [x],
    x.map((value) => 5 - 2 * value),
  );
  expectAllClose(fit.coefficients, [5, -2], { absolute: 1e-12 });
  expectClose(fit.residualDeviation, 0, { absolute: 1e-12 });
  expectClose(fit.rSquared!, 1, { absolute: 1e-12 });
  expect(fit.degreesOfFreedom).toBe(2);
});

test('without a constant: slope is sum xy over sum xx, its error s over the root of sum xx', () => {
  const fit = leastSquares([x], Float64Array.of(2, 1, 4, 3), { intercept: false });
  expectAllClose(fit.coefficients, [28 / 30], { absolute: 1e-12 });
  const s = Math.sqrt((30 - (28 * 28) / 30) / 3);
  expectClose(fit.residualDeviation, s, { absolute: 1e-12 });
  expectAllClose(fit.standardErrors, [s / Math.sqrt(30)], { absolute: 1e-12 });
  expectClose(fit.rSquared!, (28 * 28) / 900, { absolute: 1e-12 });
});

test('a y that does not vary has no R squared', () => {
  expect(leastSquares([x], new Float64Array(4).fill(0.1)).rSquared).toBeNull();
});

test('columns that do not fit or depend on each other are refused', () => {
  const y = Float64Array.of(1, 0, 2, 0);
  expect(() => leastSquares([x.subarray(1)], y)).toThrow('Column 0 has 3.');
  expect(() => leastSquares([x, x.map((value) => 2 * value + 1)], y)).toThrow('combination of the others');
  expect(() => leastSquares([new Float64Array(4)], y)).toThrow('zero throughout');
  expect(() => leastSquares([x.subarray(2)], y.subarray(2))).toThrow('more samples. Received 2.');
  expect(() => leastSquares([x], y, { interecpt: false } as object)).toThrow('no option "interecpt"');
});
