/**
 * src/signal against sources outside the project: SciPy and NumPy (signal-scipy.py made signal-scipy.json;
 * the versions stand in it), mathjs, NIST's reference data sets and NIST/SEMATECH tables. Tolerances of 1e-9
 * and below allow for rounding only; wider ones are explained where they stand.
 */
import { type Complex, fft as mathFft } from 'mathjs';
import { describe, test } from 'vitest';
import { autocorrelation, crossCorrelation } from '../../src/signal/autocorrelation';
import {
  chiSquareQuantile,
  fQuantile,
  normalQuantile,
  studentTQuantile,
} from '../../src/signal/distributions';
import { bandPass, firstOrderLag, savitzkyGolay } from '../../src/signal/filter';
import { forwardTransform, powerSpectrum } from '../../src/signal/fourier';
import { leastSquares } from '../../src/signal/least-squares';
import { quantile, variance } from '../../src/signal/statistics';
import { removeLine } from '../../src/signal/trend';
import { expectAllClose, expectClose } from '../closeness';
import nist from './nist-strd.json';
import scipy from './signal-scipy.json';

const a = Float64Array.from(scipy.a);
const b = Float64Array.from(scipy.b);
const rounding = { absolute: 1e-11, relative: 1e-11 };

describe('against SciPy and NumPy', () => {
  test('Fourier transform, of lengths that are and are not powers of two', () => {
    for (const { length, re, im } of scipy.transforms) {
      const got = forwardTransform(a.subarray(0, length));
      expectAllClose(got.re, re, rounding, `real part, length ${length}`);
      expectAllClose(got.im, im, rounding, `imaginary part, length ${length}`);
    }
  });
  test('power spectrum', () => {
    const got = powerSpectrum(a, 2);
    expectAllClose(got.frequency, scipy.power.frequency, rounding, 'frequency');
    expectAllClose(got.power, scipy.power.power, rounding, 'power');
  });
  test('correlation of a signal with itself and with another', () => {
    expectAllClose(autocorrelation(a, 40), scipy.autocorrelation, rounding);
    expectAllClose(crossCorrelation(a, b, 40), scipy.crossCorrelation, rounding);
  });
  test('band-pass and low-pass', () => {
    expectAllClose(bandPass(a, 2, 0.01, 0.08), scipy.bandPass, rounding);
    expectAllClose(bandPass(a, 2, 0, 0.05), scipy.lowPass, rounding);
  });
  test('first-order lag', () => {
    expectAllClose(firstOrderLag(a, 2, 7.5), scipy.lag, rounding);
  });
  test('polynomial smoothing and its derivatives, ends included', () => {
    for (const order of [0, 1, 2] as const) {
      expectAllClose(savitzkyGolay(a, 11, 3, order), scipy.savitzkyGolay[order]!, rounding, `order ${order}`);
    }
  });
  test('line, quantiles and variance', () => {
    expectAllClose(removeLine(a), scipy.removeLine, rounding);
    const shares = [0, 0.1, 0.25, 0.5, 0.77, 1];
    expectAllClose(
      shares.map((share) => quantile(a, share)),
      scipy.quantiles,
      rounding,
    );
    expectClose(variance(a), scipy.variance, rounding);
  });
  test('distributions', () => {
    const { probabilities, normal, studentT, chiSquare, f } = scipy.distributions;
    // jstat iterates quantiles and stops near eight digits.
    const iterated = { absolute: 1e-9, relative: 1e-7 };
    expectAllClose(probabilities.map(normalQuantile), normal.quantile, iterated, 'normal quantile');
    for (const { degrees, ...want } of studentT) {
      const quantiles = probabilities.map((p) => studentTQuantile(p, degrees));
      expectAllClose(quantiles, want.quantile, iterated, `t quantile, ${degrees} degrees`);
    }
    for (const { degrees, ...want } of chiSquare) {
      const quantiles = probabilities.map((p) => chiSquareQuantile(p, degrees));
      expectAllClose(quantiles, want.quantile, iterated, `chi-square quantile, ${degrees} degrees`);
    }
    for (const { degrees, ...want } of f) {
      const [d1, d2] = degrees as [number, number];
      expectAllClose(
        probabilities.map((p) => fQuantile(p, d1, d2)),
        want.quantile,
        iterated,
        `F ${degrees}`,
      );
    }
  });
});

test('Fourier transform against mathjs', () => {
  for (const length of [60, 64]) {
    const want = mathFft(Array.from(a.subarray(0, length))) as unknown as Complex[];
    const got = forwardTransform(a.subarray(0, length));
    expectAllClose(
      got.re,
      want.slice(0, got.re.length).map((z) => z.re),
      rounding,
    );
    expectAllClose(
      got.im,
      want.slice(0, got.im.length).map((z) => z.im),
      rounding,
    );
  }
});

describe('against the certified values of the NIST reference data sets for linear regression', () => {
  // Filip is the ill-conditioned one: its powers, formed in double precision, allow no more than 8 digits.
  const digits: Record<string, number> = { Norris: 13, Longley: 12, Filip: 7 };
  test.each(nist.sets)('$name', ({ name, degree, columns, y, certified }) => {
    const powers = columns.flatMap((column) =>
      Array.from({ length: degree }, (_, p) => Float64Array.from(column, (x) => x ** (p + 1))),
    );
    const fit = leastSquares(powers, Float64Array.from(y));
    const tolerance = { relative: 10 ** -digits[name]! };
    expectAllClose(fit.coefficients, certified.coefficients, tolerance, 'coefficient');
    expectAllClose(fit.standardErrors, certified.standardErrors, tolerance, 'standard error');
    expectClose(fit.residualDeviation, certified.residualDeviation, tolerance, 'residual deviation');
    expectClose(fit.rSquared!, certified.rSquared, tolerance, 'R squared');
  });
});

describe('against tables of the NIST/SEMATECH e-Handbook of Statistical Methods (values from memory)', () => {
  // Sections 1.3.6.7.2 to 1.3.6.7.4 print three digits after the point.
  const printed = { absolute: 0.0005 };
  test.each([
    [0.95, 1, 3.841],
    [0.95, 10, 18.307],
    [0.99, 1, 6.635],
    [0.99, 10, 23.209],
    [0.05, 10, 3.94],
  ])('upper chi-square %d, %d degrees', (p, degrees, want) => {
    expectClose(chiSquareQuantile(p, degrees), want, printed);
  });
  test.each([
    [0.95, 1, 1, 161.448],
    [0.95, 5, 10, 3.326],
    [0.95, 10, 20, 2.348],
    [0.99, 5, 10, 5.636],
    [0.99, 10, 20, 3.368],
  ])('F %d, %d and %d degrees', (p, d1, d2, want) => {
    expectClose(fQuantile(p, d1, d2), want, printed);
  });
  test('Student t, 0.975', () => {
    expectClose(studentTQuantile(0.975, 10), 2.228, printed);
    expectClose(studentTQuantile(0.975, 100), 1.984, printed);
  });
});
