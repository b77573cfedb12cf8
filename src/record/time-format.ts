/** Reads stamps in a stated format (luxon's tokens). Usual tokens go a fast way, others through luxon. */
import { DateTime } from 'luxon';
import { WrongUse } from '../errors';

/** A stamp as clock time (ms as if UTC, to be placed in a zone) or, when it carries its zone, as time since 1970. */
export interface Stamp {
  readonly ms: number;
  readonly placed: boolean;
}

export type StampReader = (text: string) => Stamp | null;

/** Parts of a clock time: year, month, day, hour, minute, second, ms, and 0 or 12 h for am and pm. */
type Part = 'y' | 'M' | 'd' | 'H' | 'm' | 's' | 'S' | 'a';

const months = ['jan', 'feb', 'mar', 'apr', 'may', 'jun', 'jul', 'aug', 'sep', 'oct', 'nov', 'dec'];

const tokens: Readonly<Record<string, readonly [Part, string]>> = {
  yyyy: ['y', '(\\d{4})'],
  yy: ['y', '(\\d{2})'],
  MMM: ['M', '([a-z]{3})'],
  LLL: ['M', '([a-z]{3})'],
  MM: ['M', '(\\d{2})'],
  LL: ['M', '(\\d{2})'],
  M: ['M', '(\\d{1,2})'],
  L: ['M', '(\\d{1,2})'],
  dd: ['d', '(\\d{2})'],
  d: ['d', '(\\d{1,2})'],
  HH: ['H', '(\\d{2})'],
  H: ['H', '(\\d{1,2})'],
  hh: ['H', '(\\d{2})'],
  h: ['H', '(\\d{1,2})'],
  mm: ['m', '(\\d{2})'],
  m: ['m', '(\\d{1,2})'],
  ss: ['s', '(\\d{2})'],
  s: ['s', '(\\d{1,2})'],
  SSS: ['S', '(\\d{3})'],
  S: ['S', '(\\d{1,3})'],
  a: ['a', '([ap]m)'],
};

/**
 * @param format luxon's tokens, e.g. `dd.MM.yyyy HH:mm:ss`
 * @throws WrongUse for a format without tokens for a date and a clock time
 */
export function stampReader(format: string): StampReader {
  const pieces = format.match(/'[^']*'|([a-zA-Z])\1*|[^a-zA-Z']+/g) ?? [];
  const isToken = (piece: string): boolean => /^[a-zA-Z]/.test(piece);
  if (!pieces.some(isToken)) {
    throw new WrongUse(
      `The time format "${format}" has no tokens. Write it as luxon does, e.g. dd.MM.yyyy HH:mm:ss.`,
    );
  }
  if (!pieces.every((piece) => !isToken(piece) || piece in tokens)) return slowReader(format);
  const parts = pieces.filter(isToken).map((piece) => tokens[piece]![0]);
  const literal = (piece: string): string =>
    piece.replace(/^'(.*)'$/, '$1').replace(/[.*+?^${}()|[\]\\]/g, '\\$&');
  const pattern = new RegExp(
    `^${pieces.map((piece) => (isToken(piece) ? tokens[piece]![1] : literal(piece))).join('')}$`,
    'i',
  );
  return (text) => {
    const found = pattern.exec(text);
    if (found === null) return null;
    const value: Record<Part, number> = { y: 1970, M: 1, d: 1, H: 0, m: 0, s: 0, S: 0, a: -1 };
    parts.forEach((part, i) => {
      value[part] = numberOf(part, found[i + 1]!);
    });
    const hour = value.a < 0 ? value.H : (value.H % 12) + value.a;
    const ms = clockOf(value.y, value.M, value.d, hour, value.m, value.s, value.S);
    return ms === null ? null : { ms, placed: false };
  };
}

function numberOf(part: Part, text: string): number {
  if (part === 'a') return text.toLowerCase() === 'pm' ? 12 : 0;
  const number = Number(text);
  if (part === 'M' && Number.isNaN(number)) return months.indexOf(text.toLowerCase()) + 1;
  // Two digits stand for 1961 to 2060, as luxon has it.
  if (part === 'y' && text.length === 2) return number > 60 ? 1900 + number : 2000 + number;
  return number;
}

/** Clock time in ms as if UTC; null for a date or time that no calendar or clock has. */
export function clockOf(
  year: number,
  month: number,
  day: number,
  hour: number,
  minute: number,
  second: number,
  ms: number,
): number | null {
  const time = Date.UTC(year, month - 1, day, hour, minute, second, ms);
  const isDate =
    month >= 1 && month <= 12 && day >= 1 && new Date(Date.UTC(year, month - 1, day)).getUTCDate() === day;
  // 24:00 is the end of a day, 60 a leap second.
  return isDate && (hour < 24 || (hour === 24 && minute === 0)) && minute < 60 && second <= 60 ? time : null;
}

/** Formats with names of days, zones, ordinals and so on. About 30 us a stamp. */
function slowReader(format: string): StampReader {
  const placed = /[zZX]|x/.test(format.replace(/'[^']*'/g, ''));
  return (text) => {
    const found = DateTime.fromFormat(text, format, { zone: 'utc', locale: 'en' });
    return found.isValid ? { ms: found.toMillis(), placed } : null;
  };
}
