import { describe, expect, it } from 'vitest';
import { recordClock } from '../../src/figures/clock';
import { fixtureFindings } from './findings-fixture';

const clockOf = (start: string, samples = 3600) => recordClock(fixtureFindings({ start, samples }).record);

describe('recordClock', () => {
  it('shows the clock of the plant, whatever the zone of the reader', () => {
    const clock = clockOf('2031-03-05T06:00:00+05:30');
    expect(clock.at(0)).toBe('2031-03-05 06:00:00');
    expect(clock.at(90.5)).toBe('2031-03-05 06:01:30.500');
    expect(clock.at(-60)).toBe('2031-03-05 05:59:00');
    expect(clock.title).toBe('clock time (UTC+05:30)');
    expect(clock.text(3600)).toBe('07:00');
  });

  it('names UTC, and claims no zone where the record has none', () => {
    expect(clockOf('2031-03-05T06:00:00Z').title).toBe('clock time (UTC)');
    expect(clockOf('2031-03-05T06:00:00').title).toBe('clock time');
    expect(clockOf('2031-03-05T06:00:00').at(0)).toBe('2031-03-05 06:00:00');
  });

  it('writes seconds where the record is short', () => {
    expect(clockOf('2031-03-05T23:59:30Z', 300).text(40)).toBe('00:00:10');
  });

  it('refuses a start that is no time', () => {
    expect(() => clockOf('yesterday')).toThrow('Received "yesterday"');
  });
});
