/** Reads one loop of a spooled export, in the way in which `readLoop` reads a file with that loop alone. */
import { UnreadableInput } from '../../errors';
import { label, wanted as roles, statedColumns } from '../../record/columns';
import type { LoopRecord } from '../../record/loop-record';
import { recordOf } from '../../record/make-record';
import { roleOf } from '../../record/names';
import { checkReadOptions } from '../../record/read-options';
import { findName, type Series, seriesOf } from '../../record/series';
import type { Table } from '../../record/table';
import { CellFileReader, type ColumnPlace } from './cell-file';
import { cellsPath, type LongSpool, readSpool, type Spool, type WideSpool } from './spool';
import type { SpooledLoop } from './spooled-loop';

/**
 * @throws UnreadableInput for what cannot be read, with row and column of the export, and when the map leaves PV or OP open
 * @throws WrongUse for what the map states and makes no sense
 */
export function readSpooled({ tag, file, folder, reading }: SpooledLoop): LoopRecord {
  checkReadOptions('The map', reading);
  const { pv, op } = reading;
  if (pv === undefined || op === undefined) {
    const open = [...(pv === undefined ? ['pv'] : []), ...(op === undefined ? ['op'] : [])];
    throw new UnreadableInput(
      `The map does not say which column is ${open.map((name) => name.toUpperCase()).join(' and ')} of ${tag}. Fill in its column "${open.join('" and "')}", or delete the row.`,
    );
  }
  const spool = readSpool(folder);
  if (spool === null) {
    throw new UnreadableInput(`The work folder ${folder} no longer holds the export. Start the audit again.`);
  }
  const what = `The file ${file}`;
  const cells = new CellFileReader(cellsPath(folder));
  try {
    const { layout } = spool;
    const stated = { ...reading, pv, op };
    const { series, rows, notes } =
      layout.kind === 'wide'
        ? wideSeries(layout, spool, cells, reading.time, what)
        : longSeries(layout, spool, cells, stated, what);
    const chosen = statedColumns(series, stated, what);
    return recordOf({ name: file, what, sha256: spool.sha256, rows, notes }, chosen, reading);
  } finally {
    cells.close();
  }
}

interface FoundSeries {
  readonly series: readonly Series[];
  readonly rows: number;
  readonly notes: Spool['notes'];
}

function wideSeries(
  { names, units, rows, rowNumbers, columns }: WideSpool,
  { notes }: Spool,
  cells: CellFileReader,
  time: string | undefined,
  what: string,
): FoundSeries {
  const places = new Map(columns);
  const numbers = cells.column(rowNumbers);
  const table: Table = {
    names,
    units,
    rows,
    cells: (column) => cells.column(places.get(column)!),
    rowNumber: (row) => numbers.at(row) as number,
    notes: [],
  };
  const set = seriesOf(table, time, what);
  return { series: set.series, rows, notes: [...notes, ...set.notes] };
}

function longSeries(
  { time, quality, tags }: LongSpool,
  { notes }: Spool,
  cells: CellFileReader,
  stated: SpooledLoop['reading'],
  what: string,
): FoundSeries {
  const names = tags.map(([name]) => name);
  const found = new Map<number, Series>();
  let rows = 0;
  for (const role of roles) {
    const name = stated[role];
    if (name === undefined) continue;
    const at = findName(names, name);
    if (at < 0)
      throw new UnreadableInput(`${what} has no row of the tag "${name}", ${label(role)} of ${stated.tag}.`);
    if (found.has(at)) continue;
    const places = tags[at]![1];
    const numbers = cells.column(places.rowNumbers);
    const parsed = roleOf(names[at]!);
    const column = (called: string, place: ColumnPlace): Series['stamps'] => ({
      name: called,
      cells: () => cells.column(place),
      rowNumber: (row) => numbers.at(row) as number,
    });
    found.set(at, {
      ...column(names[at]!, places.values),
      parsed,
      unit: parsed.unit,
      stamps: column(time, places.times),
      quality: places.qualities === null ? null : column(quality!, places.qualities),
    });
    rows += places.values.length;
  }
  return { series: [...found.values()], rows, notes };
}
