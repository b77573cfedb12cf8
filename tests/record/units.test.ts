import { describe, expect, it } from 'vitest';
import { conversion, convert, rangeIn, readRange } from '../../src/record/units';
import { expectClose } from '../closeness';

describe('readRange', () => {
  it('reads numbers and texts with units', () => {
    expect(readRange({ low: 0, high: 120 }, 'pvRange')).toEqual({ low: 0, high: 120, unit: '' });
    expect(readRange({ low: '-5.5 kPa', high: '1e2kPa' }, 'pvRange')).toEqual({
      low: -5.5,
      high: 100,
      unit: 'kPa',
    });
    expect(readRange({ low: '0', high: '30 l/s' }, 'pvRange')).toEqual({ low: 0, high: 30, unit: 'l/s' });
  });

  it('brings both ends to one unit', () => {
    const range = readRange({ low: '500 mbar', high: '2 bar' }, 'pvRange');
    expectClose(range.low, 0.5, { relative: 1e-12 });
    expect(range.unit).toBe('bar');
  });

  it.each([[{ low: 5, high: 5 }], [{ low: 'low', high: 'high' }], [{ low: Number.NaN, high: 4 }]])(
    'refuses %j',
    (stated) => {
      expect(() => readRange(stated, 'pvRange')).toThrow(/"pvRange" needs a low and a higher end/);
    },
  );
});

describe('rangeIn and convert', () => {
  it('leave alone what has no other unit', () => {
    const values = Float64Array.of(1, 2);
    expect(convert(values, conversion('barg', 'barg'))).toBe(values);
    expect(rangeIn({ low: 0, high: 9, unit: '' }, 'l/s')).toEqual({ low: 0, high: 9 });
  });

  it('refuse what does not fit or is not known', () => {
    expect(() => conversion('l/s', 'kg/s')).toThrow(/"l\/s" cannot be converted to "kg\/s"/);
    expect(() => conversion('barg', 'bar')).toThrow(/"barg" is not known/);
    expect(() => conversion('bar', 'barg')).toThrow(/"barg" is not known/);
  });
});
