import { expect, test } from 'vitest';
import { blockMeans } from '../../src/signal/block-means';

test('means of neighbours, the rest left out', () => {
  expect(blockMeans(Float64Array.of(1, 3, 5, 7, 100), 2)).toEqual(Float64Array.of(2, 6));
  expect(blockMeans(Float64Array.of(1, 3), 1)).toEqual(Float64Array.of(1, 3));
});

test('a block that is no whole number is refused', () => {
  expect(() => blockMeans(new Float64Array(4), 1.5)).toThrow('at least 1. Received 1.5.');
});
