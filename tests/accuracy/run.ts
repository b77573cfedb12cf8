/**
 * Measures the program on a whole set of cases: `npm run accuracy -- [--set development|reported] [--at-most N]
 * [--workers N] [--json FILE]`. Prints the score, writes it with the row of every case as JSON.
 */
import { type ChildProcess, fork } from 'node:child_process';
import { mkdirSync, writeFileSync } from 'node:fs';
import { availableParallelism } from 'node:os';
import { dirname, join, resolve } from 'node:path';
import { parseArgs } from 'node:util';
import { startProgress } from '../../src/cli/progress';
import { wholeOption } from '../command-options';
import { type Outcome, outcomeOf } from './outcome';
import { printScore } from './print';
import { scoreOutcomes } from './score';
import { loadCase, SETS, type SetName } from './sets';
import { targetsOf } from './targets';

interface Task {
  readonly set: SetName;
  readonly group: 'stiction' | 'other';
  readonly index: number;
}

/** Cases between two lines of progress where there is no terminal. */
const PROGRESS_EVERY = 20;

if (process.send) answerTasks();
else void measure();

/** What a worker does: one case for each task it is sent. */
function answerTasks(): void {
  process.on('message', ({ set, group, index }: Task) => {
    process.send?.(outcomeOf(loadCase(set, group, index)));
  });
}

async function measure(): Promise<void> {
  const { values } = parseArgs({
    options: {
      set: { type: 'string', default: 'reported' },
      'at-most': { type: 'string' },
      workers: { type: 'string', default: String(availableParallelism()) },
      json: { type: 'string' },
    },
  });
  if (!(values.set in SETS)) {
    throw new Error(`--set is one of ${Object.keys(SETS).join(', ')}. Received ${values.set}.`);
  }
  const set = values.set as SetName;
  const atMost =
    values['at-most'] === undefined ? Number.POSITIVE_INFINITY : wholeOption('at-most', values['at-most']);
  const tasks = (['stiction', 'other'] as const).flatMap((group) =>
    Array.from({ length: Math.min(atMost, SETS[set][group]) }, (_, index): Task => ({ set, group, index })),
  );
  const outcomes = await spreadOver(Math.min(wholeOption('workers', values.workers), tasks.length), tasks);
  const score = scoreOutcomes(outcomes);
  const file = resolve(values.json ?? join(__dirname, `../../.cache/accuracy/${set}.json`));
  mkdirSync(dirname(file), { recursive: true });
  writeFileSync(file, `${JSON.stringify({ set, targets: targetsOf(score), score, outcomes }, null, 1)}\n`);
  process.stdout.write(`${printScore(`Set ${set}`, score)}\nWritten to ${file}\n`);
}

/** Outcomes in the order of the tasks; each worker process gets its next task when it has answered the last. */
async function spreadOver(workers: number, tasks: readonly Task[]): Promise<Outcome[]> {
  const outcomes: Outcome[] = [];
  const progress = startProgress(process.stderr);
  let given = 0;
  let done = 0;
  const work = (): Promise<void> =>
    new Promise((finished, failed) => {
      const worker: ChildProcess = fork(__filename);
      let task = -1;
      const next = (): void => {
        if (given === tasks.length) {
          task = -1;
          worker.disconnect();
        } else {
          task = given++;
          worker.send(tasks[task]);
        }
      };
      worker.on('message', (outcome: Outcome) => {
        outcomes[task] = outcome;
        done++;
        progress(`${done - (done % PROGRESS_EVERY)} of ${tasks.length} cases`, done / tasks.length);
        next();
      });
      worker.on('exit', (code) => {
        if (code === 0 && task === -1) finished();
        else failed(new Error(`The worker stopped at ${JSON.stringify(tasks[task])}.`));
      });
      next();
    });
  try {
    await Promise.all(Array.from({ length: workers }, work));
  } finally {
    progress.stop();
  }
  return outcomes;
}
