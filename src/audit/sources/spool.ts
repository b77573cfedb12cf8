/** What stands beside the cells of a spooled export: where each column lies, and of which export and map it was made. */
import { existsSync, readFileSync, renameSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Note } from '../../record/loop-record';
import type { ColumnPlace } from './cell-file';

/** A wide export: the columns that some loop needs, the stamps once for all of them. */
export interface WideSpool {
  readonly kind: 'wide';
  readonly names: readonly string[];
  readonly units: readonly string[];
  readonly rows: number;
  readonly rowNumbers: ColumnPlace;
  /** Position of the column in the export, and its place. */
  readonly columns: readonly (readonly [number, ColumnPlace])[];
}

/** Rows of one tag of a long export. */
export interface TagPlaces {
  readonly times: ColumnPlace;
  readonly values: ColumnPlace;
  readonly qualities: ColumnPlace | null;
  readonly rowNumbers: ColumnPlace;
}

/** A long export: the tags that some loop needs. */
export interface LongSpool {
  readonly kind: 'long';
  /** Names of the columns. */
  readonly time: string;
  readonly quality: string | null;
  readonly tags: readonly (readonly [string, TagPlaces])[];
}

export interface Spool {
  readonly schema: 'stickband/spool/1';
  /** Version of stickband that made it, and fingerprints of what the map says of each loop and of the export. */
  readonly version: string;
  readonly loops: readonly string[];
  readonly sha256: string;
  /** Size of the export and of the file of cells, bytes. */
  readonly size: number;
  readonly cellBytes: number;
  readonly notes: readonly Note[];
  readonly layout: WideSpool | LongSpool;
}

export function cellsPath(folder: string): string {
  return join(folder, 'cells.bin');
}

function spoolPath(folder: string): string {
  return join(folder, 'spool.json');
}

/** The spool in a folder; null when there is none, or it is not whole. */
export function readSpool(folder: string): Spool | null {
  try {
    const spool = JSON.parse(readFileSync(spoolPath(folder), 'utf8')) as Spool;
    const whole =
      spool.schema === 'stickband/spool/1' && statSync(cellsPath(folder)).size === spool.cellBytes;
    return whole ? spool : null;
  } catch {
    return null;
  }
}

/** Written last, under its own name at once: a spool without it is none. */
export function writeSpool(folder: string, spool: Spool): void {
  const part = `${spoolPath(folder)}.part`;
  writeFileSync(part, JSON.stringify(spool));
  renameSync(part, spoolPath(folder));
}

/** Takes a spool away, whole or not. */
export function dropSpool(folder: string): void {
  if (!existsSync(folder)) return;
  for (const path of [spoolPath(folder), `${spoolPath(folder)}.part`, cellsPath(folder)]) {
    rmSync(path, { force: true });
  }
}
