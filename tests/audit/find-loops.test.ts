import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { findLoops } from '../../src/audit/find-loops';
import { scratchFolder } from '../scratch-folder';
import { smallLoop, writeSmallLoops } from './small-loops';

describe('the loops of a folder', () => {
  it('are its files in the order of their names, with the tags in these names', () => {
    const folder = scratchFolder();
    const names = writeSmallLoops(folder, 5);
    const { loops, leftOut } = findLoops(folder, null, { zone: 'UTC+2' });
    expect(loops.map(({ file }) => file)).toEqual(names);
    expect(loops[0]).toEqual({
      order: 0,
      tag: '31-FC-100',
      file: '31-FC-100.csv',
      path: join(folder, '31-FC-100.csv'),
      reading: { zone: 'UTC+2' },
    });
    expect(leftOut).toEqual([]);
  });

  it('leave out hidden files, folders, files of other kinds, and lists, and say so of the last two', () => {
    const folder = scratchFolder();
    writeSmallLoops(folder, 2);
    mkdirSync(join(folder, 'old.csv'));
    for (const name of ['.31-FC-900.csv', '~$31-FC-100.xlsx', 'README.md', 'unit.parquet'])
      writeFileSync(join(folder, name), smallLoop(0));
    writeFileSync(join(folder, 'loops.csv'), 'file,tag\n31-FC-100.csv,31-FC-100\n');
    const { loops, leftOut } = findLoops(folder, null, {});
    expect(loops.map(({ file }) => file)).toEqual(['31-FC-100.csv', '31-LC-101.csv']);
    expect(leftOut).toEqual([
      'Left out, as their kind holds no single loop: README.md, unit.parquet.',
      'Left out: loops.csv, a list of loops. To go by it, audit it instead of the folder.',
    ]);
  });

  it('have the same fingerprint wherever the folder lies, and another one for other loops or options', () => {
    const [here, there, more] = [scratchFolder(), scratchFolder(), scratchFolder()];
    for (const folder of [here, there]) writeSmallLoops(folder, 3);
    writeSmallLoops(more, 4);
    const print = findLoops(here, null, {}).listed;
    expect(findLoops(there, null, {}).listed).toBe(print);
    expect(findLoops(more, null, {}).listed).not.toBe(print);
    expect(findLoops(here, null, { op: 'OUT' }).listed).not.toBe(print);
  });
});

describe('other sources', () => {
  const folder = scratchFolder();
  writeSmallLoops(join(folder, 'loops'), 1);
  const put = (name: string, text: string): string => {
    writeFileSync(join(folder, name), text);
    return join(folder, name);
  };
  const list = put('list.csv', 'file\nloops/31-FC-100.csv\n');
  const wide = put('wide.csv', 'time,31-FC-104.PV,31-FC-104.OP,31-FC-105.PV,31-FC-105.OP\n');

  it('reads a CSV with a column file as a list', () => {
    expect(findLoops(list, null, {}).loops.map(({ file }) => file)).toEqual(['loops/31-FC-100.csv']);
  });

  it.each([
    ['nothing', join(folder, 'nowhere'), null, /There is no file or folder ".*nowhere"/],
    ['an empty folder', scratchFolder(), null, /has no file of a loop \(\.csv, \.txt/],
    [
      'an export without a map',
      wide,
      null,
      /neither a folder nor a list.*--draft-map map\.csv.*stickband assess/,
    ],
    ['a folder with a map', folder, 'map.csv', /is a folder\. A map goes with one export/],
    ['a list with a map', list, 'map.csv', /is a list of loops\. A map goes with one export/],
  ])('refuses %s', (_, source, map, sentence) => {
    expect(() => findLoops(source, map, {})).toThrow(sentence);
  });

  it('refuses to state outside the map what holds for the loops of an export', () => {
    expect(() => findLoops(wide, 'map.csv', { zone: 'UTC', op: 'OUT' })).toThrow(
      /stands in its map\. State there: zone, op\./,
    );
  });
});
