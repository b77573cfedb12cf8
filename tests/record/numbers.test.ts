import { describe, expect, it } from 'vitest';
import { readNumbers } from '../../src/record/numbers';

const read = (...cells: (string | number)[]) => readNumbers(cells, 'PV', (row) => row + 2);
const values = (...cells: (string | number)[]): number[] => [...read(...cells).values];

describe('readNumbers', () => {
  it('reads decimal points, exponents and signs', () => {
    expect(values('1', ' -2.50 ', '+3e2', '.5', 7)).toEqual([1, -2.5, 300, 0.5, 7]);
  });

  it.each([
    [
      ['1,5', '12,25', '-0,125'],
      [1.5, 12.25, -0.125],
    ],
    [
      ['63,500', '63,250'],
      [63.5, 63.25],
    ],
    [
      ['1.234,5', '999,5'],
      [1234.5, 999.5],
    ],
  ])('reads decimal commas in %s', (cells, want) => {
    expect(values(...cells)).toEqual(want);
    expect(read(...cells).decimalComma).toBe(true);
  });

  it('reads thousands in groups where a decimal point tells', () => {
    expect(values('1,234.5', '999.5')).toEqual([1234.5, 999.5]);
  });

  it('refuses a comma that may be either', () => {
    expect(() => read('1,234', '999')).toThrow(/"1,234" \(row 2\).*decimal comma or group thousands/);
  });

  it('counts cells without a value', () => {
    const column = read('1', '', 'Bad', 'I/O Timeout', Number.NaN, ' ');
    expect([...column.values]).toEqual([1, NaN, NaN, NaN, NaN, NaN]);
    expect(column).toMatchObject({ empty: 2, bad: 3, words: ['Bad', 'I/O Timeout'] });
  });

  it.each(['abc', '12 l/s', '0x10', '1.2.3', '0b1', 'twelve'])('refuses "%s" with its row', (text) => {
    expect(() => read('1', text)).toThrow(`Row 3 of the column "PV" has the text "${text}"`);
  });
});
