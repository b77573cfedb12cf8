/** Reads what was logged of one loop: a file of a historian, a workbook or a data frame, into a loop record. */
import { createHash } from 'node:crypto';
import { readFileSync, statSync } from 'node:fs';
import { basename } from 'node:path';
import { UnreadableInput } from '../errors';
import { chooseColumns } from './columns';
import { type DataFrameLike, readDataFrame } from './data-frame';
import { decodeText, readDelimited } from './delimited';
import type { LoopRecord } from './loop-record';
import { recordOf } from './make-record';
import { checkReadOptions, type ReadLoopOptions } from './read-options';
import { seriesOf } from './series';
import { readSpreadsheet } from './spreadsheet';
import type { Table } from './table';

export type { ReadLoopOptions } from './read-options';

/**
 * Reads one loop.
 *
 * A file may be .csv, .txt or .tsv (comma, semicolon or tab; decimal point or comma) or an Excel workbook; wide (a
 * column for each signal) or long (tag, time, value). The record is evenly spaced; OP, SP and PV are brought to common
 * samples by last value, never interpolated; manual stretches, bad values and long gaps are cut out and the longest
 * stretch kept. Whatever was assumed or left out is in the record's notes, and `logging` counts it.
 *
 * @param source path of the file, or a danfo DataFrame
 * @throws UnreadableInput for what cannot be read, with row and column
 * @throws WrongUse for unknown options and values of options that make no sense
 */
export function readLoop(source: string | DataFrameLike, options: ReadLoopOptions = {}): LoopRecord {
  checkReadOptions('readLoop', options);
  const { table, name, what, sha256 } = openSource(source);
  const { series, notes } = seriesOf(table, options.time, what);
  const chosen = chooseColumns(series, options, what);
  const logged = { name, what, sha256, rows: table.rows, notes: [...table.notes, ...notes] };
  return recordOf(logged, chosen, options);
}

interface OpenedSource {
  readonly table: Table;
  /** File name without folders, or `data frame`. */
  readonly name: string;
  /** How it is called in messages. */
  readonly what: string;
  readonly sha256: string;
}

/** @throws UnreadableInput for what is not there, is a folder, is empty, or holds no table */
export function openSource(source: string | DataFrameLike): OpenedSource {
  const hash = createHash('sha256');
  if (typeof source !== 'string') {
    const table = readDataFrame(source);
    const columns = table.names.map((column, i) => [column, table.cells(i)]);
    return {
      table,
      name: 'data frame',
      what: 'The data frame',
      sha256: hash.update(JSON.stringify(columns)).digest('hex'),
    };
  }
  const name = basename(source);
  const what = `The file ${name}`;
  const bytes = bytesOf(source, what);
  if (bytes.length === 0) throw new UnreadableInput(`${what} is empty.`);
  const sha256 = hash.update(bytes).digest('hex');
  // Workbooks are zip archives (PK) or, the old ones, compound files; a text file that is called .xlsx is read as text.
  const start = bytes.toString('latin1', 0, 4);
  const isBook = start.startsWith('PK') || start === '\u00d0\u00cf\u0011\u00e0';
  const table = isBook ? readSpreadsheet(bytes, what) : readDelimited(decodeText(bytes, what), what);
  return { table, name, what, sha256 };
}

function bytesOf(path: string, what: string): Buffer {
  try {
    if (statSync(path).isDirectory()) {
      throw new UnreadableInput(`"${path}" is a folder. Give the file of one loop.`);
    }
    return readFileSync(path);
  } catch (error) {
    if (error instanceof UnreadableInput) throw error;
    const { code, message } = error as NodeJS.ErrnoException;
    if (code === 'ENOENT') throw new UnreadableInput(`There is no file "${path}". Check the path.`);
    throw new UnreadableInput(`${what} cannot be read (${message}).`);
  }
}
