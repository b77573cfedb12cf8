/** What the name of a column or tag says: which signal of which loop, in which unit. */
import type { Service } from './loop-record';

/** `mv` is told apart but never used: it may mean the manipulated variable or the measured travel. */
export type Role = 'time' | 'sp' | 'pv' | 'op' | 'travel' | 'mode' | 'quality' | 'tag' | 'value' | 'mv';

export interface ParsedName {
  /** What stands before the role, e.g. `31-FC-104`; the whole name without a role; '' for a bare role. */
  readonly loop: string;
  readonly role: Role | null;
  /** Position of the word in its list: 0 for the plain one. */
  readonly rank: number;
  /** Unit in brackets at the end of the name; ''. */
  readonly unit: string;
  /** For time and quality: the signal they belong to, where the name says so. */
  readonly of: Role | null;
}

/** Words for each role, the plain one first. Letters only; blanks, dots and dashes between them do not count. */
const words: Readonly<Record<Role, readonly string[]>> = {
  time: ['time', 'timestamp', 'datetime', 'date', 'utc', 'localtime', 'stamp', 'dateandtime'],
  sp: ['sp', 'setpoint', 'setpt', 'wsp'],
  pv: ['pv', 'processvariable', 'processvalue', 'measuredvalue'],
  op: ['op', 'out', 'output', 'co', 'controlleroutput', 'controloutput'],
  travel: ['travel', 'valvetravel', 'position', 'valveposition', 'stemposition'],
  mode: ['mode', 'controllermode', 'actualmode', 'modeactual'],
  quality: ['quality', 'status', 'qual', 'q'],
  tag: ['tag', 'tagname', 'point', 'pointname', 'signal', 'item', 'name'],
  value: ['value', 'val', 'reading'],
  mv: ['mv'],
};

const lookup = new Map<string, { role: Role; rank: number }>();
for (const [role, list] of Object.entries(words) as [Role, readonly string[]][]) {
  list.forEach((word, rank) => {
    lookup.set(word, { role, rank });
  });
}

/** Letters and digits alone, in capitals: `31-FC-104` and `31FC104` are one tag. */
export function bareTag(text: string): string {
  return text.toUpperCase().replace(/[^\p{L}\p{N}]/gu, '');
}

/** Reads the name of a column or of a tag in a long export. */
export function roleOf(name: string): ParsedName {
  const brackets = /^(.*?)\s*[[(]([^[\]()]*)[\])]$/.exec(name.trim());
  const plain = (brackets?.[1] ?? name).trim();
  const unit = brackets?.[2]?.trim() ?? '';
  if (isaTag(unit) !== null) return roleOf(`${unit} ${plain}`);
  // The longest tail that is a known word, with a separator or nothing before it.
  const pieces = plain.split(/([\s./\\:|_-]+)/);
  for (let from = 0; from < pieces.length; from += 2) {
    const found = lookup.get(
      pieces
        .slice(from)
        .join('')
        .toLowerCase()
        .replace(/[^a-z]/g, ''),
    );
    if (found === undefined || /\d/.test(pieces.slice(from).join(''))) continue;
    const before = pieces.slice(0, Math.max(0, from - 1)).join('');
    if (found.role === 'quality' || found.role === 'time') {
      const whose = roleOf(before);
      if (whose.role !== null) return { ...whose, ...found, unit, of: whose.role };
    }
    return { loop: before, ...found, unit, of: null };
  }
  return { loop: plain, role: null, rank: 0, unit, of: null };
}

/** A tag by ISA-5.1: area, letters and loop number, e.g. 31, FC, 104. */
export interface IsaTag {
  readonly area: string;
  readonly letters: string;
  readonly number: string;
  /** The tag as written. */
  readonly text: string;
}

/**
 * Letters of a loop or its transmitter: the measured variable, a modifier (difference, ratio, scan, total), indicating or
 * recording, and controller, control valve, transmitter or element. Narrow enough not to see a tag in `loop 7` or `file1`.
 */
const isaLetters = '[A-Z][DFKQ]?(?:(?:IR?|R)?(?:CV?|T|E)|I|R)';
const isaPattern = new RegExp(
  `(?:^|[^\\p{L}\\p{N}])((?:(\\d{1,4})[-_ ]?)?(${isaLetters})[-_ ]?(\\d{1,6}[A-Z]?))(?=$|[^\\p{L}\\p{N}])`,
  'iu',
);

/** Finds an ISA-5.1 tag in a name such as `area31/31-FC-104.block`; null when there is none. */
export function isaTag(name: string): IsaTag | null {
  const found = isaPattern.exec(name);
  if (found === null) return null;
  return {
    area: found[2] ?? '',
    letters: found[3]!.toUpperCase(),
    number: found[4]!.toUpperCase(),
    text: found[1]!,
  };
}

/** Whether two names mean one loop: equal but for separators, or one is a part of the other's path. */
export function sameLoop(name: string, tag: string): boolean {
  const wanted = bareTag(tag);
  if (bareTag(name) === wanted) return true;
  return name.split(/[./\\:|]/).some((piece) => bareTag(piece) === wanted);
}

/** Service by the first letter of an ISA-5.1 tag; null when the letter stands for something else. */
export function serviceOf(letters: string): Service | null {
  const services: Readonly<Record<string, Service>> = {
    F: 'flow',
    P: 'pressure',
    L: 'level',
    T: 'temperature',
  };
  return services[letters[0] ?? ''] ?? null;
}
