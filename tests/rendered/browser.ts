/** Finds a Chromium for the tests, or has Debian install one. */
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { delimiter, join } from 'node:path';
import { type Browser, chromium } from 'playwright-core';
import { MissingTool } from '../../src/errors';
import { canInstallDebianPackages, installDebianPackages } from '../../src/report/debian-packages';

const names = [
  'chromium',
  'chromium-browser',
  'google-chrome',
  'google-chrome-stable',
  'chrome',
  'microsoft-edge',
];
const usualPlaces = [
  '/Applications/Google Chrome.app/Contents/MacOS/Google Chrome',
  '/Applications/Chromium.app/Contents/MacOS/Chromium',
  'C:\\Program Files\\Google\\Chrome\\Application\\chrome.exe',
  'C:\\Program Files (x86)\\Microsoft\\Edge\\Application\\msedge.exe',
];

/** Path of a browser of the Chromium family: what the variable CHROME names, or the first known one. */
export function findBrowser(): string | null {
  const onPath = (process.env.PATH ?? '')
    .split(delimiter)
    .flatMap((folder) => names.map((name) => join(folder, name)));
  const candidates = [process.env.CHROME ?? '', ...onPath, ...usualPlaces];
  return (
    candidates.find(
      (path) => path !== '' && existsSync(path) && spawnSync(path, ['--version']).status === 0,
    ) ?? null
  );
}

export function ensureBrowser(say: (line: string) => void): string {
  let failure = '';
  if (!findBrowser() && canInstallDebianPackages()) {
    say('Installing Chromium for the tests from Debian.');
    failure = installDebianPackages(['chromium', 'fonts-dejavu-core'], say);
  }
  const found = findBrowser();
  if (found) return found;
  throw new MissingTool(
    `The tests need Chromium (or Chrome, or Edge) and found none. ${failure}\n` +
      'Install one, or name its program in the variable CHROME; on Debian, root can run ' +
      '"apt-get install chromium fonts-dejavu-core".',
  );
}

/** Starts the browser without a window; its profile is a throw-away of playwright's own. */
export function startBrowser(): Promise<Browser> {
  return chromium.launch({
    executablePath: ensureBrowser(() => {}),
    headless: true,
    args: ['--no-sandbox', '--disable-gpu', '--no-first-run', '--disable-background-networking'],
  });
}
