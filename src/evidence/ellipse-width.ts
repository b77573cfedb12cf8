/**
 * Width of the PV-OP plot: an ellipse is fitted to the filtered plot, and its widest chord along OP is read
 * as apparent stiction. It is a size, not a verdict: any cycle whose PV lags OP has some width.
 */
import { determinant, EigenvalueDecomposition, inverse, Matrix } from 'ml-matrix';
import { bandPass } from '../signal/filter';
import { threeDigits } from '../signal/three-digits';
import { firstReason, needsBothCycles, needsShape } from './applies';
import type { Indicator } from './indicator';

/**
 * Longest chord along `x` of the ellipse fitted to the points, in the unit of `x`. The fit minimises the
 * algebraic distance among ellipses only (Fitzgibbon, Pilu, Fisher 1999, IEEE Trans. Pattern Anal.
 * 21:476-480, in the stable form of Halir and Flusser 1998).
 *
 * @returns null when the points do not spread over an ellipse
 */
export function ellipseChord(x: Float64Array, y: Float64Array): number | null {
  const xs = scaled(x);
  const ys = scaled(y);
  if (xs === null || ys === null) return null;
  const quadratic = [
    xs.values.map((v) => v * v),
    xs.values.map((v, i) => v * ys.values[i]!),
    ys.values.map((v) => v * v),
  ];
  const linear = [xs.values, ys.values, new Float64Array(x.length).fill(1)];
  const s1 = products(quadratic, quadratic);
  const s2 = products(quadratic, linear);
  const s3 = products(linear, linear);
  // Points on one line: x and y depend on each other.
  if (determinant(s3) < 1e-12 * s3.get(0, 0) * s3.get(1, 1) * s3.get(2, 2)) return null;
  const back = inverse(s3).mmul(s2.transpose()).mul(-1);
  const reduced = s1.add(s2.mmul(back));
  // Premultiplied by the inverse of the constraint 4 a c - b^2 = 1.
  const system = new Matrix([
    reduced.getRow(2).map((v) => v / 2),
    reduced.getRow(1).map((v) => -v),
    reduced.getRow(0).map((v) => v / 2),
  ]);
  const { eigenvectorMatrix } = new EigenvalueDecomposition(system);
  for (let k = 0; k < 3; k++) {
    const [a, b, c] = eigenvectorMatrix.getColumn(k) as [number, number, number];
    if (!(4 * a * c - b * b > 0)) continue;
    const [d, e, f] = back.mmul(Matrix.columnVector([a, b, c])).to1DArray() as [number, number, number];
    // At a height y, x solves a x^2 + (b y + d) x + c y^2 + e y + f = 0; the chord is longest where its
    // discriminant, a parabola in y, has its top.
    const bend = b * b - 4 * a * c;
    const slope = 2 * b * d - 4 * a * e;
    const top = d * d - 4 * a * f - slope ** 2 / (4 * bend);
    return top > 0 ? (Math.sqrt(top) / Math.abs(a)) * xs.scale : null;
  }
  return null;
}

export const ellipseWidth: Indicator = {
  name: 'ellipse width',
  threshold: 'none: a size in % of OP span, lower than S because loop dynamics shrink it',
  source: 'Choudhury, Shah, Thornhill, Shook 2006, Control Eng. Practice 14:1395-1412; value from memory',
  skips: (facts) => firstReason(needsBothCycles(facts), needsShape(facts)),
  evaluate({ op, pv, period }) {
    const high = 4 / period;
    const value = ellipseChord(bandPass(op, 1, 0, high), bandPass(pv, 1, 0, high));
    if (value === null) return 'The plot of PV against OP does not spread over an ellipse.';
    return {
      value,
      says: 'undecided',
      why: `The ellipse fitted to PV against OP is ${threeDigits(value)} % of OP span wide; that is a size and tells no cause.`,
    };
  },
};

function products(a: readonly Float64Array[], b: readonly Float64Array[]): Matrix {
  return new Matrix(a.map((u) => b.map((v) => u.reduce((sum, value, i) => sum + value * v[i]!, 0))));
}

/** Centred and brought to unit size, which keeps the fit's digits; null for a constant. */
function scaled(values: Float64Array): { values: Float64Array; scale: number } | null {
  const centre = values.reduce((sum, value) => sum + value, 0) / values.length;
  const scale = values.reduce((most, value) => Math.max(most, Math.abs(value - centre)), 0);
  return scale > 0 ? { values: values.map((value) => (value - centre) / scale), scale } : null;
}
