/**
 * Sums of products over a record, from which every candidate of form and shift of a controller can be solved without
 * another walk over the samples.
 */

/** What is logged of a loop at the scans of its controller: values from a common level, in units of PV, and OP in %. */
export interface Scans {
  /** One array for each of {@link shifts}: PV at the scan less the shift. */
  readonly pv: readonly Float64Array[];
  /** The same of SP; null when it was not logged. */
  readonly sp: readonly Float64Array[] | null;
  readonly op: Float64Array;
  /** 1 where OP stands at an extreme at which it is held somewhere: such scans are left out. */
  readonly held: Uint8Array;
  /** s from scan to scan. */
  readonly period: number;
}

export interface Sums {
  /** Sum of column a times column b at a * columns + b. */
  readonly table: Float64Array;
  readonly rows: number;
  /** Scans over which moves were taken, and s from scan to scan. */
  readonly interval: number;
  readonly period: number;
}

/** Samples by which PV or SP may be logged off OP, the likeliest first. */
export const shifts = [0, 1, -1] as const;
export type Shift = (typeof shifts)[number];

/** Columns of the table: for each shift of PV its move over the interval, its integral, and the change of its slope. */
export const pvMove = (shift: Shift): number => (shift + 1) * 3;
export const pvIntegral = (shift: Shift): number => pvMove(shift) + 1;
export const pvBend = (shift: Shift): number => pvMove(shift) + 2;
/** For each shift of SP its move and its integral. */
export const spMove = (shift: Shift): number => 9 + (shift + 1) * 2;
export const spIntegral = (shift: Shift): number => spMove(shift) + 1;
/** Length of the interval in s (the integral of 1), and the move of OP. */
export const constantColumn = 15;
export const opColumn = 16;
export const columns = 17;

/** The table for moves over `interval` scans. Each scan's value counts for the scan period before it in integrals. */
export function sumOver(scans: Scans, interval: number): Sums {
  const { pv, sp, op, held, period } = scans;
  const pvSums = pv.map((signal) => runningIntegral(signal, period));
  const spSums = sp?.map((signal) => runningIntegral(signal, period)) ?? [];
  const table = new Float64Array(columns * columns);
  const row = new Float64Array(columns);
  row[constantColumn] = interval * period;
  let rows = 0;
  for (let j = interval + 1; j < op.length; j++) {
    const from = j - interval;
    if (held[j] || held[from]) continue;
    for (const [s, shift] of shifts.entries()) {
      const signal = pv[s]!;
      row[pvMove(shift)] = signal[j]! - signal[from]!;
      row[pvIntegral(shift)] = pvSums[s]![j]! - pvSums[s]![from]!;
      row[pvBend(shift)] = (signal[j]! - signal[j - 1]! - signal[from]! + signal[from - 1]!) / period;
      if (sp !== null) {
        row[spMove(shift)] = sp[s]![j]! - sp[s]![from]!;
        row[spIntegral(shift)] = spSums[s]![j]! - spSums[s]![from]!;
      }
    }
    row[opColumn] = op[j]! - op[from]!;
    for (let a = 0; a < columns; a++) {
      const left = row[a]!;
      if (left === 0) continue;
      for (let b = a; b < columns; b++) table[a * columns + b]! += left * row[b]!;
    }
    rows++;
  }
  for (let a = 0; a < columns; a++) {
    for (let b = 0; b < a; b++) table[a * columns + b] = table[b * columns + a]!;
  }
  return { table, rows, interval, period };
}

function runningIntegral(signal: Float64Array, period: number): Float64Array {
  const sum = new Float64Array(signal.length);
  for (let j = 1; j < signal.length; j++) sum[j] = sum[j - 1]! + signal[j]! * period;
  return sum;
}
