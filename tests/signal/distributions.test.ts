import { describe, expect, test } from 'vitest';
import {
  chiSquareQuantile,
  fQuantile,
  normalQuantile,
  studentTQuantile,
} from '../../src/signal/distributions';
import { expectClose } from '../closeness';

describe('identities between the distributions', () => {
  test('the square of a normal is chi-square with one degree, the square of t is F', () => {
    expectClose(normalQuantile(0.975) ** 2, chiSquareQuantile(0.95, 1), { relative: 1e-7 });
    expectClose(studentTQuantile(0.975, 9) ** 2, fQuantile(0.95, 1, 9), { relative: 1e-6 });
  });
});

test('probabilities and degrees out of range are refused', () => {
  expect(() => normalQuantile(1)).toThrow('ends left out. Received 1.');
  expect(() => studentTQuantile(0.9, 0)).toThrow('Degrees of freedom are a number above 0. Received 0.');
});
