import { describe, expect, it } from 'vitest';
import { CellBlock, unpackCells } from '../../../src/audit/sources/cell-block';
import type { Cell } from '../../../src/record/table';
import { seededRandom } from '../../../src/signal/random';

function packed(cells: readonly Cell[], asText = false): Buffer {
  const block = new CellBlock(cells.length + 3, asText);
  // A block is used again for the next stretch of a column.
  for (const cell of ['1.5', 'x', '']) block.add(cell);
  block.clear();
  for (const cell of cells) block.add(cell);
  return block.pack();
}

const roundTrip = (cells: readonly Cell[], asText = false): readonly Cell[] =>
  unpackCells(packed(cells, asText));

describe('a packed block gives back', () => {
  it.each<[string, readonly string[]]>([
    ['decimals', ['52.31', '52.3', '52', '-0.5', '0', '0.001', '-7']],
    ['a column that never moves', ['50', '50', '50']],
    ['long and short numbers side by side', ['123456789012345', '0.000000001', '-99999999.9999999']],
    [
      'more digits than a double has',
      ['0.12345678901234567', '12345678901234567890', '3.141592653589793238'],
    ],
    ['exponents, signs and points without a digit', ['1e3', '+5', '5.', '.5', '-2.5E-7']],
    ['minus zero', ['1.00', '-0.00', '-0']],
    ['leading zeros and blanks at the ends', ['007', ' 12.5 ', '\t3']],
  ])('%s, as the numbers that they are', (_, cells) => {
    expect(roundTrip(cells)).toEqual(cells.map(Number));
  });

  it('numbers drawn at random, exactly', () => {
    const random = seededRandom(7);
    for (const places of [0, 1, 3, 6, 12]) {
      const cells = Array.from({ length: 2000 }, () => (2000 * random.uniform() - 1000).toFixed(places));
      expect(roundTrip(cells)).toEqual(cells.map(Number));
    }
    const doubles = Array.from({ length: 2000 }, () => 10 ** (20 * random.uniform() - 10));
    expect(roundTrip(doubles)).toEqual(doubles);
    expect(roundTrip(doubles.map(String))).toEqual(doubles);
  });

  it('empty cells among numbers, and a block of nothing else', () => {
    expect(roundTrip(['', '1.25', '', '1.5', ' '])).toEqual(['', 1.25, '', 1.5, '']);
    expect(roundTrip(['', ''])).toEqual(['', '']);
    expect(roundTrip(['', 0.1, Number.NaN])).toEqual(['', 0.1, Number.NaN]);
  });

  it.each<[string, readonly Cell[], readonly Cell[]]>([
    ['words among numbers', ['52.31', '', 'Bad', '7', 'No Data'], ['52.31', '', 'Bad', '7', 'No Data']],
    ['decimal commas', ['1,5', '2', '1.234,5'], ['1,5', '2', '1.234,5']],
    [
      'texts of any script',
      ['\u00b0C', '\u4e2d', '\ud83d\ude00', 'a\nb', '"'],
      ['\u00b0C', '\u4e2d', '\ud83d\ude00', 'a\nb', '"'],
    ],
    ['numbers among words', [1.5, 'Bad', 2], ['1.5', 'Bad', 2]],
  ])('%s as texts', (_, cells, wanted) => {
    expect(roundTrip(cells)).toEqual(wanted);
  });

  it('stamps and modes as they are written', () => {
    const cells = ['04032026060000', '2026-03-04T06:00:00Z', '1.0', '', ' AUTO'];
    expect(roundTrip(cells, true)).toEqual(cells);
    expect(roundTrip([1_772_604_000.25, 1_772_604_001], true)).toEqual([1_772_604_000.25, 1_772_604_001]);
  });
});

describe('a packed block', () => {
  it('takes less than half of the text, also where every digit changes', () => {
    const random = seededRandom(3);
    const cells = Array.from({ length: 4000 }, () => (100 * random.uniform()).toFixed(4));
    expect(packed(cells).length).toBeLessThan(0.5 * cells.join(',').length);
  });

  it('tells whether a comma is in it', () => {
    const block = new CellBlock(4, false);
    for (const cell of ['1.5', '2,5', '3']) block.add(cell);
    expect(block.hasComma).toBe(true);
    block.clear();
    block.add('1.5');
    expect(block.hasComma).toBe(false);
  });
});
