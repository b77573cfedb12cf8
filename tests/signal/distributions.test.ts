import { describe, expect, test } from 'vitest';
import {
  chiSquareQuantile,
  chiSquareTail,
  fQuantile,
  fTail,
  normalQuantile,
  normalTail,
  studentTQuantile,
  studentTTail,
} from '../../src/signal/distributions';
import { expectClose } from '../closeness';

describe('identities between the distributions', () => {
  test('the square of a normal is chi-square with one degree, the square of t is F', () => {
    expectClose(normalQuantile(0.975) ** 2, chiSquareQuantile(0.95, 1), { relative: 1e-7 });
    expectClose(studentTQuantile(0.975, 9) ** 2, fQuantile(0.95, 1, 9), { relative: 1e-6 });
  });
  test('tails undo quantiles', () => {
    expectClose(normalTail(normalQuantile(0.2)), 0.8, { absolute: 1e-9 });
    expectClose(studentTTail(studentTQuantile(0.2, 4), 4), 0.8, { absolute: 1e-8 });
    expectClose(chiSquareTail(chiSquareQuantile(0.2, 4), 4), 0.8, { absolute: 1e-8 });
    expectClose(fTail(fQuantile(0.2, 4, 9), 4, 9), 0.8, { absolute: 1e-8 });
  });
  test('below zero all of chi-square and F lies above', () => {
    expect([chiSquareTail(-1, 3), fTail(-1, 3, 3)]).toEqual([1, 1]);
  });
});

test('probabilities and degrees out of range are refused', () => {
  expect(() => normalQuantile(1)).toThrow('ends left out. Received 1.');
  expect(() => studentTTail(1, 0)).toThrow('Degrees of freedom are a number above 0. Received 0.');
});
