/** Drafts the map of an export from the names in it. What the names do not decide is left open, with the reason beside it. */
import { basename, extname } from 'node:path';
import { UnreadableInput } from '../../errors';
import {
  byLoop,
  isLoop,
  label,
  loopOf,
  plainest,
  underIsaTag,
  type Wanted,
  wanted,
} from '../../record/columns';
import { isaTag, roleOf, serviceOf } from '../../record/names';
import { type LongColumns, longColumns, type Series, seriesOf } from '../../record/series';
import { listed } from '../../record/table';
import type { ExportMap, MappedLoop } from './export-map';
import type { ExportReader, OnProgress } from './export-reader';
import { calledExport, withExport } from './open-export';
import { ownText } from './own-text';

/** More names than this in a column of tags are no tags (own choice). */
const mostTags = 200_000;

/**
 * Drafts a map for the user to check. Columns are taken by the rules of `readLoop`: by their tag and what stands behind it.
 * A column called MV is never taken; where two columns could be meant none is; service and response are left open, so that
 * they are noted as assumed unless somebody states them.
 *
 * The names of a wide export stand in its header; a long one is read through for its tags.
 *
 * @throws UnreadableInput for an export that cannot be read, or in which no loop is told by its names
 */
export function draftMap(file: string, onProgress: OnProgress = () => {}): Promise<ExportMap> {
  const what = calledExport(file);
  return withExport(file, async (reader) => {
    const long = longColumns(reader.first.names);
    const names = long === null ? wideNames(reader, what) : await longNames(reader, long, what, onProgress);
    const { series } = names;
    const loops: MappedLoop[] = [];
    for (const [key, group] of byLoop(series)) {
      const named = key !== '';
      if (!isLoop(group) && (named || plainest(group, 'pv').length === 0)) continue;
      const tag = named ? loopOf(group[0]!) : basename(file, extname(file));
      const remark = named
        ? names.remark
        : ['called after the file, as no column has a tag', ...names.remark];
      loops.push({ order: loops.length, ...draftLoop(tag, group, { ...names, remark }) });
    }
    if (loops.length === 0) {
      throw new UnreadableInput(
        `${what} has no names from which loops are told, such as 31-FC-104.SP, 31-FC-104.PV and 31-FC-104.OP. Write the map by hand. Names found: ${listed(series.map(({ name }) => name))}.`,
      );
    }
    return { loops };
  });
}

interface Names {
  /** One for each column of a wide export or tag of a long one; its cells are not looked at. */
  readonly series: readonly Series[];
  /** Column of the stamps; undefined where it is left open. */
  readonly time: string | undefined;
  /** What holds for every loop. */
  readonly remark: readonly string[];
}

const noTime = 'no column is named as the time: name it';

function wideNames({ first }: ExportReader, what: string): Names {
  const times = first.names.filter((name) => roleOf(name).role === 'time');
  const { series, notes } = seriesOf(first, times.length === 0 ? first.names[0] : undefined, what);
  if (times.length === 0) return { series, time: undefined, remark: [noTime] };
  if (times.length === 1) return { series, time: times[0], remark: [] };
  const joined = notes.find(({ code }) => code === 'date-and-time');
  const remark = joined
    ? 'time left open: date and clock time are joined from two columns'
    : 'time left open: each signal has the time column that names it or stands to its left';
  return { series, time: undefined, remark: [remark] };
}

async function longNames(
  reader: ExportReader,
  { tag }: LongColumns,
  what: string,
  onProgress: OnProgress,
): Promise<Names> {
  const { names } = reader.first;
  const tags = new Set<string>();
  await reader.read(
    { columns: [tag], together: true },
    (batch) => {
      const cells = batch.cells(tag);
      for (let row = 0; row < batch.rows; row++) {
        const name = String(cells.at(row)).trim();
        if (!tags.has(name)) tags.add(ownText(name));
      }
      if (tags.size > mostTags) {
        throw new UnreadableInput(
          `${what} has more than ${mostTags} names in the column "${names[tag]}": these are no tags.`,
        );
      }
    },
    onProgress,
  );
  const time = names.find((name) => roleOf(name).role === 'time');
  const none = { name: '', cells: () => [], rowNumber: (row: number) => row };
  const series = [...tags].map((name): Series => {
    const parsed = roleOf(name);
    return { ...none, name, parsed, unit: parsed.unit, stamps: none, quality: null };
  });
  return { series, time, remark: time === undefined ? [noTime] : [] };
}

function draftLoop(
  tag: string,
  group: readonly Series[],
  { series, time, remark }: Names,
): Omit<MappedLoop, 'order'> {
  const taken: Partial<Record<Wanted, string>> = {};
  const remarks: string[] = [];
  for (const role of wanted) {
    const own = plainest(group, role);
    const all = own.length > 0 ? own : underIsaTag(series, group, role);
    const [one, other] = all;
    if (one !== undefined && other !== undefined) {
      remarks.push(`${label(role)} left open: it may be ${listed(all.map(({ name }) => name))}`);
    } else if (one !== undefined) {
      taken[role] = one.name;
      const others = group.filter(({ parsed }) => parsed.role === role && parsed !== one.parsed);
      if (others.length > 0) {
        remarks.push(`${label(role)} may also be ${listed(others.map(({ name }) => name))}: check it`);
      }
      if (own.length === 0) remarks.push(`${label(role)} is "${one.name}" by its loop number: check it`);
    } else if (role === 'pv' || role === 'op') {
      remarks.push(`no name says ${label(role)}`);
    }
  }
  for (const { name, parsed } of group) {
    if (parsed.role !== 'mv') continue;
    remarks.push(
      `"${name}" left alone: MV may mean the manipulated variable (then it is op) or the measured valve travel`,
    );
  }
  const letters = isaTag(tag)?.letters;
  const service = letters === undefined ? null : serviceOf(letters);
  remarks.push(
    service === null
      ? 'service not known from the tag: state it'
      : `service taken as ${service} unless another is stated`,
  );
  return { tag, ...(time !== undefined && { time }), ...taken, comment: [...remarks, ...remark].join('; ') };
}
