import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import Ajv from 'ajv';
import { describe, expect, it } from 'vitest';
import ofAssessment from '../../src/assessment/assessment.schema.json';
import { cautions } from '../../src/assessment/cautions';
import type { Audit, AuditPart } from '../../src/audit/audit';
import ofAudit from '../../src/audit/audit.schema.json';
import { run } from '../../src/cli/run';
import { smallLoop, writeSmallLoops } from '../audit/small-loops';
import { scratchFolder } from '../scratch-folder';
import { type Captured, captured } from './captured';

/** Without threads and notebook: these run the built program, and are tested with it. */
const audit = (...words: string[]): Promise<Captured> =>
  captured('audit', ...words, '--workers', '0', '--no-notebook');

const plain = (text: string): string => text.replace(/\s+/g, ' ');

describe('stickband audit', () => {
  const unit = join(scratchFolder(), 'unit 31');
  writeSmallLoops(unit, 4);
  writeFileSync(join(unit, '31-FC-900.csv'), '');
  writeFileSync(join(unit, 'notes.md'), 'Not a loop.');

  it('writes journal and audit into the folder, and a summary with every caution on stdout', async () => {
    const out = join(scratchFolder(), 'deeper', 'out');
    const json = join(out, '..', 'also.json');
    const { code, stdout, stderr } = await audit(unit, '--out', out, '--json', json);
    expect(code).toBe(0);
    expect(readdirSync(out).sort()).toEqual(['audit.csv', 'audit.json', 'audit.jsonl']);
    expect(readFileSync(json, 'utf8')).toBe(readFileSync(join(out, 'audit.json'), 'utf8'));
    expect(stdout).toMatch(/^5 loops: 4 cannot-tell, 1 failed\.\n/);
    for (const caution of cautions) expect(plain(stdout)).toContain(caution);
    expect(stdout).toContain(`Numbers (JSON): ${resolve(json)}`);
    expect(stderr).toBe(
      'Left out, as their kind holds no single loop: notes.md.\n' +
        '1 of 5 loops failed:\n  31-FC-900 (31-FC-900.csv): The file 31-FC-900.csv is empty.\n',
    );
  });

  it('puts JSON alone on stdout, keeps no file, and gives the same bytes again', async () => {
    const first = await audit(unit, '--json', '-');
    expect(first.code).toBe(0);
    const answer = JSON.parse(first.stdout) as Audit;
    expect([answer.schema, answer.loops.length]).toEqual(['stickband/audit/1', 5]);
    const ajv = new Ajv({ allErrors: true, strict: true, allowUnionTypes: true });
    const validate = ajv.addSchema(ofAssessment, '../assessment/assessment.schema.json').compile(ofAudit);
    validate(answer);
    expect(validate.errors ?? []).toEqual([]);
    expect(first.stdout).not.toContain(unit);
    expect(first.stderr).toContain('1 of 5 loops failed');
    expect(plain(first.stderr)).toContain(cautions[0]);
    expect(existsSync(join('notebooks', 'rendered', 'audit-unit-31'))).toBe(false);
    expect((await audit(unit, '--json', '-')).stdout).toBe(first.stdout);
  });

  it('does not begin over a journal, but resumes it', async () => {
    const out = scratchFolder();
    expect((await audit(unit, '--out', out)).code).toBe(0);
    const before = readFileSync(join(out, 'audit.json'), 'utf8');
    const refused = await audit(unit, '--out', out);
    expect(refused).toMatchObject({ code: 2, stdout: '' });
    expect(refused.stderr).toMatch(/Continue that audit with --resume/);
    expect(refused.stderr.trim().split('\n')).toHaveLength(1);
    expect((await audit(unit, '--out', out, '--resume')).code).toBe(0);
    expect(readFileSync(join(out, 'audit.json'), 'utf8')).toBe(before);
  });

  it('runs shards side by side, which merge to the same bytes', async () => {
    const out = scratchFolder();
    const whole = await audit(unit, '--json', '-');
    for (const shard of ['1/2', '2/2']) {
      const { code, stdout } = await audit(unit, '--out', out, '--shard', shard);
      expect(code).toBe(0);
      expect(stdout).toMatch(new RegExp(`^Shard ${shard[0]} of 2: \\d of 5 loops\\.`));
    }
    const parts = [1, 2].map((shard) => join(out, `audit-part-${shard}-of-2.json`));
    const read = parts.map((part) => JSON.parse(readFileSync(part, 'utf8')) as AuditPart);
    expect(read.map(({ schema, shard, of }) => [schema, shard, of])).toEqual([
      ['stickband/audit-part/1', 1, 2],
      ['stickband/audit-part/1', 2, 2],
    ]);
    expect(read[0]!.cautions).toEqual(cautions);
    const merged = await captured('merge', ...parts.reverse(), '--json', '-');
    expect(merged.code).toBe(0);
    expect(merged.stdout).toBe(whole.stdout);
    expect(plain(merged.stderr)).toContain(cautions[0]);

    const json = join(out, 'merged', 'audit.json');
    const written = await captured('merge', ...parts, '--json', json);
    expect(readFileSync(json, 'utf8')).toBe(whole.stdout);
    expect(written.stdout).toMatch(/^5 loops: 4 cannot-tell, 1 failed\./);

    const folder = join(out, 'with-sheet');
    expect((await captured('merge', ...parts, '--out', folder, '--no-notebook')).code).toBe(0);
    expect(readdirSync(folder).sort()).toEqual(['audit.csv', 'audit.json']);
    expect(readFileSync(join(folder, 'audit.json'), 'utf8')).toBe(whole.stdout);
  });

  it('applies to all files what is stated of them', async () => {
    const odd = scratchFolder();
    writeFileSync(join(odd, '31-FC-104.csv'), smallLoop(1).replace('time,SP,PV,OP', 'when,SP,PV,MV'));
    const { loops } = JSON.parse(
      (await audit(odd, '--json', '-', '--time', 'when', '--op', 'MV', '--seed', '7')).stdout,
    );
    expect(loops[0]).toMatchObject({ loop: '31-FC-104', provenance: { seed: 7 } });
  });

  it('shows on a terminal how many loops are done and how long it may take', async () => {
    let shown = '';
    const write = (text: string): boolean => {
      shown += text;
      return true;
    };
    // What cli-progress asks of a terminal.
    const stderr = {
      isTTY: true,
      columns: 120,
      write,
      cursorTo() {},
      clearLine() {},
      moveCursor() {},
      on() {},
    };
    await run(['audit', unit, '--workers', '0', '--json', '-'], {
      stdout: { write: () => true },
      stderr: Object.assign(stderr, { once() {}, removeListener() {} }),
    });
    expect(shown).toMatch(/% {2}\d of 5 loops/);
  });

  it('says where --pages cannot be had', async () => {
    const out = scratchFolder();
    expect((await audit(unit, '--out', out, '--pages', '2')).stderr).toMatch(
      /not with --no-notebook, not for a shard/,
    );
    const withMap = await captured('audit', unit, '--map', 'map.csv', '--pages', '2', '--out', out);
    expect(withMap).toMatchObject({
      code: 2,
      stderr: expect.stringMatching(/--pages needs one file a loop/),
    });
    expect(readdirSync(out)).toEqual([]);
  });

  it.each([
    [[], /takes one FOLDER, LIST or EXPORT; none was received/],
    [['a', 'b'], /received were a, b/],
    [['nowhere'], /There is no file or folder "nowhere"/],
    [['data/31-FC-104.csv'], /neither a folder nor a list.*--draft-map/],
    [['data', '--map', 'map.csv'], /is a folder\. A map goes with one export/],
    [['data', '--shard', '2'], /--shard takes i\/n, e\.g\. --shard 2\/8; "2" was received/],
    [['data', '--shard', '3/2'], /Received 3\/2/],
    [['data', '--out', 'data/'], /cannot lie among its loops\. Name another folder with --out/],
    [['data', '--out', join('package.json', 'out')], /journal .* cannot be written/],
    [['data', '--seed', '1.5'], /A seed must be an integer\. Received 1\.5/],
    [['data', '--zone', 'Nowhere'], /The zone "Nowhere" is not known/],
  ])('answers wrong use %j with exit code 2 and a sentence', async (words, sentence) => {
    const out = words.includes('--out') ? [] : ['--out', join(scratchFolder(), 'out')];
    const { code, stdout, stderr } = await audit(...words, ...out);
    expect(code).toBe(2);
    expect(stdout).toBe('');
    expect(stderr).toMatch(sentence);
  });

  it('takes a whole number of workers', async () => {
    expect((await captured('audit', unit, '--workers', '1.5')).stderr).toMatch(
      /--workers takes a whole number from 0 on; "1\.5"/,
    );
  });

  it('tells the mistakes of a list before anything is assessed', async () => {
    const list = join(scratchFolder(), 'loops.csv');
    writeFileSync(list, 'file,service\na.csv,flux\n');
    const out = join(scratchFolder(), 'out');
    const { code, stderr } = await audit(list, '--out', out);
    expect(code).toBe(2);
    expect(stderr).toMatch(/The list loops\.csv cannot be used: line 2: "service" is one of/);
    expect(existsSync(out)).toBe(false);
  });
});

describe('stickband merge', () => {
  const folder = scratchFolder();
  mkdirSync(join(folder, 'sub'));
  writeFileSync(join(folder, 'words.json'), 'no JSON');
  writeFileSync(join(folder, 'audit.json'), '{"schema":"stickband/audit/1"}');

  it.each([
    [['--json', '-'], /takes the parts of one audit; none was received/],
    [['a.json'], /needs --json FILE, or --json - for stdout, or --out DIR/],
    [
      [join(folder, 'none.json'), '--json', '-'],
      /The part ".*none\.json" cannot be read: there is no such file/,
    ],
    [[join(folder, 'sub'), '--json', '-'], /cannot be read/],
    [[join(folder, 'words.json'), '--json', '-'], /is no part of an audit.*--shard i\/n/],
    [[join(folder, 'audit.json'), '--json', '-'], /is no part of an audit/],
  ])('answers wrong use %j with exit code 2 and a sentence', async (words, sentence) => {
    const { code, stdout, stderr } = await captured('merge', ...words);
    expect(code).toBe(2);
    expect(stdout).toBe('');
    expect(stderr).toMatch(sentence);
  });
});
