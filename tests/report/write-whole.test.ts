import { readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { UnwritableOutput } from '../../src/errors';
import { prepareFolder, writeWhole } from '../../src/report/write-whole';
import { scratchFolder } from '../scratch-folder';

describe('writing files whole', () => {
  it('writes all files and leaves nothing else behind', () => {
    const folder = scratchFolder();
    writeWhole({ [join(folder, 'a.txt')]: 'A', [join(folder, 'b.txt')]: 'B' });
    expect(readdirSync(folder)).toEqual(['a.txt', 'b.txt']);
    expect(readFileSync(join(folder, 'b.txt'), 'utf8')).toBe('B');
  });

  it('writes none when one cannot be written, and says which and why', () => {
    const folder = scratchFolder();
    const good = join(folder, 'a.txt');
    const bad = join(folder, 'missing', 'b.txt');
    expect(() => writeWhole({ [good]: 'A', [bad]: 'B' })).toThrow(UnwritableOutput);
    expect(() => writeWhole({ [good]: 'A', [bad]: 'B' })).toThrow(
      /b\.txt cannot be written \(its folder does not exist\)/,
    );
    expect(readdirSync(folder)).toEqual([]);
  });

  it('refuses a folder whose path goes through a file', () => {
    const file = join(scratchFolder(), 'file');
    writeFileSync(file, '');
    expect(() => prepareFolder(join(file, 'out'))).toThrow(
      /cannot be written to \(a part of the path is a file\)/,
    );
  });
});
