/** Reads the rows of a small CSV in which a user states what is known of loops: a list of files, or the map of an export. */
import { readFileSync } from 'node:fs';
import { basename } from 'node:path';
import { parse } from 'papaparse';
import { StickbandError, UnreadableInput } from '../errors';
import { decodeText } from '../record/delimited';
import type { Response, Service } from '../record/loop-record';
import { type ReadRange, readRange, type StatedRange } from '../record/units';

export const services: readonly Service[] = ['flow', 'pressure', 'level', 'temperature', 'other'];
export const responses: readonly Response[] = ['self-regulating', 'integrating', 'unknown'];

/** Mistakes shown at most; the others are counted. */
const shownMistakes = 8;

export interface StatedRow<Column extends string> {
  /** Line of the file. Holds as long as no cell runs over a line. */
  readonly line: number;
  /** What stands in a column, without blanks at the ends; '' where nothing does or the column is not there. */
  cell(column: Column): string;
  /** Counts a mistake of this row, in a clause. */
  wrong(clause: string): void;
}

export interface StatedRows<Column extends string> {
  readonly rows: readonly StatedRow<Column>[];
  /**
   * @param advice what columns there are and may be, one sentence
   * @throws UnreadableInput with all mistakes by line, or when there is no row
   */
  refuseMistakes(advice: string): void;
}

/**
 * @throws UnreadableInput for a file that cannot be opened or is no text
 */
export function statedRows<Column extends string>(
  path: string,
  kind: 'list' | 'map',
  columns: readonly Column[],
): StatedRows<Column> {
  const what = `The ${kind} ${basename(path)}`;
  const [header, ...body] = filledRows(textOf(path, what));
  const names = namesOf(header);
  const mistakes: string[] = [];
  const unknown = names.filter((name) => name !== '' && !(columns as readonly string[]).includes(name));
  if (unknown.length > 0) {
    mistakes.push(`it has the column ${unknown.map((name) => `"${name}"`).join(', ')}, which no ${kind} has`);
  }
  const repeated = columns.filter((name) => names.indexOf(name) !== names.lastIndexOf(name));
  if (repeated.length > 0) mistakes.push(`it has the column "${repeated.join('", "')}" twice`);
  const rows = body.map(({ cells, line }): StatedRow<Column> => {
    const wrong = (clause: string): void => {
      mistakes.push(`line ${line}: ${clause}`);
    };
    if (cells.slice(names.length).some((extra) => extra.trim() !== '')) {
      wrong(`it has ${cells.length} cells but there are ${names.length} columns`);
    }
    return { line, cell: (column) => cells[names.indexOf(column)]?.trim() ?? '', wrong };
  });
  return {
    rows,
    refuseMistakes(advice) {
      if (mistakes.length > 0) {
        const more = mistakes.length > shownMistakes ? `; and ${mistakes.length - shownMistakes} more` : '';
        throw new UnreadableInput(
          `${what} cannot be used: ${mistakes.slice(0, shownMistakes).join('; ')}${more}. ${advice}`,
        );
      }
      if (rows.length === 0) throw new UnreadableInput(`${what} has no loop below its line of column names.`);
    },
  };
}

/** Names of the columns in the first line with something in it. */
export function statedColumnNames(start: string): string[] {
  return namesOf(filledRows(start, 20)[0]);
}

/** One of the words allowed; null for an empty cell and for a mistake. */
export function wordCell<Column extends string, Word extends string>(
  row: StatedRow<Column>,
  column: Column,
  known: readonly Word[],
): Word | null {
  const text = row.cell(column);
  if (text === '') return null;
  const word = known.find((one) => one === text.toLowerCase());
  if (word === undefined) row.wrong(`"${column}" is one of ${known.join(', ')}, not "${text}"`);
  return word ?? null;
}

/** Two ends as numbers, with a decimal comma too, or numbers with a unit such as `30 l/s`; null for empty cells. */
export function rangeCells<Column extends string>(
  row: StatedRow<Column>,
  low: Column,
  high: Column,
): StatedRange | null {
  const texts = [row.cell(low), row.cell(high)] as const;
  if (texts.every((text) => text === '')) return null;
  const [from, to] = texts.map((end) => end.replace(/^([+-]?\d+),(\d+)(?!\d*,)/, '$1.$2')) as [
    string,
    string,
  ];
  let range: ReadRange;
  try {
    range = readRange({ low: from, high: to }, `${low} and ${high}`);
  } catch (error) {
    if (!(error instanceof StickbandError)) throw error;
    row.wrong(
      `${low} and ${high} need two numbers, the lower one first, not "${texts[0]}" and "${texts[1]}"`,
    );
    return null;
  }
  return range.unit === '' ? { low: range.low, high: range.high } : { low: from, high: to };
}

function textOf(path: string, what: string): string {
  let bytes: Buffer;
  try {
    bytes = readFileSync(path);
  } catch (error) {
    const { code, message } = error as NodeJS.ErrnoException;
    throw new UnreadableInput(
      code === 'ENOENT'
        ? `There is no file "${path}". Check the path.`
        : `${what} cannot be read (${code === 'EISDIR' ? 'it is a folder' : message}).`,
    );
  }
  return decodeText(bytes, what);
}

interface Row {
  readonly cells: readonly string[];
  readonly line: number;
}

function namesOf(row: Row | undefined): string[] {
  return row?.cells.map((name) => name.trim().toLowerCase()) ?? [];
}

function filledRows(text: string, atMost = 0): Row[] {
  const plain = text.replace(/^\uFEFF/, '');
  const header = /^.*\S.*$/m.exec(plain)?.[0] ?? '';
  const count = (separator: string): number => header.split(separator).length;
  const delimiter = [',', ';', '\t'].reduce((best, one) => (count(one) > count(best) ? one : best));
  const { data } = parse<string[]>(plain, { delimiter, preview: atMost });
  return data
    .map((cells, at) => ({ cells, line: at + 1 }))
    .filter(({ cells }) => cells.some((cell) => cell.trim() !== ''));
}
