/** Time axes in the clock time of the record, as it stood in the export: no shift to the reader's own zone. */
import { DateTime } from 'luxon';
import { WrongUse } from '../errors';
import type { LoopRecord } from '../record/loop-record';

export interface RecordClock {
  /** Name of the axis, with the zone when the start time carries one. */
  readonly title: string;
  /**
   * Clock time `seconds` after the start, in milliseconds, such that a Plotly date axis, which knows no zones, shows
   * the time that the clock on the wall showed. A change to or from summer time within the record is not followed.
   */
  at(seconds: number): number;
  /** The same as text, `06:00`; with seconds where the record is shorter than 20 minutes. */
  text(seconds: number): string;
}

/** @throws WrongUse when the record's start is not an ISO 8601 time */
export function recordClock(record: LoopRecord): RecordClock {
  const start = DateTime.fromISO(record.start, { setZone: true, zone: 'utc' });
  if (!start.isValid) {
    throw new WrongUse(
      `The start of the record must be an ISO 8601 time, e.g. 2024-03-05T06:00:00Z. Received "${record.start}".`,
    );
  }
  const wall = start.setZone('utc', { keepLocalTime: true }).toMillis();
  const zoned = /(Z|[+-]\d\d:?\d\d)$/i.test(record.start);
  const form = record.pv.length * record.samplePeriod < 1200 ? 'HH:mm:ss' : 'HH:mm';
  const at = (seconds: number): number => wall + Math.round(seconds * 1000);
  return {
    title: zoned ? `clock time (${start.offset === 0 ? 'UTC' : start.toFormat("'UTC'ZZ")})` : 'clock time',
    at,
    text: (seconds) => DateTime.fromMillis(at(seconds), { zone: 'utc' }).toFormat(form),
  };
}
