/** Installs packages of Debian, printing the commands, where that is possible without asking anybody. */
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';

/** True for root on Debian or a system made from it. */
export function canInstallDebianPackages(): boolean {
  return process.getuid?.() === 0 && existsSync('/etc/debian_version') && existsSync('/usr/bin/apt-get');
}

/**
 * Runs `apt-get update` and `apt-get install` for `packages`. Every command is passed to `say` before it runs.
 * Returns '' when all went well, else the last lines of what the failing command printed.
 */
export function installDebianPackages(packages: readonly string[], say: (line: string) => void): string {
  const commands = [['update'], ['install', '--yes', '--no-install-recommends', ...packages]];
  for (const words of commands) {
    say(`apt-get ${words.join(' ')}`);
    const run = spawnSync('apt-get', ['-q', ...words], {
      encoding: 'utf8',
      env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' },
      maxBuffer: 64 * 1024 * 1024,
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    if (run.status !== 0) {
      const printed = `${run.stdout ?? ''}${run.stderr ?? ''}${run.error?.message ?? ''}`.trim();
      return printed.split('\n').slice(-5).join('\n') || `apt-get ${words[0]} failed without a word`;
    }
  }
  return '';
}
