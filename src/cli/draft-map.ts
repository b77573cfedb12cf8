/** `stickband audit EXPORT --draft-map FILE`: the map of an export, drafted for the user to check. */
import { existsSync } from 'node:fs';
import { dirname, resolve } from 'node:path';
import { draftMap } from '../audit/sources/draft-map';
import { type ExportMap, isReadable } from '../audit/sources/export-map';
import { mapText } from '../audit/sources/read-map';
import { WrongUse } from '../errors';
import { prepareFolder, writeWhole } from '../report/write-whole';
import type { Output } from './output';
import { startProgress } from './progress';

/** @param target file to write, or `-` for standard output. A file that is there is never overwritten: it may have been checked. */
export async function draftMapTo(source: string, target: string, output: Output): Promise<void> {
  const path = resolve(target);
  if (target !== '-') {
    if (existsSync(path)) {
      throw new WrongUse(`There is a file ${path} already. Name another one with --draft-map, or delete it.`);
    }
    prepareFolder(dirname(path));
  }
  const progress = startProgress(output.stderr, 'quiet');
  let map: ExportMap;
  try {
    map = await draftMap(source, (share) => progress('reading the export', share));
  } finally {
    progress.stop();
  }
  const open = map.loops.filter((loop) => !isReadable(loop)).length;
  const said = [
    `Map of ${map.loops.length} loops drafted from the names in ${source}${target === '-' ? '' : `: ${path}`}`,
    `Check it before it is used, ${open > 0 ? `above all ${open === 1 ? 'the one loop' : `the ${open} loops`} of which PV or OP was left open: ` : ''}the column "comment" says why something was left open.`,
    `Then: stickband audit ${quoted(source)} --map ${target === '-' ? 'MAP.csv' : quoted(target)}`,
  ];
  if (target === '-') output.stdout.write(mapText(map));
  else writeWhole({ [path]: mapText(map) });
  (target === '-' ? output.stderr : output.stdout).write(`${said.join('\n')}\n`);
}

/** A path as it is typed: in quotes where it has blanks. */
function quoted(path: string): string {
  return /\s/.test(path) ? `"${path}"` : path;
}
