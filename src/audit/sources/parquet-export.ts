/** Reads an export in Parquet, row group by row group and column by column, so that its size does not matter. */
import { statSync } from 'node:fs';
import type { AsyncBuffer, FileMetaData, ParquetParsers, SchemaElement } from 'hyparquet';
import { UnreadableInput } from '../../errors';
import type { Note } from '../../record/loop-record';
import { roleOf } from '../../record/names';
import type { Cell, CellColumn } from '../../record/table';
import type { ExportReader } from './export-reader';
import { bytesOf, sha256Of } from './file-bytes';

/** Rows that are decoded at a time, over the columns read together (own choice: some tens of MB). */
const cellsAtATime = 1 << 20;
/** Rows that are looked at before the columns are chosen. */
const firstRows = 60;

/**
 * Rows are counted from 1 in messages. Stamps that are not adjusted to UTC come out as clock time without a zone. Columns
 * that hold lists or structures are left out, with a note.
 *
 * @throws UnreadableInput for a file that is no Parquet, is cut off, or has no rows
 */
export async function openParquet(path: string, what: string): Promise<ExportReader> {
  const { parquetMetadataAsync, parquetScan, parquetSchema } =
    require('hyparquet') as typeof import('hyparquet');
  const { compressors } = require('hyparquet-compressors') as typeof import('hyparquet-compressors');
  const file: AsyncBuffer = {
    byteLength: statSync(path).size,
    slice(from, to = file.byteLength) {
      const bytes = bytesOf(path, from, to);
      return bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.length) as ArrayBuffer;
    },
  };
  const metadata = await orRefuse(what, () => parquetMetadataAsync(file, { geoparquet: false }));
  const rows = Number(metadata.num_rows);
  const all = parquetSchema(metadata).children;
  const flat = all.filter(
    ({ children, element }) => children.length === 0 && element.repetition_type !== 'REPEATED',
  );
  const names = flat.map(({ element }) => element.name.trim());
  if (rows === 0) {
    throw new UnreadableInput(
      `${what} has column names but no rows below them. Columns found: ${names.join(', ')}.`,
    );
  }

  const cellsOf = async (column: number, rowStart: number, rowEnd: number): Promise<CellColumn> => {
    const { element } = flat[column]!;
    const values = await orRefuse(what, async () => {
      // A scan keeps what it read last of each column: a new one each time keeps nothing.
      const scan = await parquetScan({ file, metadata, columns: [element.name], compressors, parsers });
      return scan.readColumn({ column: element.name, rowStart, rowEnd });
    });
    const cell = cellReader(element);
    return { length: values.length, at: (row) => cell(values[row]) };
  };

  const firstCells = new Map<number, CellColumn>();
  const end = Math.min(firstRows, Number(metadata.row_groups[0]!.num_rows));
  for (const [column, name] of names.entries()) {
    // Looked at are stamps alone; of the other columns the names are enough.
    if (roleOf(name).role === 'time') firstCells.set(column, await cellsOf(column, 0, end));
  }
  return {
    first: {
      names,
      units: names.map(() => ''),
      rows: end,
      cells: (column) => firstCells.get(column) ?? [],
      rowNumber: (row) => row + 1,
      notes: leftOut(all.length - flat.length),
    },
    async read({ columns, together }, take, onProgress) {
      const sha256 = await sha256Of(path);
      const parts = together ? [columns] : columns.map((column) => [column]);
      const pieces = piecesOf(metadata, Math.ceil(cellsAtATime / (together ? columns.length : 1)));
      let done = 0;
      for (const { from, to } of pieces) {
        for (const part of parts) {
          const cells = new Map<number, CellColumn>();
          for (const column of part) cells.set(column, await cellsOf(column, from, to));
          take({
            columns: part,
            rows: to - from,
            cells: (column) => cells.get(column)!,
            rowNumber: (row) => from + row + 1,
          });
          done++;
          onProgress(done / (pieces.length * parts.length));
        }
      }
      return { sha256, notes: [] };
    },
  };
}

async function orRefuse<Value>(what: string, work: () => Promise<Value>): Promise<Value> {
  try {
    return await work();
  } catch (error) {
    throw new UnreadableInput(
      `${what} cannot be read as Parquet (${(error as Error).message}). It may be cut off or damaged: export it again.`,
    );
  }
}

function leftOut(columns: number): Note[] {
  if (columns === 0) return [];
  const text = `${columns} column${columns > 1 ? 's' : ''} with lists or structures in the cells ${columns > 1 ? 'were' : 'was'} left out.`;
  return [{ code: 'columns-left-out', text }];
}

/** Row groups, large ones in pieces. */
function piecesOf({ row_groups }: FileMetaData, most: number): { from: number; to: number }[] {
  const pieces: { from: number; to: number }[] = [];
  let start = 0;
  for (const { num_rows } of row_groups) {
    const end = start + Number(num_rows);
    for (let from = start; from < end; from += most) pieces.push({ from, to: Math.min(end, from + most) });
    start = end;
  }
  return pieces;
}

/** Stamps as ms since 1970, to the microsecond; days as texts. */
const parsers: Partial<ParquetParsers> = {
  timestampFromMilliseconds: Number,
  timestampFromMicroseconds: (micros) => Number(micros) / 1000,
  timestampFromNanoseconds: (nanos) => Number(nanos / 1000n) / 1000,
  dateFromDays: (days) => new Date(days * 86_400_000).toISOString().slice(0, 10),
};

/** What a value of the column is as a cell of a table. */
function cellReader({ type, converted_type, logical_type }: SchemaElement): (value: unknown) => Cell {
  const isStamp =
    type === 'INT96' || logical_type?.type === 'TIMESTAMP' || (converted_type ?? '').startsWith('TIMESTAMP');
  // The old kinds: converted types are in UTC by the format's own words, INT96 says nothing.
  const inUtc = logical_type?.type === 'TIMESTAMP' ? logical_type.isAdjustedToUTC : type !== 'INT96';
  return (value) => {
    if (value === null || value === undefined) return '';
    if (isStamp) return stampText(value as number, inUtc);
    if (typeof value === 'number') return value;
    return typeof value === 'bigint' ? Number(value) : String(value);
  };
}

function stampText(ms: number, inUtc: boolean): string {
  const whole = Math.floor(ms);
  const micros = Math.round(1000 * (ms - whole));
  const text = new Date(whole).toISOString().slice(0, -1);
  return `${text}${micros > 0 ? String(micros).padStart(3, '0') : ''}${inUtc ? 'Z' : ''}`;
}
