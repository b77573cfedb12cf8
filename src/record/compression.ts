/**
 * Whether a historian compressed a signal: kept few points and drew straight lines between them, or held them.
 *
 * Drawn lines leave second differences of zero where the signal moves (Thornhill, Choudhury, Shah 2004). Rounding after
 * the lines were drawn hides that between neighbours, so that second differences over longer strides are looked at too.
 * A smooth signal has straight pieces of its own; lines of compression meet in many corners a cycle, honest ones (a
 * valve at rest under integral action) in few.
 */

export interface Compression {
  /** Estimated samples for each point that was kept; 1 when nothing points to compression. */
  readonly factor: number;
  /** `lines` drawn between points, points `held`, or neither. */
  readonly kind: 'lines' | 'held' | 'none';
}

/** Share of moving samples on a straight line from which a stride counts, at a stride of one and over more. */
const lineShare = 2 / 3;
const lineShareOverMore = 0.5;
/** A second difference this many writing steps large, on average, is seen in spite of rounding. */
const seen = 4;
/**
 * Corners a cycle that honest signals of a sticking valve have at most: two slips, each with a corner on either side,
 * and one to spare. Not used where the controller vouches for honest samples.
 */
const honestCorners = 5;
/** Samples in a cycle when no cycle is known: corners closer than this are too many. */
const withoutCycle = 200;
/** Points kept and held: share of the changes that stand alone, and changes over writing steps, that tell them. */
const aloneShare = 0.6;
const largeChange = 5;
/** Fewer samples to judge tell nothing. */
const fewest = 50;

const none: Compression = { factor: 1, kind: 'none' };

/**
 * @param values evenly spaced samples
 * @param cycle samples in a cycle; null when there is none
 * @param accounted 1 at samples that are known to be as the controller made them; they are not counted. null for none
 */
export function compressionOf(
  values: Float64Array,
  cycle: number | null,
  accounted: Uint8Array | null,
): Compression {
  const step = writingStep(values);
  const lines = linesBetween(values, step, cycle, accounted);
  const held = heldPoints(values, step, cycle, accounted);
  return lines.factor >= held.factor ? lines : held;
}

function linesBetween(
  values: Float64Array,
  step: number,
  cycle: number | null,
  accounted: Uint8Array | null,
): Compression {
  const straight = 1.01 * step;
  const mostCorners = accounted === null ? honestCorners / (cycle ?? withoutCycle) : 0;
  for (let stride = 1; stride <= (cycle ?? withoutCycle) / 8; stride *= 2) {
    let judged = 0;
    let onLine = 0;
    let squares = 0;
    let corners = 0;
    let lastBent = -2 * stride;
    for (let i = stride; i < values.length - stride; i++) {
      const across = values[i + stride]! - values[i - stride]!;
      if (accounted?.[i] || Math.abs(across) <= 2 * straight) continue;
      const bend = values[i + stride]! - 2 * values[i]! + values[i - stride]!;
      judged++;
      squares += bend * bend;
      if (Math.abs(bend) <= straight) onLine++;
      else {
        if (i - lastBent >= stride) corners++;
        lastBent = i;
      }
    }
    // What the controller accounts for is no proof of anything; the rest must be enough to judge by.
    if (judged < fewest || judged < 0.1 * values.length) return none;
    if (Math.sqrt(squares / judged) < seen * step) continue;
    const share = onLine / judged;
    if (share < (stride === 1 ? lineShare : lineShareOverMore)) return none;
    return corners > mostCorners * judged
      ? { factor: (2 * stride - 1) / Math.max(1 - share, 1 / judged), kind: 'lines' }
      : none;
  }
  return none;
}

function heldPoints(
  values: Float64Array,
  step: number,
  cycle: number | null,
  accounted: Uint8Array | null,
): Compression {
  const at: number[] = [];
  let counted = 0;
  for (let i = 1; i < values.length; i++) {
    if (accounted?.[i]) continue;
    counted++;
    if (values[i] !== values[i - 1]) at.push(i);
  }
  if (counted < fewest || at.length < 10) return none;
  const factor = counted / at.length;
  const alone = at.filter((i) => i + 1 < values.length && values[i + 1] === values[i]).length / at.length;
  const large =
    at.filter((i) => Math.abs(values[i]! - values[i - 1]!) >= largeChange * step).length / at.length;
  const few = accounted === null && at.length / counted <= honestCorners / (cycle ?? withoutCycle);
  // A beat in the changes is a slow scan, not a choice of points.
  const distances = at.slice(1).map((i, k) => i - at[k]!);
  const usual = [...distances].sort((a, b) => a - b)[Math.floor(distances.length / 2)]!;
  const onBeat = distances.filter((distance) => distance % usual === 0).length / distances.length;
  return alone >= aloneShare && large >= aloneShare && !few && (usual === 1 || onBeat < 0.9)
    ? { factor, kind: 'held' }
    : none;
}

/**
 * The step in which values were written: the smallest gap between distinct values, when all gaps are whole multiples of
 * it; else what single-precision numbers leave.
 */
export function writingStep(values: Float64Array): number {
  const sorted = Float64Array.from(values).sort();
  const largest = Math.max(Math.abs(sorted[0] ?? 0), Math.abs(sorted[sorted.length - 1] ?? 0));
  const digits = 1.2e-7 * largest;
  let smallest = Infinity;
  for (let i = 1; i < sorted.length; i++) {
    const gap = sorted[i]! - sorted[i - 1]!;
    if (gap > digits && gap < smallest) smallest = gap;
  }
  if (smallest === Infinity) return digits;
  for (let i = 1; i < sorted.length; i++) {
    const multiple = (sorted[i]! - sorted[i - 1]!) / smallest;
    if (Math.abs(multiple - Math.round(multiple)) > 0.02) return digits;
  }
  return smallest;
}
