/**
 * Regularity of a cycle against a NumPy computation of its definition (regularity-numpy.py made the values).
 */
import { expect, test } from 'vitest';
import { regularityAt } from '../../src/oscillation/regularity';
import { expectAllClose, expectClose } from '../closeness';
import numpy from './regularity-numpy.json';

test.each(numpy.cases)('period, r and autocorrelation', ({ x, frequency, want }) => {
  const got = regularityAt(Float64Array.from(x), frequency);
  expect(got).not.toBeNull();
  expectClose(got!.period, want.period, { relative: 1e-9 });
  expectClose(got!.value, want.value, { relative: 1e-6 });
  expectAllClose(got!.autocorrelation, want.autocorrelation, { absolute: 1e-10 });
});
