import { DateTime } from 'luxon';
import { describe, expect, it } from 'vitest';
import { clockOf, stampReader } from '../../src/record/time-format';

/** The formats are luxon's, so luxon says what is right. */
describe('stampReader agrees with luxon', () => {
  it.each([
    ['dd.MM.yyyy HH:mm:ss', '04.03.2026 06:07:08'],
    ['M/d/yyyy h:mm:ss a', '3/4/2026 12:07:08 AM'],
    ['M/d/yyyy h:mm:ss a', '12/31/2026 12:07:08 pm'],
    ['dd-MMM-yy HH:mm:ss.SSS', '04-Mar-26 06:07:08.250'],
    ["yyyy/MM/dd'T'HH:mm", '2026/03/04T06:07'],
    ['d LLL yyyy HH:mm', '4 dec 2026 06:07'],
    ['dd.MM.yy HH:mm', '04.03.99 06:07'],
    ['EEEE dd.MM.yyyy HH:mm', 'Wednesday 04.03.2026 06:07'],
    ['yyyyMMddHHmmss', '20260304060708'],
  ])('%s', (format, text) => {
    const want = DateTime.fromFormat(text, format, { zone: 'utc', locale: 'en' });
    expect(want.isValid).toBe(true);
    expect(stampReader(format)(text)).toEqual({ ms: want.toMillis(), placed: false });
  });

  it('also where the stamp carries its zone', () => {
    const text = '2026-03-04 06:07 +02:00';
    const want = DateTime.fromFormat(text, 'yyyy-MM-dd HH:mm ZZ').toMillis();
    expect(stampReader('yyyy-MM-dd HH:mm ZZ')(text)).toEqual({ ms: want, placed: true });
  });

  it.each([
    ['dd.MM.yyyy HH:mm', '4.3.2026 06:07'],
    ['dd.MM.yyyy HH:mm', '31.02.2026 06:07'],
    ['dd.MM.yyyy HH:mm', '04.13.2026 06:07'],
    ['dd.MM.yyyy HH:mm', '04.03.2026 25:07'],
    ['dd-MMM-yy HH:mm', '04-Foo-26 06:07'],
  ])('%s does not read %s', (format, text) => {
    expect(DateTime.fromFormat(text, format, { zone: 'utc' }).isValid).toBe(false);
    expect(stampReader(format)(text)).toBeNull();
  });
});

describe('clockOf', () => {
  it('takes the end of a day and a leap second, and no other time that a clock does not show', () => {
    expect(clockOf(2026, 3, 4, 24, 0, 0, 0)).toBe(Date.UTC(2026, 2, 5));
    expect(clockOf(2016, 12, 31, 23, 59, 60, 0)).toBe(Date.UTC(2017, 0, 1));
    expect(clockOf(2026, 3, 4, 24, 1, 0, 0)).toBeNull();
    expect(clockOf(2026, 3, 4, 6, 60, 0, 0)).toBeNull();
    expect(clockOf(2026, 0, 4, 6, 0, 0, 0)).toBeNull();
  });
});
