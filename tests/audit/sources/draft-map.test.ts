import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { draftMap } from '../../../src/audit/sources/draft-map';
import type { MappedLoop } from '../../../src/audit/sources/export-map';
import { readMap } from '../../../src/audit/sources/read-map';
import { captured } from '../../cli/captured';
import { scratchFolder } from '../../scratch-folder';

const folder = scratchFolder();
const path = join(folder, 'unit 31.csv');
const draft = async (text: string): Promise<readonly MappedLoop[]> => {
  writeFileSync(path, text);
  return (await draftMap(path)).loops;
};
/** A wide export with these columns and one row. */
const wide = (...names: string[]): Promise<readonly MappedLoop[]> =>
  draft(`${names.join(',')}\n2026-03-04T06:00:00Z${',1'.repeat(names.length - 1)}\n`);

describe('draftMap', () => {
  it('maps the signals of each loop by tag and suffix, and states nothing that it assumes', async () => {
    const loops = await wide(
      ...['Timestamp', '31-FC-104.SP', '31-FC-104.PV', '31-FC-104.OUT', '31-FC-104.MODE'],
      ...['31-LC-140 PV', '31-LC-140 OP', 'ambient', '31-TT-9.PV'],
    );
    expect(loops).toEqual([
      {
        order: 0,
        tag: '31-FC-104',
        time: 'Timestamp',
        sp: '31-FC-104.SP',
        pv: '31-FC-104.PV',
        op: '31-FC-104.OUT',
        mode: '31-FC-104.MODE',
        comment: 'service taken as flow unless another is stated',
      },
      {
        order: 1,
        tag: '31-LC-140',
        time: 'Timestamp',
        pv: '31-LC-140 PV',
        op: '31-LC-140 OP',
        comment: 'service taken as level unless another is stated',
      },
    ]);
  });

  it('never takes MV, for OP or for travel', async () => {
    const [loop] = await wide('time', '31-FC-104.SP', '31-FC-104.PV', '31-FC-104.MV');
    expect(loop).not.toHaveProperty('op');
    expect(loop).not.toHaveProperty('travel');
    expect(loop!.comment).toMatch(/no name says OP; "31-FC-104\.MV" left alone: MV may mean/);
  });

  it('leaves open what two columns may be, and says which', async () => {
    const [loop] = await wide('time', '31-FC-104.PV', '31-FC-104.OP', '31-FC-104.OP');
    expect(loop).not.toHaveProperty('op');
    expect(loop!.comment).toMatch(/OP left open: it may be "31-FC-104\.OP", "31-FC-104\.OP"/);
    const [valves] = await wide('time', '31-FC-104.PV', '31-FC-104.OP', '31-ZT-104A', '31-ZT-104B');
    expect(valves).not.toHaveProperty('travel');
    expect(valves!.comment).toMatch(/travel left open: it may be "31-ZT-104A", "31-ZT-104B"/);
  });

  it('asks to check what another word or the loop number may also mean', async () => {
    const [loop] = await wide('time', '31-FC-104.PV', '31-FC-104.OP', '31-FC-104.OUT');
    expect(loop).toMatchObject({ op: '31-FC-104.OP' });
    expect(loop!.comment).toMatch(/OP may also be "31-FC-104\.OUT": check it/);
    const [other] = await wide('time', '31-FT-104', '31-FC-104.OP', '31-ZT-104');
    expect(other).toMatchObject({ pv: '31-FT-104', travel: '31-ZT-104' });
    expect(other!.comment).toMatch(/PV is "31-FT-104" by its loop number: check it; travel is "31-ZT-104"/);
  });

  it('leaves the time open where no column or several may be it', async () => {
    const [none] = await wide('when', '31-FC-104.PV', '31-FC-104.OP');
    expect(none).not.toHaveProperty('time');
    expect(none!.comment).toMatch(/no column is named as the time: name it/);
    const [joined] = await draft('Date,Time,31-FC-104.PV,31-FC-104.OP\n2026-03-04,06:00:00,1,2\n');
    expect(joined).not.toHaveProperty('time');
    expect(joined!.comment).toMatch(/joined from two columns/);
    const [own] = await wide('31-FC-104.PV TIME', '31-FC-104.PV', '31-FC-104.OP TIME', '31-FC-104.OP');
    expect(own).not.toHaveProperty('time');
    expect(own).toMatchObject({ pv: '31-FC-104.PV', op: '31-FC-104.OP' });
    expect(own!.comment).toMatch(/each signal has the time column that names it/);
  });

  it('calls a loop without tag after the file', async () => {
    const [loop, ...others] = await wide('time', 'SP', 'PV', 'OP');
    expect(others).toEqual([]);
    expect(loop).toMatchObject({ tag: 'unit 31', sp: 'SP', pv: 'PV', op: 'OP' });
    expect(loop!.comment).toMatch(
      /called after the file, as no column has a tag; |service not known from the tag: state it/,
    );
  });

  it('finds the tags of a long export wherever they stand', async () => {
    const rows = ['31-LC-140.PV', '31-LC-140.PV', '31-LC-140.OP', '31-FC-104.OP', '31-FC-104.PV'].map(
      (tag, i) => `2026-03-04T06:00:0${i}Z;${tag};${i};Good`,
    );
    expect(await draft(`time;tag;value;quality\n${rows.join('\n')}\n`)).toMatchObject([
      { tag: '31-LC-140', time: 'time', pv: '31-LC-140.PV', op: '31-LC-140.OP' },
      { tag: '31-FC-104', time: 'time', pv: '31-FC-104.PV', op: '31-FC-104.OP' },
    ]);
  });

  it('refuses an export in which no name tells a loop', async () => {
    await expect(wide('time', 'a', 'b')).rejects.toThrow(
      /no names from which loops are told.*Names found: "a", "b"/,
    );
  });
});

describe('stickband audit EXPORT --draft-map', () => {
  const names = 'time,31-FC-104.SP,31-FC-104.PV,31-FC-104.OP,31-PC-7.PV,31-PC-7.MV\n2026-03-04,1,2,3,4,5\n';

  it('writes a map that readMap takes, and says what to check', async () => {
    writeFileSync(path, names);
    const target = join(folder, 'maps', 'map.csv');
    const { code, stdout } = await captured('audit', path, '--draft-map', target);
    expect(code).toBe(0);
    expect(stdout).toMatch(
      /Map of 2 loops drafted .*\nCheck it before it is used, above all the one loop of which/,
    );
    expect(readMap(target).loops.map(({ tag }) => tag)).toEqual(['31-FC-104', '31-PC-7']);
    const again = await captured('audit', path, '--draft-map', target);
    expect(again).toMatchObject({ code: 2, stderr: expect.stringMatching(/There is a file .* already/) });
  });

  it('writes it to standard output alone when asked', async () => {
    writeFileSync(path, names);
    const { stdout, stderr } = await captured('audit', path, '--draft-map', '-');
    const target = join(folder, 'piped.csv');
    writeFileSync(target, stdout);
    expect(readMap(target).loops).toHaveLength(2);
    expect(stderr).toMatch(/Map of 2 loops/);
    expect(readFileSync(path, 'utf8')).toBe(names);
  });

  it('stands alone', async () => {
    const { code, stderr } = await captured('audit', path, '--draft-map', '-', '--resume');
    expect(code).toBe(2);
    expect(stderr).toMatch(/--draft-map stands alone; leave out --resume/);
  });
});
