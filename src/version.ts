/** Version of this package, as its package.json says. */
import { readFileSync } from 'node:fs';
import { join } from 'node:path';

export const version: string = JSON.parse(
  readFileSync(join(__dirname, '..', 'package.json'), 'utf8'),
).version;
