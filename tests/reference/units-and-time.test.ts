/** Units and time stamps against sources outside the project. */
import { DateTime } from 'luxon';
import { unit } from 'mathjs';
import { describe, expect, it } from 'vitest';
import { readTimes } from '../../src/record/time';
import { conversion, convert } from '../../src/record/units';
import { expectAllClose, expectClose } from '../closeness';

const converted = (value: number, from: string, to: string): number =>
  convert(Float64Array.of(value), conversion(from, to))[0]!;

describe('unit conversion', () => {
  // NIST Special Publication 811 (2008), Guide for the Use of the SI, appendix B.8; values from memory.
  it.each([
    [1, 'psi', 'kPa', 6.894757],
    [1, 'bar', 'kPa', 100],
    [1, 'atm', 'Pa', 101325],
    [1, 'gpm', 'm^3/s', 6.30902e-5],
    [1, 'ft', 'm', 0.3048],
    [1, 'lb', 'kg', 0.45359237],
    [212, 'degF', 'degC', 100],
    [0, 'degC', 'K', 273.15],
    [3.6, 'm3/h', 'l/s', 1],
    [60, 'lpm', 'l/s', 1],
    [1, 'm³/h', 'l/min', 1000 / 60],
    [25, '°C', '°F', 77],
  ])('%s %s in %s', (value, from, to, want) => {
    // The table gives seven digits; temperatures come close to zero, so that an absolute tolerance goes with it.
    expectClose(converted(value, from, to), want, { relative: 5e-7, absolute: 1e-9 });
  });

  it('agrees with mathjs value by value, over ranges that include zero', () => {
    for (const [from, to] of [
      ['degC', 'degF'],
      ['degF', 'K'],
      ['kPa', 'psi'],
      ['m^3/h', 'l/s'],
      ['t/h', 'kg/s'],
      ['mmH2O', 'mbar'],
    ] as const) {
      const values = Float64Array.of(-40, -1, 0, 0.5, 12.25, 1000);
      const want = Array.from(values, (value) => unit(`${value} ${from}`).toNumber(to));
      expectAllClose(convert(values, conversion(from, to)), want, { relative: 1e-12, absolute: 1e-10 });
    }
  });
});

describe('time stamps', () => {
  const ms = (text: string, zone?: string): number =>
    readTimes([text], 'time', () => 2, zone === undefined ? {} : { zone }).ms[0]!;

  // ISO 8601-1:2019 as luxon reads it; a blank in place of T as in SQL and RFC 3339.
  it.each([
    '2026-03-04T06:07:08Z',
    '2026-03-04T06:07:08.125Z',
    '2026-03-04T06:07:08,125Z',
    '2026-03-04T06:07Z',
    '2026-03-04T06:07:08+02:00',
    '2026-03-04T06:07:08-0330',
    '2026-03-04T06:07:08+05',
    '2026-03-04T24:00:00Z',
    '2024-02-29T12:00:00Z',
    '2026-03-04T06:07:08',
    '2026-03-04',
  ])('%s as luxon has it', (text) => {
    expect(ms(text)).toBe(DateTime.fromISO(text, { zone: 'utc' }).toMillis());
    expect(ms(text.replace('T', ' '))).toBe(ms(text));
  });

  it('through both changes of the clock in a zone, as luxon has it', () => {
    for (const text of [
      '2026-03-29T02:59:59',
      '2026-03-29T04:00:00',
      '2026-10-25T02:59:59',
      '2026-10-25T04:00:00',
    ]) {
      expect(ms(text, 'Europe/Athens')).toBe(DateTime.fromISO(text, { zone: 'Europe/Athens' }).toMillis());
    }
  });

  it('below the millisecond', () => {
    expectClose(ms('2026-03-04T06:07:08.123456Z') - ms('2026-03-04T06:07:08Z'), 123.456, { absolute: 1e-3 });
  });

  // POSIX.1: seconds since the epoch; 1 000 000 000 s is 2001-09-09T01:46:40Z.
  it.each([1_000_000_000, 1_000_000_000_000])('%s as a count since 1970', (count) => {
    expect(readTimes([count], 'time', () => 2, {}).ms[0]).toBe(Date.UTC(2001, 8, 9, 1, 46, 40));
  });
});
