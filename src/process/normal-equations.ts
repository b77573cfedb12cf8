/** Least squares from sums of products alone, for a handful of coefficients that are tried on many candidates. */

export interface Solved {
  readonly coefficients: Float64Array;
  /** Sum of squares that is left. */
  readonly squares: number;
}

/** A pivot below this share of its diagonal means that the regressor is a combination of the others. */
const collinear = 1e-10;

/**
 * Solves G c = r by Cholesky decomposition.
 *
 * @param products sums of products of the regressors with each other
 * @param right their sums of products with the signal
 * @param total sum of squares of the signal
 * @returns null when a regressor is zero or a combination of the others
 *
 * Limit: half the digits of a QR decomposition; meant for regressors that are not nearly parallel.
 */
export function solveNormal(
  products: readonly Float64Array[],
  right: Float64Array,
  total: number,
): Solved | null {
  const m = right.length;
  const root = products.map((row) => Float64Array.from(row));
  const along = new Float64Array(m);
  for (let i = 0; i < m; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = products[i]![j]!;
      for (let k = 0; k < j; k++) sum -= root[i]![k]! * root[j]![k]!;
      if (i > j) root[i]![j] = sum / root[j]![j]!;
      else if (sum > collinear * products[i]![i]!) root[i]![i] = Math.sqrt(sum);
      else return null;
    }
    let sum = right[i]!;
    for (let k = 0; k < i; k++) sum -= root[i]![k]! * along[k]!;
    along[i] = sum / root[i]![i]!;
  }
  const coefficients = new Float64Array(m);
  for (let i = m - 1; i >= 0; i--) {
    let sum = along[i]!;
    for (let k = i + 1; k < m; k++) sum -= root[k]![i]! * coefficients[k]!;
    coefficients[i] = sum / root[i]![i]!;
  }
  return { coefficients, squares: Math.max(0, total - along.reduce((sum, value) => sum + value * value, 0)) };
}
