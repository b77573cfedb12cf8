/** Where the package and its notebooks lie, and where results go when nobody says. */
import { copyFileSync, existsSync } from 'node:fs';
import { join, resolve } from 'node:path';

export const packageFolder: string = join(__dirname, '..', '..');

/** True in a checkout of the repository, false in an installed package. */
export const inCheckout: boolean = existsSync(join(packageFolder, 'tsconfig.json'));

export function bundledNotebook(name: string): string {
  return join(packageFolder, 'notebooks', name);
}

/** Folder for rendered notebooks and pages. */
export function defaultOutFolder(): string {
  return inCheckout ? join(packageFolder, 'notebooks', 'rendered') : resolve('stickband-out');
}

/** Folder of notebooks to work in: the repository's, else the current one with a copy of `name` put into it. */
export function workFolder(name: string): string {
  if (inCheckout) return join(packageFolder, 'notebooks');
  const copy = resolve(name);
  if (!existsSync(copy)) copyFileSync(bundledNotebook(name), copy);
  return resolve('.');
}
