/** Exports of many loops, audited through a map: one pass over the export, then as a folder of single files. */
import { existsSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { type Audit, hasFailed } from '../../src/audit/audit';
import { type AuditProgress, auditLoops, finishLoops, partOf } from '../../src/audit/audit-loops';
import { mergeAudits } from '../../src/audit/merge-audits';
import { draftMap } from '../../src/audit/sources/draft-map';
import { mapText } from '../../src/audit/sources/read-map';
import { captured } from '../cli/captured';
import { scratchFolder } from '../scratch-folder';
import { smallLoop } from './small-loops';

const folder = scratchFolder();
const tags = ['31-FC-100', '31-LC-101', '31-PC-102', '31-TC-103', '31-FC-104'];
const variants = tags.map((_, i) => smallLoop(i, 60).trim().split('\n').slice(1));

/** The same loops as single files and as one wide export. */
const files = scratchFolder();
for (const [i, tag] of tags.entries()) writeFileSync(join(files, `${tag}.csv`), smallLoop(i, 60));
const wide = join(folder, 'wide.csv');
const header = tags.flatMap((tag) => ['SP', 'PV', 'OP'].map((role) => `${tag}.${role}`));
const lines = variants[0]!.map((line, row) => [
  line.split(',')[0],
  ...variants.flatMap((rows) => rows[row]!.split(',').slice(1)),
]);
writeFileSync(wide, `${[['time', ...header], ...lines].map((cells) => cells.join(',')).join('\n')}\n`);

const text = (whole: unknown): string => JSON.stringify(whole, null, 2);

/** A drafted map, changed as text. */
async function map(name: string, change: (text: string) => string = (same) => same): Promise<string> {
  const path = join(folder, name);
  writeFileSync(path, change(mapText(await draftMap(wide))));
  return path;
}

describe('an export audited with the map that was drafted of it', () => {
  it('gives the results of the same loops in files of their own', async () => {
    const told: AuditProgress[] = [];
    const onProgress = (one: AuditProgress): number => told.push({ ...one });
    const whole = await auditLoops(wide, { map: await map('map.csv'), workers: 0, onProgress });
    const single = await auditLoops(files, { workers: 0 });
    const results = ({ loops }: Audit): unknown[] =>
      loops
        .map((one) =>
          hasFailed(one) ? one : { ...one, record: { ...one.record, source: '', sha256: '', notes: [] } },
        )
        .sort((a, b) => (a.loop < b.loop ? -1 : 1));
    expect(results(whole)).toEqual(results(single));
    expect(told[0]!.step).toBe('reading the export');
    expect(told.at(-1)).toMatchObject({ step: 'assessing', finished: 5, share: 1 });
  });

  it('is resumed, merged from shards, and leaves no columns of the export behind', async () => {
    const options = { map: await map('again.csv'), workers: 0 };
    const whole = text(await auditLoops(wide, options));
    const out = scratchFolder();
    await auditLoops(wide, { ...options, folder: out });
    const journal = join(out, 'audit.jsonl');
    writeFileSync(journal, readFileSync(journal, 'utf8').split('\n').slice(0, 3).join('\n'));
    expect(text(await auditLoops(wide, { ...options, folder: out, resume: true }))).toBe(whole);
    expect(readdirSync(out)).toEqual(['audit.jsonl']);

    const shards = [1, 2].map((shard) => finishLoops(wide, { shard, of: 2 }, { ...options, folder: out }));
    expect(text(mergeAudits((await Promise.all(shards)).map(partOf)))).toBe(whole);
    expect(readdirSync(out).sort()).toEqual([
      'audit-part-1-of-2.jsonl',
      'audit-part-2-of-2.jsonl',
      'audit.jsonl',
    ]);
  });

  it('lets a loop fail alone of which the map leaves OP open, in a shard with nothing else too', async () => {
    const options = {
      map: await map('open.csv', (drafted) => drafted.replace('31-TC-103.OP', '')),
      workers: 0,
    };
    const whole = await auditLoops(wide, options);
    expect(whole.loops.filter(hasFailed)).toEqual([
      {
        schema: 'stickband/failed-loop/1',
        loop: '31-TC-103',
        file: 'wide.csv',
        error: expect.stringMatching(/The map does not say which column is OP of 31-TC-103/),
      },
    ]);
    const shards = await Promise.all(
      Array.from({ length: 20 }, (_, i) => finishLoops(wide, { shard: i + 1, of: 20 }, options)),
    );
    expect(text(mergeAudits(shards.map(partOf)))).toBe(text(whole));
  });
});

describe('stickband audit EXPORT', () => {
  it('drafts a map, and audits with it', async () => {
    const [drafted, out] = [join(folder, 'drafted.csv'), join(folder, 'out')];
    expect((await captured('audit', wide, '--draft-map', drafted)).code).toBe(0);
    const words = ['--workers', '0', '--out', out, '--no-notebook'];
    const { code, stdout } = await captured('audit', wide, '--map', drafted, ...words);
    expect(code).toBe(0);
    expect(stdout).toMatch(/^5 loops: 5 cannot-tell\./);
    expect(readdirSync(out).sort()).toEqual(['audit.csv', 'audit.json', 'audit.jsonl']);
  });

  it('refuses a map with mistakes before anything is assessed', async () => {
    const wrong = await map('wrong.csv', (drafted) => drafted.replace('31-TC-103.OP', '31-TC-103.OUT'));
    const out = join(folder, 'refused');
    const words = ['--workers', '0', '--out', out, '--no-notebook'];
    const { code, stderr } = await captured('audit', wide, '--map', wrong, ...words);
    expect(code).toBe(2);
    expect(stderr).toMatch(/31-TC-103\.OUT/);
    expect(existsSync(join(out, 'audit.json'))).toBe(false);
  });
});
