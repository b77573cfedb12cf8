import { appendFileSync, existsSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import type { FinishedLoop } from '../../src/audit/audit';
import { type AuditIdentity, Journal } from '../../src/audit/journal';
import { scratchFolder } from '../scratch-folder';

const identity: AuditIdentity = {
  shard: 1,
  of: 1,
  allLoops: 3,
  listed: 'a'.repeat(64),
  provenance: { version: '1.2.3', options: {}, seed: 1 },
};

const failed = (order: number, error = 'No OP.'): FinishedLoop => ({
  order,
  file: `${order}.csv`,
  result: { schema: 'stickband/failed-loop/1', loop: `T${order}`, file: `${order}.csv`, error },
  signature: null,
});

const newPath = (): string => join(scratchFolder(), 'deeper', 'audit.jsonl');

/** Path of a journal with these loops in it. */
function written(...loops: FinishedLoop[]): string {
  const path = newPath();
  const journal = Journal.open(path, identity, false);
  for (const loop of loops) journal.add(loop, '10 1');
  journal.close();
  return path;
}

function reopened(path: string): FinishedLoop[] {
  const journal = Journal.open(path, identity, true);
  const loops = journal.finished();
  expect([...journal.entries.keys()].sort()).toEqual(loops.map(({ order }) => order));
  journal.close();
  return loops;
}

describe('Journal', () => {
  it('gives back what was added, in the order of the audit, with texts of any kind', () => {
    const odd = 'Ränge\u2028\r\n"°C" \u{1F6E0}';
    expect(reopened(written(failed(2, odd), failed(0), failed(1)))).toEqual([
      failed(0),
      failed(1),
      failed(2, odd),
    ]);
  });

  it('holds one line of JSON for each loop below a line that says which audit it is', () => {
    const lines = readFileSync(written(failed(0), failed(1)), 'utf8').split('\n');
    expect(lines.map((line) => line && Object.keys(JSON.parse(line)))).toEqual([
      ['schema', 'shard', 'of', 'allLoops', 'listed', 'provenance'],
      ['stamp', 'loop'],
      ['stamp', 'loop'],
      '',
    ]);
  });

  it('loses at most the last line wherever the file is cut off, and can be continued from there', () => {
    const whole = readFileSync(written(failed(0), failed(1), failed(2, 'Grüße')));
    const ends = [...whole.keys()].filter((i) => whole[i] === 0x0a).map((i) => i + 1);
    // Around every end of a line, and in steps between.
    const lengths = [...Array(whole.length + 1).keys()].filter(
      (length) => length % 11 === 0 || [0, ...ends].some((end) => Math.abs(length - end) < 4),
    );
    for (const length of lengths) {
      const path = join(scratchFolder(), 'audit.jsonl');
      writeFileSync(path, whole.subarray(0, length));
      const left = Math.max(0, ends.filter((end) => end <= length).length - 1);
      const journal = Journal.open(path, identity, left > 0 || length >= ends[0]!);
      expect(journal.entries.size).toBe(left);
      for (let order = left; order < 3; order++)
        journal.add(order < 2 ? failed(order) : failed(2, 'Grüße'), '10 1');
      journal.close();
      expect(readFileSync(path)).toEqual(whole);
    }
  });

  it('reads lines longer than the pieces it reads in', () => {
    const loops = [failed(0, 'x'.repeat(200_000)), failed(1, 'é'.repeat(70_000)), failed(2)];
    expect(reopened(written(...loops))).toEqual(loops);
  });

  it('takes the last line of a loop that was done again, and leaves out a damaged one', () => {
    const path = written(failed(0, 'first'), failed(1));
    appendFileSync(path, '\0\0\0\0\n');
    const journal = Journal.open(path, identity, true);
    journal.add(failed(0, 'second'), '11 1');
    expect(journal.entries.get(0)).toEqual({ stamp: '11 1', failed: true });
    journal.close();
    expect(reopened(path)).toEqual([failed(0, 'second'), failed(1)]);
  });

  it('is not begun again over another, and says what to do', () => {
    const path = written(failed(0));
    const before = readFileSync(path);
    expect(() => Journal.open(path, identity, false)).toThrow(
      /has the journal of an audit \(audit\.jsonl\) in it\. Continue that audit with --resume, name another folder with --out, or delete audit\.jsonl/,
    );
    expect(readFileSync(path)).toEqual(before);
  });

  it.each([
    ['list', { listed: 'b'.repeat(64) }],
    ['shard', { shard: 2, of: 2 }],
    ['version', { provenance: { version: '1.2.4', options: {}, seed: 1 } }],
    ['seed', { provenance: { version: '1.2.3', options: {}, seed: 2 } }],
    ['options', { provenance: { version: '1.2.3', options: { zone: 'UTC' }, seed: 1 } }],
  ])('refuses to continue an audit with another %s', (_, change) => {
    const path = written(failed(0));
    expect(() => Journal.open(path, { ...identity, ...change }, true)).toThrow(
      /is that of another audit: .*version \(1\.2\.3\) differs/,
    );
  });

  it('leaves a file alone that is no journal', () => {
    const path = join(scratchFolder(), 'audit.jsonl');
    writeFileSync(path, 'file,tag\na.csv,T1');
    expect(() => Journal.open(path, identity, true)).toThrow(/is no journal of an audit/);
    expect(readFileSync(path, 'utf8')).toBe('file,tag\na.csv,T1');
  });

  it('says when it cannot be written', () => {
    const path = join('package.json', 'audit.jsonl');
    expect(() => Journal.open(path, identity, false)).toThrow(/cannot be written .*--out/s);
    expect(existsSync(path)).toBe(false);
  });
});
