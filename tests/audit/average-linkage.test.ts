import { describe, expect, it } from 'vitest';
import { averageLinkage } from '../../src/audit/average-linkage';

/** Values above the diagonal, row by row. */
function matrix(count: number, values: readonly number[]): (i: number, j: number) => number {
  return (i, j) => values[i * count - (i * (i + 1)) / 2 + (j - i - 1)]!;
}

describe('averageLinkage', () => {
  it('joins by the average over all pairs, not by the nearest', () => {
    // 0-1 are alike; 2 is alike 1 only, 0.4 on average.
    const alike = matrix(3, [0.9, 0, 0.8]);
    expect(averageLinkage(3, alike, 0.5)).toEqual([[0, 1], [2]]);
    expect(averageLinkage(3, alike, 0.4)).toEqual([[0, 1, 2]]);
  });

  it('weighs clusters by their members', () => {
    // {0,1,2} to 3: (0.9 + 0 + 0)/3.
    const alike = matrix(4, [1, 1, 0.9, 1, 0, 0]);
    expect(averageLinkage(4, alike, 0.31)).toEqual([[0, 1, 2], [3]]);
    expect(averageLinkage(4, alike, 0.29)).toEqual([[0, 1, 2, 3]]);
  });

  it('leaves loners, and nothing for nothing', () => {
    expect(averageLinkage(2, () => 0, 0.1)).toEqual([[0], [1]]);
    expect(averageLinkage(0, () => 1, 0.1)).toEqual([]);
  });
});
