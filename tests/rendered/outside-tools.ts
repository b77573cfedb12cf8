/** Set-up of the rendering tests: a fresh build, Jupyter and a browser. What is missing fails; nothing is skipped. */
import { execSync } from 'node:child_process';
import { ensureJupyter } from '../../src/report/jupyter';
import { packageFolder } from '../../src/report/places';
import { ensureBrowser } from './browser';

export default function setUp(): void {
  const say = (line: string): void => console.log(line);
  ensureJupyter({ install: true, say });
  ensureBrowser(say);
  // Notebooks import the built package.
  execSync('npm run build', { cwd: packageFolder, stdio: 'inherit' });
}
