/** Runs a command line in this process and keeps what it writes. */
import { run } from '../../src/cli/run';

export interface Captured {
  readonly code: number;
  readonly stdout: string;
  readonly stderr: string;
}

export async function captured(...words: string[]): Promise<Captured> {
  const written = { stdout: '', stderr: '' };
  const into = (name: 'stdout' | 'stderr') => ({
    write: (text: string): void => {
      written[name] += text;
    },
  });
  const code = await run(words, { stdout: into('stdout'), stderr: into('stderr') });
  return { code, ...written };
}
