/** Reads a list of loops: a CSV with a column `file`, one loop a row. */
import { readFileSync } from 'node:fs';
import { basename, dirname, extname, isAbsolute, join } from 'node:path';
import { parse } from 'papaparse';
import { StickbandError, UnreadableInput } from '../errors';
import { decodeText } from '../record/delimited';
import type { Response, Service } from '../record/loop-record';
import { isaTag } from '../record/names';
import type { ReadLoopOptions } from '../record/read-loop';
import { readRange } from '../record/units';
import type { ListedLoop } from './loop-job';

/** All columns; all but `file` may be left out or empty. */
const columns = ['file', 'tag', 'service', 'response', 'pv_low', 'pv_high'] as const;
type Column = (typeof columns)[number];

const services: readonly Service[] = ['flow', 'pressure', 'level', 'temperature', 'other'];
const responses: readonly Response[] = ['self-regulating', 'integrating', 'unknown'];

/** Mistakes shown at most; the others are counted. */
const shownMistakes = 8;

/** Whether the first line with something in it has a column `file`. */
export function isLoopList(start: string): boolean {
  return headerOf(start).includes('file');
}

/**
 * Paths in the list are relative to the list. A file that is not there is no mistake of the list: its loop fails alone.
 *
 * @param forAll what is stated of every loop
 * @throws UnreadableInput with all mistakes of the list, by line
 */
export function readLoopList(path: string, forAll: ReadLoopOptions): ListedLoop[] {
  const what = `The list ${basename(path)}`;
  const text = decodeText(readFileSync(path), what);
  const names = headerOf(text);
  const unknown = names.filter((name) => name !== '' && !(columns as readonly string[]).includes(name));
  const mistakes: string[] = [];
  if (unknown.length > 0) {
    mistakes.push(`it has the column ${unknown.map((name) => `"${name}"`).join(', ')}, which no list has`);
  }
  const repeated = columns.filter((name) => names.indexOf(name) !== names.lastIndexOf(name));
  if (repeated.length > 0) mistakes.push(`it has the column "${repeated.join('", "')}" twice`);

  const loops: ListedLoop[] = [];
  const seen = new Map<string, number>();
  for (const { cells, line } of rowsOf(text)) {
    const cell = (column: Column): string => cells[names.indexOf(column)]?.trim() ?? '';
    const wrong = (sentence: string): number => mistakes.push(`line ${line}: ${sentence}`);
    if (cells.slice(names.length).some((extra) => extra.trim() !== '')) {
      wrong(`it has ${cells.length} cells but there are ${names.length} columns`);
    }
    const file = cell('file');
    if (file === '') {
      wrong('"file" is empty');
      continue;
    }
    const service = wordIn(cell('service'), 'service', services, wrong);
    const response = wordIn(cell('response'), 'response', responses, wrong);
    const pvRange = rangeIn(cell('pv_low'), cell('pv_high'), wrong);
    const tag = cell('tag');
    const key = JSON.stringify([file, tag]);
    const before = seen.get(key);
    if (before !== undefined) wrong(`the same file and tag stand on line ${before}`);
    seen.set(key, line);
    loops.push({
      order: loops.length,
      tag: tag || tagOfFile(file),
      file,
      path: isAbsolute(file) ? file : join(dirname(path), file),
      reading: {
        ...forAll,
        ...(tag !== '' && { tag }),
        ...(service && { service }),
        ...(response && { response }),
        ...(pvRange && { pvRange }),
      },
    });
  }
  if (mistakes.length > 0) {
    const more = mistakes.length > shownMistakes ? `; and ${mistakes.length - shownMistakes} more` : '';
    throw new UnreadableInput(
      `${what} cannot be used: ${mistakes.slice(0, shownMistakes).join('; ')}${more}. ` +
        `Its columns are ${columns.join(', ')}; all but file may be left out or empty.`,
    );
  }
  if (loops.length === 0) throw new UnreadableInput(`${what} has no loop below its line of column names.`);
  return loops;
}

/** The ISA-5.1 tag in the name of a file, else its name without the ending. */
export function tagOfFile(file: string): string {
  const stem = basename(file, extname(file));
  return isaTag(stem.replaceAll(' ', '_'))?.text ?? stem;
}

interface Row {
  readonly cells: readonly string[];
  readonly line: number;
}

/** Rows with something in them below the names. Line numbers hold as long as no cell runs over a line. */
function rowsOf(text: string): Row[] {
  return filledRows(text).slice(1);
}

function headerOf(text: string): string[] {
  return filledRows(text, 20)[0]?.cells.map((name) => name.trim().toLowerCase()) ?? [];
}

function filledRows(text: string, atMost = 0): Row[] {
  const { data } = parse<string[]>(text.replace(/^\uFEFF/, ''), {
    delimitersToGuess: [',', ';', '\t'],
    preview: atMost,
  });
  return data
    .map((cells, at) => ({ cells, line: at + 1 }))
    .filter(({ cells }) => cells.some((cell) => cell.trim() !== ''));
}

function wordIn<Word extends string>(
  text: string,
  column: Column,
  known: readonly Word[],
  wrong: (sentence: string) => void,
): Word | null {
  if (text === '') return null;
  const word = known.find((one) => one === text.toLowerCase());
  if (word === undefined) wrong(`"${column}" is one of ${known.join(', ')}, not "${text}"`);
  return word ?? null;
}

/** Ends are numbers, with a decimal comma too, or numbers with a unit such as `30 l/s`. */
function rangeIn(
  low: string,
  high: string,
  wrong: (sentence: string) => void,
): ReadLoopOptions['pvRange'] | null {
  if (low === '' && high === '') return null;
  const [from, to] = [low, high].map((end) => end.replace(/^([+-]?\d+),(\d+)(?!\d*,)/, '$1.$2')) as [
    string,
    string,
  ];
  try {
    const { unit, ...range } = readRange({ low: from, high: to }, 'pv_low and pv_high');
    return unit === '' ? range : { low: from, high: to };
  } catch (error) {
    if (!(error instanceof StickbandError)) throw error;
    wrong(`pv_low and pv_high need two numbers, the lower one first, not "${low}" and "${high}"`);
    return null;
  }
}
