/** The audit as it is run: the built program with its worker threads, killed, short of memory, and resumed. */
import { execFileSync, spawn, spawnSync } from 'node:child_process';
import { existsSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { setTimeout } from 'node:timers/promises';
import { beforeAll, describe, expect, it, vi } from 'vitest';
import { type Audit, hasFailed } from '../../src/audit/audit';
import { auditLoops } from '../../src/audit/audit-loops';
import { seededRandom } from '../../src/signal/random';
import { csv, rows } from '../record/export-file';
import { scratchFolder } from '../scratch-folder';
import { writeSmallLoops } from './small-loops';

const program = join('dist', 'cli', 'main.js');

/** ms; each run starts Node and its workers, which a busy machine makes slow. */
vi.setConfig({ testTimeout: 300_000 });

beforeAll(() => {
  execFileSync(process.execPath, [join('.ci', 'build.cjs')]);
});

/** Runs the audit until it ends, or until `killed` comes true and it is killed. True when it ended by itself. */
async function run(
  words: readonly string[],
  killed: () => Promise<void> = () => new Promise(() => {}),
): Promise<boolean> {
  const child = spawn(process.execPath, [program, 'audit', ...words, '--no-notebook'], {
    stdio: ['ignore', 'ignore', 'pipe'],
  });
  let said = '';
  child.stderr.on('data', (piece) => {
    said += piece;
  });
  const ended = new Promise<{ code: number | null; signal: string | null }>((resolve) => {
    child.on('close', (code, signal) => resolve({ code, signal }));
  });
  void killed().then(() => child.kill('SIGKILL'));
  const { code, signal } = await ended;
  if (signal === 'SIGKILL') return false;
  expect(said, `exit code ${code}`).not.toMatch(/fault|journal/);
  expect(code).toBe(0);
  return true;
}

const auditIn = (out: string): string => readFileSync(join(out, 'audit.json'), 'utf8');
const loopsIn = (out: string): number => {
  const journal = join(out, 'audit.jsonl');
  return existsSync(journal) ? readFileSync(journal, 'utf8').split('\n').length - 2 : 0;
};

describe('an audit killed with SIGKILL', () => {
  it('at a random moment, twenty times, and then resumed, equals one that was not', async () => {
    const unit = join(scratchFolder(), 'unit');
    writeSmallLoops(unit, 60);
    writeFileSync(join(unit, 'empty-31-FC-900.csv'), '');
    const undisturbed = scratchFolder();
    const start = performance.now();
    expect(await run([unit, '--out', undisturbed])).toBe(true);
    const usual = performance.now() - start;

    const random = seededRandom(20);
    let kills = 0;
    let killedInTheMiddle = 0;
    for (let out = scratchFolder(); kills < 20; ) {
      const ended = await run([unit, '--out', out, '--resume'], () =>
        setTimeout((0.2 + 0.8 * random.uniform()) * usual),
      );
      if (ended) {
        expect(auditIn(out)).toBe(auditIn(undisturbed));
        out = scratchFolder();
        continue;
      }
      kills++;
      if (loopsIn(out) > 0) killedInTheMiddle++;
      if (kills === 20) {
        expect(await run([unit, '--out', out, '--resume'])).toBe(true);
        expect(auditIn(out)).toBe(auditIn(undisturbed));
      }
    }
    expect(killedInTheMiddle).toBeGreaterThan(3); // else this test tested nothing
  });

  it('with real loops: what was finished is kept, and the result equals that of one thread', async () => {
    const unit = scratchFolder();
    for (const name of ['31-FC-104', '31-PC-122', '31-FC-131', '31-LC-140']) {
      const lines = readFileSync(join('data', `${name}.csv`), 'utf8').split('\n');
      writeFileSync(join(unit, `${name}.csv`), `${lines.slice(0, 1201).join('\n')}\n`);
    }
    const out = scratchFolder();
    const someDone = async (): Promise<void> => {
      while (loopsIn(out) < 1) await setTimeout(5);
    };
    expect(await run([unit, '--out', out, '--workers', '2'], someDone)).toBe(false);
    const before = statSync(join(out, 'audit.jsonl')).size;
    expect(await run([unit, '--out', out, '--resume'])).toBe(true);
    expect(statSync(join(out, 'audit.jsonl')).size).toBeGreaterThan(before);
    const whole: Audit = JSON.parse(auditIn(out));
    expect(whole).toEqual(JSON.parse(JSON.stringify(await auditLoops(unit, { workers: 0 }))));
    expect(whole.loops.filter(hasFailed)).toEqual([]);
  });
});

/** What the README shows, run as printed but for the way to the program. */
describe('the shards of the README', () => {
  const readme = readFileSync('README.md', 'utf8');
  const unit = scratchFolder();
  const names = writeSmallLoops(join(unit, 'loops'), 20);
  writeFileSync(join(unit, 'loops.csv'), `file\n${names.map((name) => `loops/${name}\n`).join('')}`);

  /** Runs a line with a shell in the folder of the unit. */
  const shell = async (line: string, env: Record<string, string> = {}): Promise<number | null> => {
    const command = line.replace('npx --no stickband', `"${process.execPath}" "${resolve(program)}"`);
    expect(command).not.toBe(line);
    const child = spawn('sh', ['-c', command], {
      cwd: unit,
      env: { ...process.env, ...env },
      stdio: 'ignore',
    });
    return new Promise((ended) => {
      child.on('close', ended);
    });
  };
  const shards = [1, 2, 3, 4, 5, 6, 7, 8];
  const parts = (): string[] =>
    shards.map((shard) => readFileSync(join(unit, 'parts', `audit-part-${shard}-of-8.json`), 'utf8'));

  it.each<[string, RegExp, (shard: number) => Record<string, string>]>([
    ['Slurm', /--wrap '(.*)'/, (shard) => ({ SLURM_ARRAY_TASK_ID: String(shard) })],
    ['Kubernetes', /args: \['(.*)'\]/, (shard) => ({ JOB_COMPLETION_INDEX: String(shard - 1) })],
  ])('merge to the audit of one run: %s', async (_, pattern, environment) => {
    rmSync(join(unit, 'parts'), { recursive: true, force: true });
    const line = pattern.exec(readme)![1]!;
    const codes = await Promise.all(shards.map((shard) => shell(`${line} --workers 1`, environment(shard))));
    expect(codes).toEqual(shards.map(() => 0));
    expect(parts().reduce((sum, part) => sum + JSON.parse(part).loops.length, 0)).toBe(20);
    expect(await shell(/^npx --no stickband merge .*$/m.exec(readme)![0])).toBe(0);
    const whole = await auditLoops(join(unit, 'loops.csv'), { workers: 0 });
    expect(readFileSync(join(unit, 'audit.json'), 'utf8')).toBe(`${JSON.stringify(whole, null, 2)}\n`);
  });
});

it('a loop that takes more memory than its worker may have fails alone', () => {
  const unit = scratchFolder();
  writeSmallLoops(unit, 4);
  const piece = csv(rows(20_000)).split('\n').slice(1).join('\n');
  writeFileSync(join(unit, '31-FC-900.csv'), `time,SP,PV,OP\n${`${piece}\n`.repeat(40)}`);
  const words = ['--max-old-space-size=100', program, 'audit', unit, '--workers', '2', '--json', '-'];
  const { status, stdout, stderr } = spawnSync(process.execPath, words, { encoding: 'utf8', maxBuffer: 1e8 });
  expect(stderr).toMatch(
    /^1 of 5 loops failed:\n {2}31-FC-900 \(31-FC-900\.csv\): The memory of one worker was not enough/,
  );
  expect(status).toBe(0);
  const { loops } = JSON.parse(stdout) as Audit;
  expect(loops.filter(hasFailed).map(({ loop }) => loop)).toEqual(['31-FC-900']);
  expect(loops).toHaveLength(5);
});
