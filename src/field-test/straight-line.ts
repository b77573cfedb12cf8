/** Means and slopes over stretches of a record. */

/** Arithmetic mean; 0 of nothing. */
export function average(values: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i]!;
  return values.length > 0 ? sum / values.length : 0;
}

/** Slope of the line through samples `from` to `to` (not included), unit a sample; 0 for fewer than two. */
export function slopeIn(values: Float64Array, from: number, to: number): number {
  const n = to - from;
  if (n < 2) return 0;
  const middle = (n - 1) / 2;
  let along = 0;
  let across = 0;
  for (let i = 0; i < n; i++) {
    along += (i - middle) ** 2;
    across += (i - middle) * values[from + i]!;
  }
  return across / along;
}
