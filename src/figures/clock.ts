/** Time axes in the clock time of the record, as it stood in the export: no shift to the reader's own zone. */
import { DateTime } from 'luxon';
import { WrongUse } from '../errors';
import type { LoopRecord } from '../record/loop-record';

export interface RecordClock {
  /** Name of the axis, with the zone when the start time carries one. */
  readonly title: string;
  /**
   * The time that the clock on the wall showed `seconds` after the start, as `2024-03-05 06:00:00`. Text, because
   * Plotly would shift a number to the zone of the reader. A change to or from summer time within the record is not
   * followed.
   */
  at(seconds: number): string;
  /** The same without the day, `06:00`; with seconds where the record is shorter than 20 minutes. */
  text(seconds: number): string;
}

/** @throws WrongUse when the record's start is not an ISO 8601 time */
export function recordClock({ start, pv, samplePeriod }: LoopRecord): RecordClock {
  return clockFrom(start, pv.length * samplePeriod);
}

/**
 * The clock of `seconds` from a start, ISO 8601.
 *
 * @throws WrongUse when the start is no such time
 */
export function clockFrom(startTime: string, seconds: number): RecordClock {
  const start = DateTime.fromISO(startTime, { setZone: true, zone: 'utc' });
  if (!start.isValid) {
    throw new WrongUse(
      `The start of the record must be an ISO 8601 time, e.g. 2024-03-05T06:00:00Z. Received "${startTime}".`,
    );
  }
  const wall = start.setZone('utc', { keepLocalTime: true }).toMillis();
  const zoned = /(Z|[+-]\d\d:?\d\d)$/i.test(startTime);
  const at = (later: number): string =>
    new Date(wall + Math.round(later * 1000))
      .toISOString()
      .replace('T', ' ')
      .replace(/(\.000)?Z$/, '');
  const textLength = seconds < 1200 ? 8 : 5;
  return {
    title: zoned ? `clock time (${start.offset === 0 ? 'UTC' : start.toFormat("'UTC'ZZ")})` : 'clock time',
    at,
    text: (later) => at(later).slice(11, 11 + textLength),
  };
}
