/** The map of an export as a small CSV, one loop a row, for the user to check: reads it and writes it. */
import { unparse } from 'papaparse';
import type { Range } from '../../record/loop-record';
import { rangeCells, responses, type StatedRow, services, statedRows, wordCell } from '../stated-rows';
import type { ExportMap, MappedLoop } from './export-map';

/** All columns; all but `tag` may be left out or empty. */
const columns = [
  'tag',
  'service',
  'response',
  'pv_low',
  'pv_high',
  'time',
  'sp',
  'pv',
  'op',
  'mode',
  'travel',
  'valve_low',
  'valve_high',
  'time_format',
  'zone',
  'comment',
] as const;
type Column = (typeof columns)[number];

const signals = ['sp', 'pv', 'op', 'mode', 'travel'] as const;

/**
 * A row may leave PV or OP open: its loop then fails alone, with that as its reason.
 *
 * @throws UnreadableInput with all mistakes of the map, by line
 */
export function readMap(path: string): ExportMap {
  const { rows, refuseMistakes } = statedRows(path, 'map', columns);
  const seen = new Map<string, number>();
  const loops: MappedLoop[] = [];
  for (const row of rows) {
    const text = (column: Column): string => unguarded(row.cell(column));
    const tag = text('tag');
    if (tag === '') row.wrong('"tag" is empty');
    const before = seen.get(tag);
    if (tag !== '' && before !== undefined) row.wrong(`the tag ${tag} stands on line ${before} too`);
    seen.set(tag, row.line);
    for (const [i, one] of signals.entries()) {
      const other = signals.slice(0, i).find((role) => text(role) !== '' && text(role) === text(one));
      if (other !== undefined) row.wrong(`"${other}" and "${one}" are both "${text(one)}"`);
    }
    const service = wordCell(row, 'service', services);
    const response = wordCell(row, 'response', responses);
    const pvRange = rangeCells(row, 'pv_low', 'pv_high');
    const valveRange = valveRangeOf(row);
    loops.push({
      order: loops.length,
      tag,
      ...(service && { service }),
      ...(response && { response }),
      ...(pvRange && { pvRange }),
      ...(valveRange && { valveRange }),
      ...filled({
        time: text('time'),
        sp: text('sp'),
        pv: text('pv'),
        op: text('op'),
        mode: text('mode'),
        travel: text('travel'),
        timeFormat: text('time_format'),
        zone: text('zone'),
        comment: text('comment'),
      }),
    });
  }
  refuseMistakes(`Its columns are ${columns.join(', ')}; all but tag may be left out or empty.`);
  return { loops };
}

/** The map as text. Names that a sheet would take for a formula are guarded by an apostrophe, which `readMap` takes off. */
export function mapText({ loops }: ExportMap): string {
  const rows = loops.map((loop) => {
    const { pvRange, valveRange } = loop;
    const cells: Record<Column, string | number | undefined> = {
      tag: loop.tag,
      service: loop.service,
      response: loop.response,
      pv_low: pvRange?.low,
      pv_high: pvRange?.high,
      time: loop.time,
      sp: loop.sp,
      pv: loop.pv,
      op: loop.op,
      mode: loop.mode,
      travel: loop.travel,
      valve_low: valveRange?.low,
      valve_high: valveRange?.high,
      time_format: loop.timeFormat,
      zone: loop.zone,
      comment: loop.comment,
    };
    return columns.map((column) => cells[column] ?? '');
  });
  return `${unparse([[...columns], ...rows], { newline: '\n', escapeFormulae: true })}\n`;
}

function unguarded(text: string): string {
  return text.replace(/^'(?=[=+\-@\t\r])/, '');
}

function filled<Texts extends Readonly<Record<string, string>>>(texts: Texts): Partial<Texts> {
  return Object.fromEntries(Object.entries(texts).filter(([, text]) => text !== '')) as Partial<Texts>;
}

function valveRangeOf(row: StatedRow<Column>): Range | null {
  const texts = [row.cell('valve_low'), row.cell('valve_high')];
  if (texts.every((text) => text === '')) return null;
  const [low, high] = texts.map((text) => (text === '' ? Number.NaN : Number(text.replace(',', '.'))));
  if (Number.isFinite(low) && Number.isFinite(high)) return { low: low!, high: high! };
  row.wrong(`valve_low and valve_high need two numbers, % of OP, not "${texts[0]}" and "${texts[1]}"`);
  return null;
}
