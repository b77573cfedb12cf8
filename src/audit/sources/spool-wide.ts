/** Spools a wide export: one column a signal, one time column for all of them or several. */
import { UnreadableInput } from '../../errors';
import { label, wanted as roles, statedColumns } from '../../record/columns';
import { type Cells, findName, type Series, type SeriesSet, seriesOf } from '../../record/series';
import { listed, type Table } from '../../record/table';
import { readTimes } from '../../record/time';
import type { CellColumnWriter, CellFileWriter } from './cell-file';
import type { ReadableLoop } from './export-map';
import type { ExportReader, OnProgress } from './export-reader';
import type { Spool } from './spool';

/** What it takes to go through an export once. */
export interface Pass {
  readonly reader: ExportReader;
  readonly loops: readonly ReadableLoop[];
  /** How the export is called in messages. */
  readonly what: string;
  /** Makes the file of cells for so many columns. */
  readonly createCells: (columns: number) => CellFileWriter;
  readonly onProgress: OnProgress;
}

export type Passed = Pick<Spool, 'sha256' | 'cellBytes' | 'notes' | 'layout'>;

/** Mistakes of a map shown at most. */
const shownMistakes = 8;

/** @throws UnreadableInput when the map names columns that are not there, and for what cannot be read */
export async function spoolWide(pass: Pass): Promise<Passed> {
  const { reader, createCells, onProgress } = pass;
  const { names, units } = reader.first;
  const needed = neededColumns(pass);
  const columns = [...needed.keys()];
  const cells = createCells(columns.length + 1);
  const rowNumbers = cells.column(false);
  const writers = new Map<number, CellColumnWriter>();
  for (const [column, asText] of needed) writers.set(column, cells.column(asText));
  const { sha256, notes } = await reader.read(
    { columns, together: false },
    (batch) => {
      for (const column of batch.columns) {
        const writer = writers.get(column)!;
        const own = batch.cells(column);
        for (let row = 0; row < batch.rows; row++) writer.add(own.at(row)!);
      }
      if (!batch.columns.includes(columns[0]!)) return;
      for (let row = 0; row < batch.rows; row++) rowNumbers.add(batch.rowNumber(row));
    },
    onProgress,
  );
  const places = [...writers].map(([column, writer]) => [column, writer.end()] as const);
  const layout = {
    kind: 'wide',
    names,
    units,
    rows: rowNumbers.length,
    rowNumbers: rowNumbers.end(),
    columns: places,
  } as const;
  return { sha256, cellBytes: cells.end(), notes: [...reader.first.notes, ...notes], layout };
}

/** The columns that some loop needs; true for those that are kept as texts. */
function neededColumns({ reader, loops, what }: Pass): Map<number, boolean> {
  const used = new Set<number>();
  const watched: Table = {
    ...reader.first,
    cells: (column) => {
      used.add(column);
      return reader.first.cells(column);
    },
  };
  const needed = new Map<number, boolean>();
  const usedBy = (cells: Cells | null, asText: boolean): void => {
    cells?.cells();
    for (const column of used) needed.set(column, asText || needed.get(column) === true);
    used.clear();
  };
  const sets = new Map<string | undefined, SeriesSet>();
  for (const { time } of loops) {
    if (sets.has(time)) continue;
    sets.set(time, seriesOf(watched, time, what));
    usedBy(null, true);
  }
  refuseWrongNames(loops, sets, what);
  const stamps = new Set<Cells>();
  for (const loop of loops) {
    const { pv, op, sp, travel, mode } = statedColumns(sets.get(loop.time)!.series, loop, what);
    for (const one of [pv, op, sp, travel, mode]) {
      if (one === null) continue;
      usedBy(one, one === mode);
      usedBy(one.stamps, true);
      usedBy(one.quality, true);
      stamps.add(one.stamps);
    }
  }
  // Stamps that no loop can be read with are told of at once, not after the whole of a large export.
  const [shared] = stamps;
  if (stamps.size === 1 && shared!.cells().length > 0) {
    readTimes(shared!.cells(), shared!.name, shared!.rowNumber, loops[0]!);
  }
  return needed;
}

function refuseWrongNames(
  loops: readonly ReadableLoop[],
  sets: ReadonlyMap<string | undefined, SeriesSet>,
  what: string,
): void {
  const mistakes: string[] = [];
  let series: readonly Series[] = [];
  for (const loop of loops) {
    series = sets.get(loop.time)!.series;
    const names = series.map(({ name }) => name);
    for (const role of roles) {
      const name = loop[role];
      if (name === undefined) continue;
      const at = findName(names, name);
      const again = names.indexOf(names[at]!, at + 1);
      if (at < 0) mistakes.push(`there is no column "${name}" for ${label(role)} of ${loop.tag}`);
      else if (again >= 0)
        mistakes.push(`"${name}", ${label(role)} of ${loop.tag}, stands in the header twice`);
    }
  }
  if (mistakes.length === 0) return;
  const more = mistakes.length > shownMistakes ? `; and ${mistakes.length - shownMistakes} more` : '';
  throw new UnreadableInput(
    `${what} does not fit its map: ${mistakes.slice(0, shownMistakes).join('; ')}${more}. Columns found: ${listed(series.map(({ name }) => name))}.`,
  );
}
