/**
 * Bicoherence, surrogates and self prediction against NumPy and SciPy (nonlinearity-numpy.py made the values;
 * its versions stand in nonlinearity-numpy.json). Tolerances allow for rounding only.
 */
import { expect, test } from 'vitest';
import { squaredBicoherence } from '../../src/signal/bispectrum';
import { selfPredictionError, surrogate } from '../../src/signal/surrogate';
import { expectAllClose, expectClose } from '../closeness';
import numpy from './nonlinearity-numpy.json';

const x = Float64Array.from(numpy.x);

test('squared bicoherence of every pair', () => {
  const { segment, segments, first, second, squared } = numpy.bicoherence;
  const got = squaredBicoherence(x, segment);
  expect(got.segments).toBe(segments);
  expectAllClose(got.first, first, { absolute: 1e-15 });
  expectAllClose(got.second, second, { absolute: 1e-15 });
  expectAllClose(got.squared, squared, { absolute: 1e-10 });
});

test.each(numpy.surrogates)('surrogate of $length samples', ({ length, phases, surrogate: want }) => {
  expectAllClose(surrogate(x.subarray(0, length), Float64Array.from(phases)), want, { absolute: 1e-11 });
});

test.each(numpy.prediction)('prediction by $neighbours stretches of $embedding', (want) => {
  expectClose(selfPredictionError(x, want.embedding, want.neighbours), want.error, { relative: 1e-10 });
});
