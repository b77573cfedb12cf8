/** Chooses the series that are SP, PV, OP, travel and mode of one loop. Whatever is assumed is noted. */
import { UnreadableInput } from '../errors';
import type { Note } from './loop-record';
import { bareTag, isaTag, type Role, sameLoop } from './names';
import { findName, type Series } from './series';
import { listed } from './table';

/** Names as stated by the user. */
export interface StatedColumns {
  readonly tag?: string;
  readonly sp?: string;
  readonly pv?: string;
  readonly op?: string;
  readonly travel?: string;
  readonly mode?: string;
}

export interface ChosenColumns {
  /** Tag of the loop as the names give it; '' when they do not. */
  readonly loop: string;
  readonly pv: Series;
  readonly op: Series;
  readonly sp: Series | null;
  readonly travel: Series | null;
  readonly mode: Series | null;
  readonly notes: readonly Note[];
}

export type Wanted = 'sp' | 'pv' | 'op' | 'travel' | 'mode';
export const wanted: readonly Wanted[] = ['sp', 'pv', 'op', 'travel', 'mode'];

/**
 * @param what how the source is called in messages
 * @throws UnreadableInput when PV or OP is missing, when several loops or columns could be meant, or when a stated name
 *   is not there
 */
export function chooseColumns(series: readonly Series[], stated: StatedColumns, what: string): ChosenColumns {
  const found = foundIn(series);
  const chosen = byStatedNames(series, stated, what);
  const group = groupOf(series, stated, chosen, what);
  for (const role of wanted) {
    if (chosen.has(role)) continue;
    const one = best(group, role, what) ?? byIsaTag(series, group, role, what);
    if (one !== undefined) chosen.set(role, one);
  }
  const mv = group.find(({ parsed }) => parsed.role === 'mv');
  const op = chosen.get('op');
  if (op === undefined && mv !== undefined && mv !== chosen.get('travel')) {
    throw new UnreadableInput(
      `${what} has no column for OP but one called "${mv.name}". MV may mean the manipulated variable (that is OP) or the measured valve travel. Say which with --op "${mv.name}" or --travel "${mv.name}" (option "op" or "travel"). ${found}`,
    );
  }
  for (const role of ['pv', 'op'] as const) {
    if (!chosen.has(role)) {
      throw new UnreadableInput(
        `${what} has no column for ${label(role)}${stated.tag === undefined ? '' : ` of ${stated.tag}`}. ${found} Name it with --${role} (option "${role}").`,
      );
    }
  }
  const notes: Note[] = [];
  const assumed = wanted.filter((role) => stated[role] === undefined && chosen.has(role));
  if (assumed.length > 0) {
    const list = assumed.map((role) => `${label(role)} from "${chosen.get(role)!.name}"`);
    notes.push({ code: 'columns', text: `Columns were taken by their names: ${list.join(', ')}.` });
  }
  if (mv !== undefined && ![...chosen.values()].includes(mv)) {
    notes.push({
      code: 'mv-left-alone',
      text: `The column "${mv.name}" was left alone: MV may mean the manipulated variable or the measured valve travel.`,
    });
  }
  return columnsOf(chosen, notes);
}

/**
 * The columns that are stated, and no others.
 *
 * @throws UnreadableInput when a stated name is not there
 */
export function statedColumns(
  series: readonly Series[],
  stated: StatedColumns & { readonly pv: string; readonly op: string },
  what: string,
): ChosenColumns {
  return columnsOf(byStatedNames(series, stated, what), []);
}

function byStatedNames(series: readonly Series[], stated: StatedColumns, what: string): Map<Wanted, Series> {
  const names = series.map(({ name }) => name);
  const chosen = new Map<Wanted, Series>();
  for (const role of wanted) {
    const name = stated[role];
    if (name === undefined) continue;
    const at = findName(names, name);
    if (at < 0) {
      throw new UnreadableInput(`${what} has no column "${name}" for ${label(role)}. ${foundIn(series)}`);
    }
    chosen.set(role, series[at]!);
  }
  return chosen;
}

function foundIn(series: readonly Series[]): string {
  return `Columns found: ${listed(series.map(({ name }) => name))}.`;
}

/** @param chosen with PV and OP */
function columnsOf(chosen: ReadonlyMap<Wanted, Series>, notes: readonly Note[]): ChosenColumns {
  const pv = chosen.get('pv')!;
  return {
    loop: loopOf(pv),
    pv,
    op: chosen.get('op')!,
    sp: chosen.get('sp') ?? null,
    travel: chosen.get('travel') ?? null,
    mode: chosen.get('mode') ?? null,
    notes,
  };
}

export function label(role: Wanted): string {
  return role === 'travel' || role === 'mode' ? role : role.toUpperCase();
}

/** Tag of the loop to which a series belongs: the ISA-5.1 tag in its name, else what stands before the role. */
export function loopOf({ parsed }: Series): string {
  return isaTag(parsed.loop)?.text ?? parsed.loop;
}

/** Series by the bare tag of their loop; '' for those without one. */
export function byLoop(series: readonly Series[]): ReadonlyMap<string, readonly Series[]> {
  const groups = new Map<string, Series[]>();
  for (const one of series) {
    const key = bareTag(loopOf(one));
    const group = groups.get(key);
    if (group === undefined) groups.set(key, [one]);
    else group.push(one);
  }
  return groups;
}

const hasRole = (group: readonly Series[], role: Role): boolean =>
  group.some(({ parsed }) => parsed.role === role);

/** A loop is what has a column for OP or, beside a PV or SP, one that may be it. */
export function isLoop(group: readonly Series[]): boolean {
  return hasRole(group, 'op') || hasRole(group, 'mv') || (hasRole(group, 'sp') && hasRole(group, 'pv'));
}

/** The series of the one loop that is meant. */
function groupOf(
  series: readonly Series[],
  stated: StatedColumns,
  chosen: ReadonlyMap<Wanted, Series>,
  what: string,
): readonly Series[] {
  const groups = byLoop(series);
  const withoutTag = groups.get('') ?? [];
  const loops = [...groups.values()].filter((group) => group[0]!.parsed.loop !== '' && isLoop(group));
  const choice = (): string => listed(loops.map((group) => loopOf(group[0]!)));
  if (stated.tag !== undefined) {
    const tag = stated.tag;
    const mine = series.filter(({ parsed }) => parsed.loop !== '' && sameLoop(parsed.loop, tag));
    if (mine.length > 0) return mine;
    if (loops.length > 0 && !chosen.has('pv')) {
      throw new UnreadableInput(`${what} has no columns of ${tag}. Loops found: ${choice()}.`);
    }
    return withoutTag;
  }
  const lead = chosen.get('pv') ?? chosen.get('op');
  if (lead !== undefined) return groups.get(bareTag(loopOf(lead)))!;
  if (hasRole(withoutTag, 'pv') || hasRole(withoutTag, 'op')) return withoutTag;
  if (loops.length > 1) {
    throw new UnreadableInput(
      `${what} has columns of ${loops.length} loops: ${choice()}. Choose one with --tag (option "tag"), or assess all of them with stickband audit and a map.`,
    );
  }
  return loops[0] ?? withoutTag;
}

/** The series of a group with a role that has the plainest name. */
function best(group: readonly Series[], role: Wanted, what: string): Series | undefined {
  const [first, second] = plainest(group, role);
  if (first !== undefined && second !== undefined) {
    throw new UnreadableInput(
      `${what} has two columns that may be ${label(role)}: "${first.name}" and "${second.name}". Name one with --${role} (option "${role}").`,
    );
  }
  return first;
}

/** The series of a group that have a role under its plainest name; several where the names do not decide. */
export function plainest(group: readonly Series[], role: Wanted): readonly Series[] {
  const all = group.filter(({ parsed }) => parsed.role === role);
  const rank = Math.min(...all.map(({ parsed }) => parsed.rank));
  return all.filter(({ parsed }) => parsed.rank === rank);
}

function byIsaTag(
  series: readonly Series[],
  group: readonly Series[],
  role: Wanted,
  what: string,
): Series | undefined {
  const [first, second] = underIsaTag(series, group, role);
  if (role === 'travel' && first !== undefined && second !== undefined) {
    throw new UnreadableInput(
      `${what} has the position of two valves on one OP: "${first.name}" and "${second.name}". Two valves on one OP cannot be told apart from its record. Log one valve in its own range, and state that with --valve-range.`,
    );
  }
  return first;
}

/** PV under the bare tag of the loop, else its transmitter's, and travel under a position tag (first letter Z). */
export function underIsaTag(
  series: readonly Series[],
  group: readonly Series[],
  role: Wanted,
): readonly Series[] {
  if (role !== 'pv' && role !== 'travel') return [];
  const loop = group.map(({ parsed }) => isaTag(parsed.loop)).find((tag) => tag !== null);
  if (loop === undefined || loop === null) return [];
  const all = series.filter(({ parsed }) => {
    const tag =
      parsed.role === null || parsed.role === 'pv' || parsed.role === 'value' ? isaTag(parsed.loop) : null;
    if (tag === null || tag.area !== loop.area || tag.number.replace(/[A-Z]$/, '') !== loop.number)
      return false;
    if (role === 'travel') return tag.letters[0] === 'Z';
    const isLoop = tag.letters === loop.letters;
    return (
      tag.number === loop.number &&
      tag.letters[0] === loop.letters[0] &&
      (isLoop || /[TI]$/.test(tag.letters))
    );
  });
  const own = ({ parsed }: Series): number => (isaTag(parsed.loop)!.letters === loop.letters ? 0 : 1);
  return all.sort((a, b) => own(a) - own(b));
}
