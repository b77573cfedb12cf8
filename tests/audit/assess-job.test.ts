import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { assessJob, failedLoop } from '../../src/audit/assess-job';
import { hasFailed } from '../../src/audit/audit';
import type { LoopJob } from '../../src/audit/loop-job';
import { scratchFolder } from '../scratch-folder';
import { smallLoop } from './small-loops';

const folder = scratchFolder();
const path = join(folder, '31-TC-103.csv');
writeFileSync(path, smallLoop(3));

const job = (change: Partial<LoopJob> = {}): LoopJob => ({
  order: 7,
  tag: '31-TC-103',
  file: 'march/31-TC-103.csv',
  source: { kind: 'file', path, reading: {} },
  seed: 3,
  ...change,
});

describe('assessJob', () => {
  it('gives plain data that survives JSON and the way between threads', () => {
    const finished = assessJob(job());
    expect([finished.order, finished.file]).toEqual([7, 'march/31-TC-103.csv']);
    expect(JSON.parse(JSON.stringify(finished))).toEqual(finished);
    expect(structuredClone(finished)).toEqual(finished);
    expect(finished.signature).not.toBeNull();
  });

  it('takes the service from the first letter of the tag where none is stated, and notes that it was assumed', () => {
    const { result } = assessJob(job());
    // ANSI/ISA-5.1, table of identification letters: T as first letter is temperature.
    expect(result).toMatchObject({ service: 'temperature', provenance: { seed: 3 } });
    const notes = hasFailed(result) ? [] : result.record.notes;
    expect(notes.find(({ code }) => code === 'service-assumed')?.text).toMatch(
      /first letter of 31-TC-103: temperature/,
    );
    const stated = assessJob(job({ source: { kind: 'file', path, reading: { service: 'other' } } })).result;
    expect(stated).toMatchObject({ service: 'other' });
  });

  it('calls a fault of the program by its name, and does not throw', () => {
    const { result, signature } = assessJob(job({ source: { kind: 'file', path, reading: null as never } }));
    expect(signature).toBeNull();
    expect(hasFailed(result) && result.error).toMatch(
      /^A fault of stickband itself, not of the data: TypeError: .*\. Please report it\.$/,
    );
  });
});

describe('failedLoop', () => {
  it('shortens paths to the name that the list has for the file', () => {
    expect(failedLoop(job(), `There is no file "${path}".`).result).toEqual({
      schema: 'stickband/failed-loop/1',
      loop: '31-TC-103',
      file: 'march/31-TC-103.csv',
      error: 'There is no file "march/31-TC-103.csv".',
    });
  });
});
