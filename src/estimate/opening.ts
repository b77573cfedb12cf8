/**
 * Where the stem of an element most likely rests at the beginning of a record.
 *
 * A stick-slip cycle swings OP by little more than S, and an element that starts in the middle of its stick band would
 * then never break loose: it needs (S + J)/2 to either side. In its own cycle the stem rests J/2 below the middle of
 * the swing while OP climbs to the upper turn, and J/2 above it while OP falls to the lower one. Where OP swings by
 * more than S + J any start is soon forgotten, and the stem is taken to rest where OP is.
 */

export interface Opening {
  /** OP at the first sample, and middle and width of its first swings, %. */
  readonly first: number;
  readonly middle: number;
  readonly width: number;
  /** 1 when OP comes to its upper turn first, -1 when to its lower one. */
  readonly towards: 1 | -1;
}

/** Opening of `op` (%); `period` of its cycle in samples. */
export function openingOf(op: Float64Array, period: number): Opening {
  const until = Math.max(2, Math.min(op.length, Math.ceil(1.5 * period)));
  let highest = 0;
  let lowest = 0;
  for (let k = 1; k < until; k++) {
    if (op[k] > op[highest]) highest = k;
    if (op[k] < op[lowest]) lowest = k;
  }
  return {
    first: op[0],
    middle: (op[highest] + op[lowest]) / 2,
    width: op[highest] - op[lowest],
    towards: highest < lowest ? 1 : -1,
  };
}

/** Travel of an element with `S` and `J` (%) before the first sample, %. */
export function restingTravel({ first, middle, width, towards }: Opening, S: number, J: number): number {
  return width > S + J ? first : middle - (towards * J) / 2;
}
