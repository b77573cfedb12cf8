/**
 * The sets of the accuracy suite and their cache. The estimator is worked on with the development set alone; `weighing`
 * goes with it into the weights of the cause (`weigh.ts`); the reported set has other seeds and is run only to report.
 */
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { deserialize, serialize } from 'node:v8';
import { type AccuracyCase, makeCase } from './generate';

export type SetName = 'development' | 'weighing' | 'reported';

export const SETS: Record<SetName, { seed: number; stiction: number; other: number }> = {
  development: { seed: 11_000_000, stiction: 320, other: 207 },
  weighing: { seed: 23_000_000, stiction: 300, other: 300 },
  reported: { seed: 47_000_000, stiction: 320, other: 207 },
};

const root = join(__dirname, '../..');

/** Everything that a case is made of: another text of one of these makes new cases. */
const SOURCES = [
  'src/signal/random.ts',
  'src/valve/friction-law.ts',
  'src/valve/stem.ts',
  'src/valve/positioner-stem.ts',
  'src/valve/characteristic.ts',
  'src/valve/two-parameter.ts',
  'src/process/linear-process.ts',
  'src/process/controller.ts',
  'src/process/disturbance.ts',
  'src/process/closed-loop.ts',
  'data/make/truth.ts',
  'tests/accuracy/draw.ts',
  'tests/accuracy/plant.ts',
  'tests/accuracy/assembly.ts',
  'tests/accuracy/compress.ts',
  'tests/accuracy/generate.ts',
];

let folder: string | null = null;

function cacheFolder(): string {
  if (folder === null) {
    const hash = createHash('sha256');
    for (const source of SOURCES) hash.update(readFileSync(join(root, source)));
    folder = join(root, '.cache/accuracy', hash.digest('hex').slice(0, 16));
    mkdirSync(folder, { recursive: true });
  }
  return folder;
}

/** One case, from the cache when it was made before. */
export function loadCase(set: SetName, group: 'stiction' | 'other', index: number): AccuracyCase {
  const file = join(cacheFolder(), `${set}-${group}-${index}.bin`);
  if (existsSync(file)) return deserialize(readFileSync(file));
  const made = makeCase(group, SETS[set].seed, index);
  // Written under another name first, so that a run cut short leaves no half file.
  writeFileSync(`${file}.${process.pid}`, serialize(made));
  renameSync(`${file}.${process.pid}`, file);
  return made;
}

/** All cases of a set, stiction first; with `atMost`, the first so many of each group. */
export function* casesOf(
  set: SetName,
  atMost: number = Number.POSITIVE_INFINITY,
): Generator<AccuracyCase, void, undefined> {
  for (const group of ['stiction', 'other'] as const) {
    for (let index = 0; index < Math.min(atMost, SETS[set][group]); index++)
      yield loadCase(set, group, index);
  }
}
