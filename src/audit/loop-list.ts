/** Reads a list of loops: a CSV with a column `file`, one loop a row. */
import { basename, dirname, extname, isAbsolute, join } from 'node:path';
import { isaTag } from '../record/names';
import type { ReadLoopOptions } from '../record/read-loop';
import type { ListedLoop } from './loop-job';
import { rangeCells, responses, services, statedColumnNames, statedRows, wordCell } from './stated-rows';

/** All columns; all but `file` may be left out or empty. */
const columns = ['file', 'tag', 'service', 'response', 'pv_low', 'pv_high'] as const;

/** Whether the first line with something in it has a column `file`. */
export function isLoopList(start: string): boolean {
  return statedColumnNames(start).includes('file');
}

/**
 * Paths in the list are relative to the list. A file that is not there is no mistake of the list: its loop fails alone.
 *
 * @param forAll what is stated of every loop
 * @throws UnreadableInput with all mistakes of the list, by line
 */
export function readLoopList(path: string, forAll: ReadLoopOptions): ListedLoop[] {
  const { rows, refuseMistakes } = statedRows(path, 'list', columns);
  const loops: ListedLoop[] = [];
  const seen = new Map<string, number>();
  for (const row of rows) {
    const file = row.cell('file');
    if (file === '') {
      row.wrong('"file" is empty');
      continue;
    }
    const service = wordCell(row, 'service', services);
    const response = wordCell(row, 'response', responses);
    const pvRange = rangeCells(row, 'pv_low', 'pv_high');
    const tag = row.cell('tag');
    const key = JSON.stringify([file, tag]);
    const before = seen.get(key);
    if (before !== undefined) row.wrong(`the same file and tag stand on line ${before}`);
    seen.set(key, row.line);
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
  refuseMistakes(`Its columns are ${columns.join(', ')}; all but file may be left out or empty.`);
  return loops;
}

/** The ISA-5.1 tag in the name of a file, else its name without the ending. */
export function tagOfFile(file: string): string {
  const stem = basename(file, extname(file));
  return isaTag(stem.replaceAll(' ', '_'))?.text ?? stem;
}
