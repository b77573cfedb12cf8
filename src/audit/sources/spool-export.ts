/**
 * Brings the mapped columns of an export of any size into a work folder, in one pass, so that each loop can then be read
 * on its own by any worker.
 */
import { createHash } from 'node:crypto';
import { mkdirSync, statSync } from 'node:fs';
import { basename } from 'node:path';
import { UnreadableInput, UnwritableOutput } from '../../errors';
import { longColumns } from '../../record/series';
import { version } from '../../version';
import { CellFileWriter } from './cell-file';
import { type ExportMap, isReadable } from './export-map';
import type { OnProgress } from './export-reader';
import { sha256Of } from './file-bytes';
import { calledExport, withExport } from './open-export';
import { cellsPath, dropSpool, readSpool, type Spool, writeSpool } from './spool';
import { spoolLong } from './spool-long';
import { spoolWide } from './spool-wide';
import type { SpooledLoop } from './spooled-loop';

/**
 * Spools the loops of a map. A spool that is there already and has these loops, of the same export (by its bytes) and
 * version, is used again; any other is made anew.
 *
 * Loops of which the map does not state PV or OP come back too: reading them says so.
 *
 * @param file a wide or long export: text, Parquet or .xlsx. Text and Parquet may be of any size.
 * @param folder work folder of this audit alone; made when it is not there
 * @throws UnreadableInput for an export that cannot be read, and for a map that names columns which are not there
 * @throws UnwritableOutput when the work folder cannot be written
 */
export async function spoolExport(
  file: string,
  map: ExportMap,
  folder: string,
  onProgress: OnProgress = () => {},
): Promise<SpooledLoop[]> {
  if (map.loops.length === 0) return [];
  const readings = map.loops.map(({ order: _, comment: __, ...reading }) => reading);
  const prints = readings.map((reading) =>
    createHash('sha256').update(JSON.stringify(reading)).digest('hex'),
  );
  const known = readSpool(folder);
  const usable =
    known?.version === version &&
    prints.every((print) => known.loops.includes(print)) &&
    (await isOf(file, known));
  const { sha256 } = usable ? known : await makeSpool(file, map, prints, folder, onProgress);
  return map.loops.map(({ order, tag }, i) => ({
    order,
    tag,
    file: basename(file),
    sha256,
    folder,
    reading: readings[i]!,
  }));
}

async function isOf(file: string, spool: Spool): Promise<boolean> {
  try {
    return statSync(file).size === spool.size && (await sha256Of(file)) === spool.sha256;
  } catch {
    return false; // what is wrong with the file is said where it is read
  }
}

async function makeSpool(
  file: string,
  map: ExportMap,
  prints: readonly string[],
  folder: string,
  onProgress: OnProgress,
): Promise<Spool> {
  const loops = map.loops.filter(isReadable);
  if (loops.length === 0) {
    throw new UnreadableInput('The map states PV and OP of no loop. Fill in its columns "pv" and "op".');
  }
  let cells: CellFileWriter | null = null;
  try {
    return await withExport(file, async (reader) => {
      cells?.close();
      mkdirSync(folder, { recursive: true });
      dropSpool(folder);
      const createCells = (columns: number): CellFileWriter => {
        cells = new CellFileWriter(cellsPath(folder), columns);
        return cells;
      };
      const columns = longColumns(reader.first.names);
      const pass = { reader, loops, what: calledExport(file), createCells, onProgress };
      const passed = columns === null ? await spoolWide(pass) : await spoolLong(pass, columns);
      const made: Spool = {
        schema: 'stickband/spool/1',
        version,
        loops: prints,
        size: statSync(file).size,
        ...passed,
      };
      writeSpool(folder, made);
      return made;
    });
  } catch (error) {
    (cells as CellFileWriter | null)?.close();
    dropSpool(folder);
    throw asUnwritable(error, folder);
  }
}

/** A full disk or a missing right, as a sentence; anything else as it is. */
function asUnwritable(error: unknown, folder: string): unknown {
  const code = (error as NodeJS.ErrnoException).code ?? '';
  const known: Readonly<Record<string, string>> = {
    ENOSPC: 'the disk is full',
    EDQUOT: 'the disk quota is used up',
    EACCES: 'no permission',
    EPERM: 'no permission',
    EROFS: 'it is read-only',
    ENOTDIR: 'a part of the path is a file',
    EEXIST: 'there is a file of that name',
  };
  if (!(code in known)) return error;
  return new UnwritableOutput(
    `The work folder ${folder} cannot be written to (${known[code]}). It takes up to half of the size of the export. Name another folder with --out, or make room.`,
  );
}
