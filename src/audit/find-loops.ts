/** Finds the loops of an audit: the files of a folder, the rows of a list, or those of the map of an export. */
import { createHash } from 'node:crypto';
import { closeSync, openSync, readdirSync, readSync, type Stats, statSync } from 'node:fs';
import { basename, extname, join } from 'node:path';
import { UnreadableInput, WrongUse } from '../errors';
import { decodeText } from '../record/delimited';
import type { ReadLoopOptions } from '../record/read-loop';
import type { ListedLoop } from './loop-job';
import { isLoopList, readLoopList, tagOfFile } from './loop-list';
import { type ExportMap, isReadable } from './sources/export-map';
import { readMap } from './sources/read-map';

export interface FoundLoops {
  readonly loops: readonly ListedLoop[];
  /** The map, where the loops are those of one export. */
  readonly map: ExportMap | null;
  /** SHA-256 of what is audited: files or columns, and what is stated of each loop. The data are not in it. */
  readonly listed: string;
  /** What was not taken as a loop, in sentences. */
  readonly leftOut: readonly string[];
}

/** Files that hold one loop each; the same that `readLoop` takes. */
const loopFiles = ['.csv', '.txt', '.tsv', '.xlsx', '.xls'];
/** Bytes in which the column names of a file are looked for. */
const startLength = 65_536;

/**
 * @param source folder, list of loops, or an export of many loops
 * @param map path of the map of the export; null for a folder or list
 * @param forAll what is stated of every loop
 * @throws UnreadableInput for a source that is not there or has no loops, or a list or map with mistakes
 * @throws WrongUse for an export without a map, or a map with something that needs none
 */
export function findLoops(source: string, map: string | null, forAll: ReadLoopOptions): FoundLoops {
  const facts = factsOf(source);
  const isList = facts.isFile() && isText(source) && isLoopList(startOf(source));
  if (map !== null) {
    if (!facts.isFile() || isList) {
      const kind = isList ? 'a list of loops' : 'a folder';
      throw new WrongUse(
        `"${source}" is ${kind}. A map goes with one export that holds many loops; leave it out.`,
      );
    }
    return fromMap(source, map, forAll);
  }
  if (facts.isDirectory()) return fromFolder(source, forAll);
  if (isList) return found(readLoopList(source, forAll), null, []);
  throw new WrongUse(
    `"${source}" is neither a folder nor a list of loops (a CSV with a column "file"). An export that holds many loops ` +
      `needs a map of its columns: draft one with stickband audit "${source}" --draft-map map.csv, check it, and give it ` +
      'with --map map.csv. One loop alone is assessed with stickband assess.',
  );
}

function fromMap(source: string, mapFile: string, forAll: ReadLoopOptions): FoundLoops {
  const stated = Object.keys(forAll);
  if (stated.length > 0) {
    throw new WrongUse(
      `What holds for the loops of an export stands in its map. State there: ${stated.join(', ')}.`,
    );
  }
  const map = readMap(mapFile);
  if (!map.loops.some(isReadable)) {
    throw new UnreadableInput(
      `The map ${basename(mapFile)} states PV and OP of no loop. Fill in its columns "pv" and "op".`,
    );
  }
  const loops = map.loops.map(({ order, comment: _, ...reading }) => ({
    order,
    tag: reading.tag,
    file: basename(source),
    path: source,
    reading,
  }));
  return found(loops, map, []);
}

function fromFolder(folder: string, forAll: ReadLoopOptions): FoundLoops {
  const names = readdirSync(folder, { withFileTypes: true })
    // Hidden files, and what Excel leaves beside a workbook that is open.
    .filter((entry) => !/^(\.|~\$)/.test(entry.name) && !entry.isDirectory())
    .map(({ name }) => name)
    .sort();
  const leftOut: string[] = [];
  const others = names.filter((name) => !loopFiles.includes(extname(name).toLowerCase()));
  if (others.length > 0) leftOut.push(`Left out, as their kind holds no single loop: ${shortList(others)}.`);
  const lists = names.filter((name) => {
    const path = join(folder, name);
    return !others.includes(name) && isText(path) && isLoopList(startOf(path));
  });
  for (const list of lists) {
    leftOut.push(`Left out: ${list}, a list of loops. To go by it, audit it instead of the folder.`);
  }
  const loops = names
    .filter((name) => !others.includes(name) && !lists.includes(name))
    .map((file, order) => ({
      order,
      tag: tagOfFile(file),
      file,
      path: join(folder, file),
      reading: forAll,
    }));
  if (loops.length === 0) {
    throw new UnreadableInput(
      `The folder "${folder}" has no file of a loop (${loopFiles.join(', ')}). ${leftOut.join(' ')}`.trim(),
    );
  }
  return found(loops, null, leftOut);
}

function found(loops: readonly ListedLoop[], map: ExportMap | null, leftOut: readonly string[]): FoundLoops {
  const hash = createHash('sha256');
  for (const { order, tag, file, reading } of loops) {
    hash.update(`${JSON.stringify([order, tag, file, reading])}\n`);
  }
  return { loops, map, listed: hash.digest('hex'), leftOut };
}

function factsOf(path: string): Stats {
  try {
    return statSync(path);
  } catch (error) {
    const { code, message } = error as NodeJS.ErrnoException;
    if (code === 'ENOENT') throw new UnreadableInput(`There is no file or folder "${path}". Check the path.`);
    throw new UnreadableInput(`"${path}" cannot be read (${message}).`);
  }
}

function isText(path: string): boolean {
  return ['.csv', '.txt', '.tsv'].includes(extname(path).toLowerCase());
}

function startOf(path: string): string {
  const bytes = Buffer.alloc(startLength);
  let file: number;
  try {
    file = openSync(path, 'r');
  } catch {
    return ''; // it is read as a loop later, which says what is wrong with it
  }
  try {
    return decodeText(bytes.subarray(0, readSync(file, bytes, 0, startLength, 0)), basename(path));
  } catch {
    return '';
  } finally {
    closeSync(file);
  }
}

function shortList(names: readonly string[]): string {
  const more = names.length > 5 ? ` and ${names.length - 5} more` : '';
  return `${names.slice(0, 5).join(', ')}${more}`;
}
