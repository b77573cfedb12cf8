/** Set-up of the rendering tests: a fresh build, Jupyter and a browser. What is missing fails; nothing is skipped. */
import { execSync } from 'node:child_process';
import { existsSync, readdirSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { ensureJupyter } from '../../src/report/jupyter';
import { packageFolder } from '../../src/report/places';
import { ensureBrowser } from './browser';

export default function setUp(): void {
  const say = (line: string): void => console.log(line);
  ensureJupyter({ install: true, say });
  ensureBrowser(say);
  // Notebooks import the built package.
  if (newest(join(packageFolder, 'src')) > built()) {
    say('npm run build');
    execSync('npm run build', { cwd: packageFolder, stdio: 'inherit' });
  }
}

function built(): number {
  const program = join(packageFolder, 'dist', 'cli', 'main.js');
  return existsSync(program) ? statSync(program).mtimeMs : 0;
}

function newest(folder: string): number {
  const times = readdirSync(folder, { recursive: true, encoding: 'utf8' }).map(
    (name) => statSync(join(folder, name)).mtimeMs,
  );
  return Math.max(...times);
}
