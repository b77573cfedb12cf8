/** The demo records that come with the package: loops of an invented plant. */
import { existsSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { WrongUse } from '../errors';
import { packageFolder } from '../report/places';

/** Path of a bundled demo record, e.g. `31-FC-104.csv`. Throws {@link WrongUse} with the list when there is none. */
export function demoFile(name: string): string {
  const folder = join(packageFolder, 'data');
  const path = join(folder, name);
  if (!existsSync(path) || !name.endsWith('.csv')) {
    const known = readdirSync(folder).filter((file) => file.endsWith('.csv'));
    throw new WrongUse(`There is no demo record "${name}". There are: ${known.join(', ')}.`);
  }
  return path;
}
