/** Folders to write in, taken away when the test file that asked for them is through. */
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll } from 'vitest';

const made: string[] = [];

export function scratchFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'stickband-test-'));
  made.push(folder);
  return folder;
}

afterAll(() => {
  for (const folder of made) rmSync(folder, { recursive: true, force: true });
});
