/** Two ways in which historians thin a signal, each followed by the straight lines with which they give it back. */

/**
 * Keeps a value when it is off the last kept one by more than `deviation` (and the value just before it, as
 * exception reporting does), then draws straight lines between the kept ones.
 */
export function compressByException(values: Float64Array, deviation: number): Float64Array {
  const kept = [0];
  for (let k = 1; k < values.length; k++) {
    const last = kept[kept.length - 1];
    if (Math.abs(values[k] - values[last]) > deviation) {
      if (k - 1 > last) kept.push(k - 1);
      kept.push(k);
    }
  }
  return linesThrough(values, kept);
}

/**
 * Swinging door: keeps the end of the longest stretch whose values a straight line from the last kept one passes
 * within `deviation`, then draws straight lines between the kept ones.
 */
export function compressBySwingingDoor(values: Float64Array, deviation: number): Float64Array {
  const kept = [0];
  let origin = 0;
  let steepest = Number.NEGATIVE_INFINITY;
  let flattest = Number.POSITIVE_INFINITY;
  for (let k = 1; k < values.length; k++) {
    const run = k - origin;
    const rise = values[k] - values[origin];
    steepest = Math.max(steepest, (rise - deviation) / run);
    flattest = Math.min(flattest, (rise + deviation) / run);
    if (steepest > flattest) {
      origin = k - 1;
      kept.push(origin);
      steepest = values[k] - values[origin] - deviation;
      flattest = values[k] - values[origin] + deviation;
    }
  }
  return linesThrough(values, kept);
}

function linesThrough(values: Float64Array, kept: readonly number[]): Float64Array {
  const ends = kept[kept.length - 1] === values.length - 1 ? kept : [...kept, values.length - 1];
  const drawn = Float64Array.from(values);
  for (let i = 1; i < ends.length; i++) {
    const from = ends[i - 1];
    const to = ends[i];
    for (let k = from + 1; k < to; k++) {
      drawn[k] = values[from] + ((values[to] - values[from]) * (k - from)) / (to - from);
    }
  }
  return drawn;
}
