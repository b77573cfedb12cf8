/** How numbers stand in the sentences of signal, oscillation and evidence. */

/** The number with three significant digits, without trailing zeros: 0.07149 is `0.0715`, 1234.5 is `1230`. */
export function threeDigits(value: number): string {
  return String(Number(value.toPrecision(3)));
}
