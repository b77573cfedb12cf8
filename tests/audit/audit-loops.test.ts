import {
  appendFileSync,
  existsSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, it } from 'vitest';
import { assessLoop } from '../../src/assessment/assess-loop';
import { type Audit, hasFailed } from '../../src/audit/audit';
import {
  type AuditOptions,
  type AuditProgress,
  auditLoops,
  auditOf,
  finishLoops,
  partOf,
} from '../../src/audit/audit-loops';
import { mergeAudits } from '../../src/audit/merge-audits';
import { readLoop } from '../../src/record/read-loop';
import { scratchFolder } from '../scratch-folder';
import { smallLoop, writeSmallLoops } from './small-loops';

/** In this thread: worker threads run the built program and are tested with it. */
const audit = (source: string, options: AuditOptions = {}): Promise<Audit> =>
  auditLoops(source, { workers: 0, ...options });

const text = (whole: unknown): string => JSON.stringify(whole, null, 2);

describe('auditLoops', () => {
  const folder = scratchFolder();
  const names = [...writeSmallLoops(folder, 6), 'nothing-31-FC-900.csv', 'words-31-FC-901.csv'].sort();
  writeFileSync(join(folder, 'nothing-31-FC-900.csv'), '');
  writeFileSync(join(folder, 'words-31-FC-901.csv'), smallLoop(0).replace(/(Z,50,)[\d.]+/g, '$1abc'));
  let whole: Audit;
  beforeAll(async () => {
    whole = await audit(folder);
  });

  it('assesses every loop as it would be assessed alone', () => {
    for (const [i, result] of whole.loops.entries()) {
      if (hasFailed(result)) continue;
      expect(result).toEqual(assessLoop(readLoop(join(folder, names[i]!)), { seed: 1 }).assessment);
    }
    expect(whole.loops.map(({ loop }) => loop)).toEqual(names.map((name) => /31-[A-Z]+-\d+/.exec(name)![0]));
  });

  it('makes a failed loop of what cannot be read, with the reason, and no folder in it', () => {
    const failed = whole.loops.filter(hasFailed);
    expect(failed.map(({ loop, file }) => [loop, file])).toEqual([
      ['31-FC-900', 'nothing-31-FC-900.csv'],
      ['31-FC-901', 'words-31-FC-901.csv'],
    ]);
    expect(failed[0]!.error).toBe('The file nothing-31-FC-900.csv is empty.');
    expect(failed[1]!.error).toMatch(/abc/);
    expect(text(whole)).not.toContain(folder);
  });

  it('holds the four fields that other programs read, then cautions and provenance', () => {
    expect(Object.keys(whole)).toEqual(['schema', 'loops', 'groups', 'ranking', 'cautions', 'provenance']);
    expect(whole.schema).toBe('stickband/audit/1');
    expect(whole.provenance).toMatchObject({ options: {}, seed: 1 });
  });

  it('leaves nothing behind without a folder of its own', () => {
    expect(readdirSync(folder).sort()).toEqual(names);
  });

  it('says how far it is, and how long it may take yet', async () => {
    const told: AuditProgress[] = [];
    await audit(folder, { onProgress: (progress) => told.push({ ...progress }) });
    expect(told.map(({ finished }) => finished)).toEqual([0, 1, 2, 3, 4, 5, 6, 7, 8]);
    expect(told[0]).toEqual({
      step: 'assessing',
      finished: 0,
      loops: 8,
      failed: 0,
      share: 0,
      timeLeft: null,
    });
    expect(told[4]!.timeLeft).toBeGreaterThan(0);
    expect(told[8]).toEqual({ step: 'assessing', finished: 8, loops: 8, failed: 2, share: 1, timeLeft: 0 });
  });

  it('resumes: what the journal holds is not done again, and the result is the same', async () => {
    const journal = join(scratchFolder(), 'audit.jsonl');
    const kept = { folder: join(journal, '..') };
    expect(text(await audit(folder, kept))).toBe(text(whole));
    await expect(audit(folder, kept)).rejects.toThrow(/Continue that audit with --resume/);

    const lines = readFileSync(journal, 'utf8').split('\n');
    writeFileSync(journal, `${lines.slice(0, 4).join('\n')}\n${lines[4]!.slice(0, 300)}`);
    const told: AuditProgress[] = [];
    const resumed = await audit(folder, {
      ...kept,
      resume: true,
      onProgress: (one) => told.push({ ...one }),
    });
    expect(text(resumed)).toBe(text(whole));
    expect(told.map(({ finished }) => finished)).toEqual([3, 4, 5, 6, 7, 8]);
    expect(readFileSync(journal, 'utf8').split('\n').sort()).toEqual(lines.sort());
  });

  it('refuses to resume with other loops or options', async () => {
    const kept = { folder: scratchFolder(), resume: true };
    await audit(folder, kept);
    await expect(audit(folder, { ...kept, seed: 2 })).rejects.toThrow(/is that of another audit/);
    await expect(audit(folder, { ...kept, reading: { zone: 'UTC+1' } })).rejects.toThrow(/another audit/);
  });

  it('does failed loops again when it is resumed, and those whose file was changed', async () => {
    const [unit, kept] = [scratchFolder(), { folder: scratchFolder(), resume: true }];
    const [first, second, third] = writeSmallLoops(unit, 3);
    writeFileSync(join(unit, second!), '');
    expect((await audit(unit, kept)).loops.filter(hasFailed)).toHaveLength(1);
    writeFileSync(join(unit, second!), smallLoop(7));
    appendFileSync(join(unit, third!), '2026-03-04T06:00:40Z,50,50.00,40.00\n');
    const told: number[] = [];
    const again = await audit(unit, { ...kept, onProgress: ({ finished }) => told.push(finished) });
    expect(told).toEqual([1, 2, 3]);
    expect(text(again)).toBe(text(await audit(unit)));
    expect(again.loops.map(({ loop }) => `${loop}.csv`)).toEqual([first, second, third]);
  });

  it('shows what is finished as it is, failed loops too, when nothing is to be tried again', async () => {
    const [unit, kept] = [scratchFolder(), { folder: scratchFolder(), resume: true }];
    const [first] = writeSmallLoops(unit, 2);
    writeFileSync(join(unit, first!), '');
    const before = await audit(unit, kept);
    const told: number[] = [];
    const onProgress = ({ finished }: { finished: number }): number => told.push(finished);
    expect(text(await audit(unit, { ...kept, retry: false, onProgress }))).toBe(text(before));
    expect(told).toEqual([]);
    expect(text(await audit(unit, { ...kept, onProgress }))).toBe(text(before));
    expect(told).toEqual([1, 2]);
  });

  it('ranks by another rule when one is stated, without doing a loop again', async () => {
    const kept = { folder: scratchFolder() };
    const rule = { openConfidence: 1 };
    const usual = await audit(folder, kept);
    const told: number[] = [];
    const onProgress = ({ finished }: AuditProgress): number => told.push(finished);
    const other = await audit(folder, { ...kept, resume: true, ranking: rule, onProgress });
    expect(told).toEqual([6, 7, 8]); // the two that failed are tried again
    // The rule of the ranking: the score is proportional to the confidence, which is open here and 0.5 by default.
    for (const { loop, score } of other.ranking) {
      const before = usual.ranking.find((one) => one.loop === loop)!.score;
      expect(Math.abs(score - 2 * before)).toBeLessThanOrEqual(0.15); // scores have one decimal
    }
    expect(other.ranking[0]!.score).toBeGreaterThan(0);
    expect(other.provenance.options).toEqual({ ranking: rule });
    expect(other.loops).toEqual(usual.loops);
  });

  it('calls records with one tag after their files as well', async () => {
    const unit = scratchFolder();
    for (const name of ['31-FC-104 march.csv', '31-FC-104 april.csv', '31-FC-105.csv']) {
      writeFileSync(join(unit, name), smallLoop(1));
    }
    const { loops } = await audit(unit);
    expect(loops.map(({ loop }) => loop)).toEqual([
      '31-FC-104 (31-FC-104 april.csv)',
      '31-FC-104 (31-FC-104 march.csv)',
      '31-FC-105',
    ]);
    const notes = loops.map(
      (one) => !hasFailed(one) && one.record.notes.some(({ code }) => code === 'tag-repeated'),
    );
    expect(notes).toEqual([true, true, false]);
  });

  it('takes what a list states of each loop', async () => {
    const unit = scratchFolder();
    writeSmallLoops(join(unit, 'a'), 1);
    const list = join(unit, 'loops.csv');
    writeFileSync(
      list,
      'file,tag,service,response,pv_low,pv_high\na/31-FC-100.csv,31-LC-7,level,integrating,0,80\nnone.csv,31-FC-8,,,,\n',
    );
    const { loops } = await audit(list);
    expect(loops[0]).toMatchObject({ loop: '31-LC-7', service: 'level', response: 'integrating' });
    expect(loops[1]).toEqual({
      schema: 'stickband/failed-loop/1',
      loop: '31-FC-8',
      file: 'none.csv',
      error: 'There is no file "none.csv". Check the path.',
    });
  });

  it.each([
    [{ wrokers: 2 }, /auditLoops has no option "wrokers"/],
    [{ reading: { tag: 'x' } }, /"reading" of finishLoops has no option "tag"/],
    [{ workers: 1.5 }, /"workers" is a whole number from 0 on\. Received 1\.5/],
    [{ workers: -1 }, /"workers" is a whole number/],
    [{ resume: true }, /State the option "folder"/],
    [{ ranking: { cuase: {} } }, /"rule" of rankLoops has no option "cuase"/],
  ])('refuses the options %j', async (options, sentence) => {
    await expect(auditLoops(folder, options as AuditOptions)).rejects.toThrow(sentence);
  });
});

describe('shards', () => {
  const folder = scratchFolder();
  writeSmallLoops(folder, 12);
  writeFileSync(join(folder, 'empty-31-FC-900.csv'), '');

  it('merge to what one run gives, byte for byte, in any order and from files', async () => {
    for (const of of [1, 2, 5]) {
      const parts = [];
      for (let shard = of; shard > 0; shard--) {
        const run = await finishLoops(folder, { shard, of }, { workers: 0 });
        parts.push(JSON.parse(text(partOf(run))));
      }
      expect(parts.reduce((sum, { loops }) => sum + loops.length, 0)).toBe(13);
      expect(text(mergeAudits(parts))).toBe(text(await audit(folder)));
    }
  });

  it('may have no loop', async () => {
    const one = scratchFolder();
    writeSmallLoops(one, 1);
    const runs = await Promise.all(
      [1, 2, 3].map((shard) => finishLoops(one, { shard, of: 3 }, { workers: 0 })),
    );
    expect(runs.map(({ loops }) => loops.length).sort()).toEqual([0, 0, 1]);
    expect(text(mergeAudits(runs.map(partOf)))).toBe(text(await audit(one)));
  });

  it('keep a journal each, side by side', async () => {
    const kept = { folder: scratchFolder(), workers: 0 };
    await finishLoops(folder, { shard: 1, of: 2 }, kept);
    await finishLoops(folder, { shard: 2, of: 2 }, kept);
    expect(readdirSync(kept.folder).sort()).toEqual(['audit-part-1-of-2.jsonl', 'audit-part-2-of-2.jsonl']);
    const again = await finishLoops(folder, { shard: 2, of: 2 }, { ...kept, resume: true });
    expect(again.loops.every(({ order }) => order < 13)).toBe(true);
    expect(auditOf(again).loops).toHaveLength(again.loops.length);
  });

  it('refuses a shard that there is not', async () => {
    await expect(finishLoops(folder, { shard: 3, of: 2 }, {})).rejects.toThrow(/Received 3\/2/);
  });
});

describe('the journal of an audit', () => {
  it('that cannot be written ends the audit before a loop is read', async () => {
    const unit = scratchFolder();
    writeSmallLoops(unit, 1);
    writeFileSync(join(unit, 'file'), '');
    await expect(audit(unit, { folder: join(unit, 'file', 'out') })).rejects.toThrow(/cannot be written/);
    mkdirSync(join(unit, 'out', 'audit.jsonl'), { recursive: true });
    await expect(audit(unit, { folder: join(unit, 'out') })).rejects.toThrow(/cannot be written/);
    rmSync(join(unit, 'out'), { recursive: true });
    expect(existsSync(join(unit, 'out'))).toBe(false);
  });
});
