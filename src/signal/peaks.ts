/** Peaks of a curve, such as a spectrum. */

/**
 * Indices of the local maxima, highest first. A maximum is higher than the value before it and not lower than
 * the one after; a flat top counts once, at its start. The two ends are no maxima.
 */
export function peaksOf(values: Float64Array): number[] {
  const found: number[] = [];
  for (let i = 1; i < values.length - 1; i++) {
    if (values[i]! <= values[i - 1]!) continue;
    let end = i;
    while (end < values.length - 1 && values[end + 1] === values[i]) end++;
    if (end < values.length - 1 && values[end + 1]! < values[i]!) found.push(i);
    i = end;
  }
  return found.sort((a, b) => values[b]! - values[a]!);
}
