/** The rivals of the fast search: plain C, compiled here, and NumPy, each where the machine has it. */
import { spawnSync } from 'node:child_process';
import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { layOut, type Problem, VARIANTS } from './problem';

export interface Rival {
  readonly name: string;
  run(problem: Problem): BruteForce;
}

/** What the search over everything gives. */
export interface BruteForce {
  readonly seconds: number;
  /** Best misfit over all lags and dead times: `misfits[variant][i]` is that of pair i of the problem. */
  readonly misfits: readonly Float64Array[];
}

/** On one core, as the fast search is. */
const ONE_CORE = { OMP_NUM_THREADS: '1', OPENBLAS_NUM_THREADS: '1', MKL_NUM_THREADS: '1' };
const MOST_OUTPUT = 64 * 1024 * 1024;

/** Plain C with these flags; null without a compiler. */
export function compileRival(flags: readonly string[]): Rival | null {
  const compiler = [process.env.CC, 'cc', 'gcc', 'clang'].find(
    (name) => name && spawnSync(name, ['--version']).status === 0,
  );
  if (!compiler) return null;
  const folder = join(__dirname, '../../.cache/speed');
  mkdirSync(folder, { recursive: true });
  const program = join(folder, `brute-force${flags.join('')}`);
  const run = spawnSync(compiler, [...flags, '-o', program, join(__dirname, 'brute-force.c')], {
    encoding: 'utf8',
  });
  if (run.status !== 0) throw new Error(`The compiler failed: ${run.stderr}`);
  return { name: `C ${flags.join(' ')}`, run: (problem) => answerOf(program, [], problem) };
}

/** NumPy; null where no Python has it. */
export function numpyRival(): Rival | null {
  const python = ['python3', '/usr/bin/python3', 'python'].find(
    (name) => spawnSync(name, ['-c', 'import numpy']).status === 0,
  );
  if (!python) return null;
  return {
    name: 'NumPy',
    run: (problem) => answerOf(python, [join(__dirname, 'brute-force.py')], problem),
  };
}

function answerOf(program: string, words: readonly string[], problem: Problem): BruteForce {
  const run = spawnSync(program, words, {
    input: new Uint8Array(layOut(problem).buffer),
    encoding: 'utf8',
    maxBuffer: MOST_OUTPUT,
    env: { ...process.env, ...ONE_CORE },
  });
  if (run.status !== 0) throw new Error(`${program} failed: ${run.stderr}`);
  const lines = run.stdout.trim().split('\n');
  const misfits = VARIANTS.map(() => new Float64Array(problem.pairs.length));
  for (const line of lines.slice(0, -1)) {
    const [variant, pair, misfit] = line.split(' ').map(Number);
    misfits[variant][pair] = misfit;
  }
  return { seconds: Number(lines[lines.length - 1]), misfits };
}
