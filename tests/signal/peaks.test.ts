import { expect, test } from 'vitest';
import { peaksOf } from '../../src/signal/peaks';

test('maxima come highest first, ends and slopes are none, a flat top counts once', () => {
  expect(peaksOf(Float64Array.of(9, 1, 3, 2, 5, 5, 5, 0, 4, 4))).toEqual([4, 2]);
  expect(peaksOf(Float64Array.of(1, 2, 3))).toEqual([]);
  expect(peaksOf(new Float64Array(0))).toEqual([]);
});
