/** Writes files whole or not at all: first under another name in the same folder, then renamed. */
import { accessSync, constants, mkdirSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { basename, dirname, join } from 'node:path';
import { UnwritableOutput } from '../errors';

/** Makes `folder` and checks that files can be made in it. Throws {@link UnwritableOutput}. */
export function prepareFolder(folder: string): void {
  try {
    mkdirSync(folder, { recursive: true });
    accessSync(folder, constants.W_OK);
  } catch (error) {
    throw new UnwritableOutput(
      `The folder ${folder} cannot be written to (${reason(error)}). Name another one with --out, or change its rights.`,
    );
  }
}

/** Writes all of `files` (path to text), or none. Throws {@link UnwritableOutput}. */
export function writeWhole(files: Readonly<Record<string, string>>): void {
  const paths = Object.keys(files).map((path) => ({
    path,
    part: join(dirname(path), `.${basename(path)}.part${process.pid}`),
  }));
  try {
    for (const { path, part } of paths) writeFileSync(part, files[path]!);
    for (const { path, part } of paths) renameSync(part, path);
  } catch (error) {
    for (const { part } of paths) rmSync(part, { force: true });
    throw new UnwritableOutput(
      `${paths.map(({ path }) => path).join(' and ')} cannot be written (${reason(error)}). ` +
        'Name another place, or change the rights of this one.',
    );
  }
}

function reason(error: unknown): string {
  const code = (error as NodeJS.ErrnoException).code;
  const known: Record<string, string> = {
    EACCES: 'no permission',
    EROFS: 'it is read-only',
    ENOSPC: 'the disk is full',
    ENOENT: 'its folder does not exist',
    ENOTDIR: 'a part of the path is a file',
    EEXIST: 'there is a file of that name',
    EISDIR: 'it is a folder',
  };
  return (code && known[code]) ?? (error as Error).message;
}
