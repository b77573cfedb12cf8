/** Reads and assesses one loop of an audit. Whatever goes wrong becomes a failed loop with its reason. */
import { assessLoop } from '../assessment/assess-loop';
import { StickbandError } from '../errors';
import { readLoop } from '../record/read-loop';
import type { FinishedLoop } from './audit';
import type { LoopJob } from './loop-job';
import { loopSignature } from './signature';
import { readSpooled } from './sources/read-spooled';

/** The answer is plain data. Nothing is thrown. */
export function assessJob(job: LoopJob): FinishedLoop {
  const { order, file, source, seed } = job;
  try {
    const record = source.kind === 'file' ? readLoop(source.path, source.reading) : readSpooled(source.loop);
    const findings = assessLoop(record, { seed });
    return { order, file, result: findings.assessment, signature: loopSignature(findings) };
  } catch (error) {
    return failedLoop(job, reasonOf(error));
  }
}

/** @param reason a sentence; paths in it are shortened to the name that the list has for the file */
export function failedLoop({ order, tag, file, source }: LoopJob, reason: string): FinishedLoop {
  const path = source.kind === 'file' ? source.path : source.loop.folder;
  const result = {
    schema: 'stickband/failed-loop/1',
    loop: tag,
    file,
    error: reason.replaceAll(path, file),
  } as const;
  return { order, file, result, signature: null };
}

function reasonOf(error: unknown): string {
  if (error instanceof StickbandError) return error.message;
  const said = error instanceof Error ? `${error.name}: ${error.message}` : String(error);
  return `A fault of stickband itself, not of the data: ${said.replace(/\.?$/, '.')} Please report it.`;
}
