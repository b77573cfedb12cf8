import { describe, expect, it } from 'vitest';
import { readModes } from '../../src/record/modes';

const flags = (...cells: (string | number)[]): number[] | null => {
  const { automatic } = readModes(cells);
  return automatic && [...automatic];
};

describe('readModes', () => {
  it('tells automatic from manual by words', () => {
    expect(flags('AUTO', 'Man', 'CAS', 'RCAS', 'IMan', 'Auto (8)')).toEqual([1, 0, 1, 1, 0, 1]);
    expect(flags('A', 'M')).toEqual([1, 0]);
  });

  it('repeats the mode above an empty cell, and takes the first for what stands before it', () => {
    expect(flags('', 'MAN', '', 'AUTO', '')).toEqual([0, 0, 0, 1, 1]);
  });

  it('takes 1 for automatic and 0 for manual, and says so', () => {
    expect(flags(1, 0, 1)).toEqual([1, 0, 1]);
    expect(readModes([1, 0]).text).toContain('1 taken as automatic, 0 as manual');
  });

  it('does not guess at other values', () => {
    expect(flags(16, 8)).toBeNull();
    expect(flags('AUTO', 'mode 7')).toBeNull();
    expect(readModes(['', '']).automatic).toBeNull();
  });
});
