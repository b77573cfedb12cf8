/** Runs jobs on worker threads, or in this thread. Only a few jobs and results are alive at any time. */
import { totalmem } from 'node:os';
import { join } from 'node:path';
import { setImmediate } from 'node:timers/promises';
import { getHeapStatistics } from 'node:v8';
import { assessJob, failedLoop } from './assess-job';
import type { FinishedLoop } from './audit';
import type { LoopJob } from './loop-job';

/** Jobs handed out for each worker: one in work and one waiting, so that no worker waits for this thread. */
const jobsPerWorker = 2;

/**
 * @param workers number of threads; 0 for this thread alone
 * @param onFinished called with each loop when it is finished, in no fixed order; what it throws ends the run
 */
export async function runJobs(
  jobs: readonly LoopJob[],
  workers: number,
  onFinished: (loop: FinishedLoop, job: LoopJob) => void,
): Promise<void> {
  if (workers === 0) {
    for (const job of jobs) {
      onFinished(assessJob(job), job);
      await setImmediate();
    }
    return;
  }
  // Loaded where it is needed, so that a command without workers starts fast.
  const { Piscina } = require('piscina') as typeof import('piscina');
  const threads = Math.min(workers, jobs.length);
  const pool = new Piscina<LoopJob, FinishedLoop>({
    filename: join(__dirname, 'run-worker.js'),
    minThreads: threads,
    maxThreads: threads,
    resourceLimits: { maxOldGenerationSizeMb: memoryOfOne(threads) },
  });
  pool.on('error', () => {}); // a thread that dies while idle is replaced; one at work answers below
  const waiting = jobs.values();
  const handOut = async (): Promise<void> => {
    for (const job of waiting) {
      const loop = await pool.run(job).catch((error: Error) => failedLoop(job, crashReason(error)));
      onFinished(loop, job);
    }
  };
  try {
    await Promise.all(Array.from({ length: jobsPerWorker * threads }, handOut));
  } finally {
    await pool.destroy();
  }
}

/**
 * MB that one worker may fill: its share of four fifths (own choice) of the machine or container, and no more than this
 * process may. Without it a loop that is too large ends the whole audit instead of its own worker.
 */
function memoryOfOne(threads: number): number {
  const constrained = process.constrainedMemory();
  const whole = constrained > 0 ? Math.min(constrained, totalmem()) : totalmem();
  return Math.floor(Math.min((0.8 * whole) / threads, getHeapStatistics().heap_size_limit) / 2 ** 20);
}

function crashReason(error: Error): string {
  if ((error as NodeJS.ErrnoException).code === 'ERR_WORKER_OUT_OF_MEMORY') {
    return (
      'The memory of one worker was not enough for this loop. An export that holds many loops is read in pieces when it ' +
      'is audited with a map (--map); a long record can be cut into shorter ones.'
    );
  }
  return `The worker of this loop stopped (${error.message}). Try it alone with stickband assess, or again with --resume.`;
}
