/** Spools a long export: one value a row, with its tag and time. */
import { UnreadableInput } from '../../errors';
import { wanted as roles } from '../../record/columns';
import { roleOf } from '../../record/names';
import { findName, type LongColumns, longNote } from '../../record/series';
import { listed } from '../../record/table';
import type { CellColumnWriter } from './cell-file';
import { ownText } from './own-text';
import type { TagPlaces } from './spool';
import type { Pass, Passed } from './spool-wide';

interface TagWriters {
  readonly times: CellColumnWriter;
  readonly values: CellColumnWriter;
  readonly qualities: CellColumnWriter | null;
  readonly rowNumbers: CellColumnWriter;
}

/**
 * A loop whose tags have no rows fails on its own when it is read.
 *
 * @throws UnreadableInput when there is no time column, when no tag of the map is there, and for what cannot be read
 */
export async function spoolLong(pass: Pass, { tag, value, quality }: LongColumns): Promise<Passed> {
  const { reader, loops, what, createCells, onProgress } = pass;
  const { names } = reader.first;
  const time = timeColumn(pass);
  const asked = new Set(loops.flatMap((loop) => roles.flatMap((role) => loop[role]?.toLowerCase() ?? [])));
  const columns = [tag, time, value, ...(quality < 0 ? [] : [quality])];
  const cells = createCells(asked.size * columns.length);
  const tags = new Map<string, TagWriters | null>();
  const writersOf = (name: string): TagWriters | null => {
    const known = tags.get(name);
    if (known !== undefined) return known;
    const made = asked.has(name.toLowerCase())
      ? {
          times: cells.column(true),
          values: cells.column(false),
          qualities: quality < 0 ? null : cells.column(true),
          rowNumbers: cells.column(false),
        }
      : null;
    tags.set(ownText(name), made);
    return made;
  };
  const { sha256, notes } = await reader.read(
    { columns, together: true },
    (batch) => {
      const [tagCells, timeCells, valueCells] = [tag, time, value].map(batch.cells);
      const qualityCells = quality < 0 ? null : batch.cells(quality);
      for (let row = 0; row < batch.rows; row++) {
        const writers = writersOf(String(tagCells!.at(row)).trim());
        if (writers === null) continue;
        writers.times.add(timeCells!.at(row)!);
        writers.values.add(valueCells!.at(row)!);
        writers.qualities?.add(qualityCells!.at(row)!);
        writers.rowNumbers.add(batch.rowNumber(row));
      }
    },
    onProgress,
  );
  const places: (readonly [string, TagPlaces])[] = [];
  for (const [name, writers] of tags) {
    if (writers === null) continue;
    const { times, values, qualities, rowNumbers } = writers;
    places.push([
      name,
      {
        times: times.end(),
        values: values.end(),
        qualities: qualities?.end() ?? null,
        rowNumbers: rowNumbers.end(),
      },
    ]);
  }
  if (places.length === 0) {
    throw new UnreadableInput(
      `${what} has none of the tags that the map names. Tags found: ${listed([...tags.keys()])}.`,
    );
  }
  const layout = {
    kind: 'long',
    time: names[time]!,
    quality: quality < 0 ? null : names[quality]!,
    tags: places,
  } as const;
  return {
    sha256,
    cellBytes: cells.end(),
    notes: [...reader.first.notes, ...notes, longNote(names, { tag, value, quality })],
    layout,
  };
}

function timeColumn({ reader, loops, what }: Pass): number {
  const { names } = reader.first;
  const stated = [...new Set(loops.flatMap(({ time }) => time ?? []))];
  if (stated.length > 1) {
    throw new UnreadableInput(
      `The map names ${stated.length} time columns of ${what.toLowerCase()}, which has one value a row: ${listed(stated)}. Name one of them.`,
    );
  }
  const time =
    stated.length === 1
      ? findName(names, stated[0]!)
      : names.findIndex((name) => roleOf(name).role === 'time');
  if (time < 0) {
    throw new UnreadableInput(
      `${what} has no column ${stated.length === 1 ? `"${stated[0]}" ` : ''}for the time. Columns found: ${listed(names)}. Name it in the column "time" of the map.`,
    );
  }
  return time;
}
