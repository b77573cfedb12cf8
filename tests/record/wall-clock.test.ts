import { DateTime } from 'luxon';
import { describe, expect, it } from 'vitest';
import { wallClock } from '../../src/record/wall-clock';

const clock = (text: string): number => Date.parse(`${text}Z`);

describe('wallClock', () => {
  it.each(['Europe/Athens', 'America/St_Johns', 'Asia/Kathmandu', 'UTC+2', 'UTC'])(
    'agrees with luxon through a year in %s',
    (zone) => {
      const { toEpoch } = wallClock(zone);
      for (let hour = 5; hour < 8760; hour += 37) {
        const time = DateTime.fromMillis(Date.UTC(2026, 0, 1) + hour * 3_600_000 + 61_000, { zone });
        const shown = clock(time.toFormat("yyyy-MM-dd'T'HH:mm:ss"));
        expect(toEpoch(shown, time.toMillis() - 1000)).toBe(time.toMillis());
      }
    },
  );

  it('takes a time that the clock shows twice as the one that moves on', () => {
    // Athens sets its clock back from 04:00 to 03:00 on 25 October 2026, at 01:00 UTC.
    const { toEpoch } = wallClock('Europe/Athens');
    const shown = clock('2026-10-25T03:30:00');
    expect(toEpoch(shown, null)).toBe(Date.UTC(2026, 9, 25, 0, 30));
    expect(toEpoch(shown, Date.UTC(2026, 9, 25, 0, 29))).toBe(Date.UTC(2026, 9, 25, 0, 30));
    expect(toEpoch(shown, Date.UTC(2026, 9, 25, 0, 59))).toBe(Date.UTC(2026, 9, 25, 1, 30));
  });

  it('has no time for a clock that was set forward past it', () => {
    expect(wallClock('Europe/Athens').toEpoch(clock('2026-03-29T03:30:00'), null)).toBeNull();
  });

  it('refuses zones that are not known, and that of the machine', () => {
    for (const zone of ['Atlantis', 'local', 'system', '']) {
      expect(() => wallClock(zone)).toThrow(/is not known/);
    }
  });
});
