/** The built package as someone has it who installed it on a machine without Jupyter and Python. */
import { spawnSync } from 'node:child_process';
import { cpSync, mkdirSync, readdirSync, symlinkSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { beforeAll, describe, expect, it } from 'vitest';
import { scratchFolder } from '../scratch-folder';

const folder = scratchFolder();
const installed = join(folder, 'installed');
const work = join(folder, 'work');

function stickband(...words: string[]): { code: number | null; stdout: string; stderr: string } {
  const run = spawnSync(process.execPath, [join(installed, 'dist', 'cli', 'main.js'), ...words], {
    cwd: work,
    encoding: 'utf8',
    env: { PATH: join(folder, 'nothing'), HOME: folder },
  });
  return { code: run.status, stdout: run.stdout, stderr: run.stderr };
}

beforeAll(() => {
  mkdirSync(work);
  for (const part of ['dist', 'notebooks/assess-one-loop.ipynb', 'data', 'package.json']) {
    cpSync(part, join(installed, part), { recursive: true });
  }
  symlinkSync(resolve('node_modules'), join(installed, 'node_modules'));
});

describe('assess without Jupyter', () => {
  const demo = join(installed, 'data', '31-LC-140.csv');

  it('fails with a sentence that gives the ways to get it, and makes nothing', () => {
    const { code, stdout, stderr } = stickband('assess', demo);
    expect(code).toBe(2);
    expect(stdout).toBe('');
    expect(stderr).toMatch(/^Jupyter was not found, and the guided notebook needs it\./);
    for (const way of [
      'pip install notebook',
      'apt-get install jupyter-notebook',
      '--install',
      '--no-notebook',
    ]) {
      expect(stderr).toContain(way);
    }
    expect(readdirSync(work)).toEqual([]);
  });

  it('gives summary and numbers all the same', () => {
    const { code, stdout } = stickband('assess', demo, '--no-notebook', '--json', 'numbers.json');
    expect(code).toBe(0);
    expect(stdout).toContain('31-LC-140');
    expect(readdirSync(work)).toEqual(['numbers.json']);
  });
});
