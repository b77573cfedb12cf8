/** Clock time of a zone to time that never jumps: daylight saving and zones with names, through luxon. */
import { Info } from 'luxon';
import { WrongUse } from '../errors';

/** Changes of a zone's offset fall on quarters of an hour, so that one look-up serves all stamps of a quarter. */
const quarter = 900_000;
/** Further than any zone is from UTC. */
const farther = 26 * 3_600_000;

export interface WallClock {
  /**
   * Time since 1970 in ms of a clock time (given as if it were UTC). Where the clock shows it twice, the first time that
   * is not before `previous`. null where the clock skips it.
   */
  toEpoch(clock: number, previous: number | null): number | null;
}

/**
 * @param zone name of a zone (`Europe/Athens`), `UTC`, or a fixed distance (`UTC+2`)
 * @throws WrongUse for a zone that is not known
 */
export function wallClock(zone: string): WallClock {
  const known = Info.normalizeZone(zone);
  // The zone of the machine would make a result depend on where it was computed.
  if (!known.isValid || known.type === 'system') {
    throw new WrongUse(
      `The zone "${zone}" is not known. Give an IANA name such as Europe/Athens, UTC, or a fixed distance such as UTC+2.`,
    );
  }
  const cache = new Map<number, readonly number[]>();
  const offsetsAt = (clock: number): readonly number[] => {
    const key = Math.floor(clock / quarter);
    let offsets = cache.get(key);
    if (offsets === undefined) {
      const around = [known.offset(clock - farther), known.offset(clock + farther)];
      offsets = [...new Set(around)]
        .map((minutes) => minutes * 60_000)
        .filter((offset) => known.offset(clock - offset) * 60_000 === offset)
        .sort((a, b) => b - a);
      cache.set(key, offsets);
    }
    return offsets;
  };
  return {
    toEpoch(clock, previous) {
      const times = offsetsAt(clock).map((offset) => clock - offset);
      return times.find((time) => previous === null || time >= previous) ?? times[times.length - 1] ?? null;
    },
  };
}
