/** Numbers as figures and their texts need them: plain arrays for the data, few digits for captions. */

/**
 * The values at `indices` (all when left out) as a plain array, rounded to a ten-thousandth of their spread (less
 * than a tenth of a pixel in any figure) so that the page stays small. What is not finite becomes null.
 */
export function plain(values: ArrayLike<number>, indices?: readonly number[]): (number | null)[] {
  const chosen = indices ? indices.map((i) => values[i]) : Array.from(values);
  const { low, high } = extent(chosen);
  const spread = high - low || Math.abs(high) || 1;
  const decimals = Math.min(12, Math.max(0, 4 - Math.floor(Math.log10(spread))));
  return chosen.map((value) => (Number.isFinite(value) ? 0 + Number(value.toFixed(decimals)) : null));
}

/** Lowest and highest finite value; both 0 when there is none. */
export function extent(values: ArrayLike<number>): { low: number; high: number } {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < values.length; i++) {
    if (!Number.isFinite(values[i])) continue;
    if (values[i] < low) low = values[i];
    if (values[i] > high) high = values[i];
  }
  return low <= high ? { low, high } : { low: 0, high: 0 };
}

/** A number with `digits` significant digits and no trailing zeros, e.g. `0.42`, `118`, `1250`. */
export function short(value: number, digits = 3): string {
  if (value === 0) return '0';
  const decimals = Math.min(12, Math.max(0, digits - 1 - Math.floor(Math.log10(Math.abs(value)))));
  return String(Number(value.toFixed(decimals)));
}

/** The range from `low` to `high` with room on either side, as shares of its size. */
export function padded(low: number, high: number, below: number, above: number): (number | null)[] {
  const size = high - low || Math.abs(high) || 1;
  return plain([low - below * size, high + above * size]);
}
