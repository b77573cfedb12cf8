/** Surrogate signals and how well a signal foretells itself: together a test for nonlinearity. */
import { WrongUse } from '../errors';
import { forwardTransform, inverseTransform } from './fourier';
import type { SeededRandom } from './random';

/** Phases, 0 to 2 pi, for {@link surrogate} of a signal of `length` samples. */
export function randomPhases(length: number, random: SeededRandom): Float64Array {
  return new Float64Array(Math.floor((length - 1) / 2)).map(() => 2 * Math.PI * random.uniform());
}

/**
 * A signal with the same power spectrum (so the same linear properties) and phases moved by `phases` (Theiler
 * et al. 1992, Physica D 58:77-94). The two ends of the signal should match: the spectrum takes the record as
 * periodic.
 *
 * @param phases one for each frequency between 0 and one half, floor((length - 1) / 2) of them
 * @throws WrongUse when the number of phases does not fit
 */
export function surrogate(values: Float64Array, phases: Float64Array): Float64Array {
  const wanted = Math.floor((values.length - 1) / 2);
  if (phases.length !== wanted) {
    throw new WrongUse(
      `A surrogate of ${values.length} samples takes ${wanted} phases. Received ${phases.length}.`,
    );
  }
  const { re, im } = forwardTransform(values);
  for (let k = 1; k <= wanted; k++) {
    const c = Math.cos(phases[k - 1]!);
    const s = Math.sin(phases[k - 1]!);
    const real = re[k]!;
    re[k] = real * c - im[k]! * s;
    im[k] = real * s + im[k]! * c;
  }
  return inverseTransform({ re, im }, values.length);
}

/**
 * Root mean square error with which stretches of the signal foretell what comes: for each stretch of
 * `embedding` samples, the `neighbours` stretches most like it are taken (not those that start within one
 * `embedding` of it), and the mean of what stood `embedding` samples after their ends is compared with what
 * stood there after the stretch itself.
 *
 * Time grows with the square of the length.
 *
 * @param embedding samples in a stretch, and steps ahead; a cycle is usual
 * @throws WrongUse when the signal is too short to have that many neighbours
 */
export function selfPredictionError(values: Float64Array, embedding: number, neighbours: number): number {
  // Stretch i covers i .. i + embedding - 1; its target stands at i + 2 embedding - 1.
  const stretches = values.length - 2 * embedding + 1;
  if (embedding < 1 || neighbours < 1 || stretches < 2 * embedding + neighbours) {
    throw new WrongUse(
      `Foretelling by ${neighbours} neighbours of ${embedding} samples needs more than the ${values.length} samples received.`,
    );
  }
  // Sorted lists of the nearest so far, one row a stretch.
  const distance = new Float64Array(stretches * neighbours).fill(Number.POSITIVE_INFINITY);
  const target = new Float64Array(stretches * neighbours);
  const farthest = neighbours - 1;
  const insert = (i: number, far: number, value: number): void => {
    let at = i * neighbours + farthest;
    while (at > i * neighbours && distance[at - 1]! > far) {
      distance[at] = distance[at - 1]!;
      target[at] = target[at - 1]!;
      at--;
    }
    distance[at] = far;
    target[at] = value;
  };
  const ahead = 2 * embedding - 1;
  for (let gap = embedding + 1; gap < stretches; gap++) {
    // Along one gap each distance follows from the last by one square in and one out.
    let far = 0;
    for (let k = 0; k < embedding; k++) far += (values[k]! - values[k + gap]!) ** 2;
    for (let i = 0; i + gap < stretches; i++) {
      if (far < distance[i * neighbours + farthest]!) insert(i, far, values[i + gap + ahead]!);
      if (far < distance[(i + gap) * neighbours + farthest]!) insert(i + gap, far, values[i + ahead]!);
      far +=
        (values[i + embedding]! - values[i + gap + embedding]!) ** 2 - (values[i]! - values[i + gap]!) ** 2;
    }
  }
  let squares = 0;
  for (let i = 0; i < stretches; i++) {
    let sum = 0;
    for (let k = i * neighbours; k < (i + 1) * neighbours; k++) sum += target[k]!;
    squares += (values[i + ahead]! - sum / neighbours) ** 2;
  }
  return Math.sqrt(squares / stretches);
}
