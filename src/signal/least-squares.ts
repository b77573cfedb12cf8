/** Ordinary linear least squares by QR decomposition. */
import { Matrix, QrDecomposition } from 'ml-matrix';
import { refuseUnknownOptions, WrongUse } from '../errors';

export interface LeastSquaresOptions {
  /** Fit a constant too, as first coefficient. Default true. */
  readonly intercept?: boolean;
}

export interface LeastSquaresFit {
  /** The constant first (when fitted), then one coefficient a column. */
  readonly coefficients: Float64Array;
  readonly standardErrors: Float64Array;
  readonly residuals: Float64Array;
  /** Square root of the residual sum of squares over `degreesOfFreedom`. */
  readonly residualDeviation: number;
  /** About the mean of y with a constant, about zero without; null when y does not vary. */
  readonly rSquared: number | null;
  readonly degreesOfFreedom: number;
}

/**
 * A column whose part that the others do not give is smaller than this share of it counts as none of its own.
 */
const collinear = 1e-13;

/**
 * Fits y = constant + sum of coefficient x column by least squares. Columns are scaled to unit length before
 * the decomposition (Householder QR), and one step of refinement follows, so that ill-conditioned designs
 * keep their digits: the NIST StRD sets Norris and Longley come out to 12 digits, the tenth-degree polynomial
 * Filip to 7.
 *
 * @param columns one array a regressor, all as long as `y`
 * @throws WrongUse when lengths differ, when there are not more samples than coefficients, or when a column
 *   is a combination of the others
 */
export function leastSquares(
  columns: readonly Float64Array[],
  y: Float64Array,
  options: LeastSquaresOptions = {},
): LeastSquaresFit {
  refuseUnknownOptions('leastSquares', options, ['intercept']);
  const intercept = options.intercept ?? true;
  const n = y.length;
  const design = intercept ? [new Float64Array(n).fill(1), ...columns] : [...columns];
  const m = design.length;
  for (const [i, column] of columns.entries()) {
    if (column.length !== n) {
      throw new WrongUse(
        `Each regressor needs one value for each of the ${n} values of y. Column ${i} has ${column.length}.`,
      );
    }
  }
  if (m === 0 || n <= m) {
    throw new WrongUse(`A fit of ${m} coefficients needs at least one, and more samples. Received ${n}.`);
  }
  const lengths = design.map((column) => Math.sqrt(dot(column, column)));
  const scaled = new Matrix(n, m);
  for (let j = 0; j < m; j++) {
    if (lengths[j] === 0) throw new WrongUse('A regressor is zero throughout. Leave it out.');
    for (let i = 0; i < n; i++) scaled.set(i, j, design[j]![i]! / lengths[j]!);
  }
  const qr = new QrDecomposition(scaled);
  const R = qr.upperTriangularMatrix;
  for (let j = 0; j < m; j++) {
    if (!(Math.abs(R.get(j, j)) > collinear)) {
      throw new WrongUse('A regressor is a combination of the others (or nearly so). Leave one of them out.');
    }
  }
  const solve = (right: Float64Array): Float64Array => {
    const solution = qr.solve(Matrix.columnVector(right));
    return Float64Array.from({ length: m }, (_, j) => solution.get(j, 0) / lengths[j]!);
  };
  const first = solve(y);
  const correction = solve(residualsOf(design, first, y));
  const coefficients = first.map((value, j) => value + correction[j]!);
  const residuals = residualsOf(design, coefficients, y);
  const sumOfSquares = dot(residuals, residuals);
  const degreesOfFreedom = n - m;
  const residualDeviation = Math.sqrt(sumOfSquares / degreesOfFreedom);
  const inverse = upperTriangularInverse(R);
  const standardErrors = coefficients.map((_, j) => {
    let squares = 0;
    for (let k = j; k < m; k++) squares += inverse.get(j, k) ** 2;
    return (residualDeviation * Math.sqrt(squares)) / lengths[j]!;
  });
  const centre = intercept ? y.reduce((sum, value) => sum + value, 0) / n : 0;
  const total = y.reduce((sum, value) => sum + (value - centre) ** 2, 0);
  const varies = total > 0 && !y.every((value) => intercept && value === y[0]);
  return {
    coefficients,
    standardErrors,
    residuals,
    residualDeviation,
    rSquared: varies ? 1 - sumOfSquares / total : null,
    degreesOfFreedom,
  };
}

/**
 * y less the fit, each sum carried with its rounding error (Ogita, Rump, Oishi 2005), which refinement needs.
 */
function residualsOf(
  design: readonly Float64Array[],
  coefficients: Float64Array,
  y: Float64Array,
): Float64Array {
  return y.map((value, i) => {
    let sum = value;
    let lost = 0;
    for (let j = 0; j < design.length; j++) {
      const a = -coefficients[j]!;
      const b = design[j]![i]!;
      const product = a * b;
      lost += productError(a, b, product);
      const next = sum + product;
      const part = next - sum;
      lost += sum - (next - part) + (product - part);
      sum = next;
    }
    return sum + lost;
  });
}

/** What rounding took from `product` = a b (Dekker 1971, Numerische Mathematik 18:224-242). */
function productError(a: number, b: number, product: number): number {
  const aHigh = 134217729 * a - (134217729 * a - a);
  const bHigh = 134217729 * b - (134217729 * b - b);
  const aLow = a - aHigh;
  const bLow = b - bHigh;
  return aLow * bLow - (product - aHigh * bHigh - aLow * bHigh - aHigh * bLow);
}

function upperTriangularInverse(R: Matrix): Matrix {
  const m = R.rows;
  const inverse = Matrix.zeros(m, m);
  for (let k = 0; k < m; k++) {
    inverse.set(k, k, 1 / R.get(k, k));
    for (let j = k - 1; j >= 0; j--) {
      let sum = 0;
      for (let i = j + 1; i <= k; i++) sum += R.get(j, i) * inverse.get(i, k);
      inverse.set(j, k, -sum / R.get(j, j));
    }
  }
  return inverse;
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
  return sum;
}
