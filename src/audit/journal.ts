/**
 * The journal of an audit: one line of JSON for each finished loop, on the disk before the next is counted. An audit
 * that is killed loses nothing but the loops that were being worked on.
 *
 * The first line says which audit it is. A line that was cut off by a kill does not count. Where a loop has several
 * lines, the last one holds.
 */
import { closeSync, fsyncSync, ftruncateSync, mkdirSync, openSync, readSync, writeSync } from 'node:fs';
import { basename, dirname } from 'node:path';
import { UnreadableInput, UnwritableOutput, WrongUse } from '../errors';
import { type AuditProvenance, type FinishedLoop, hasFailed } from './audit';

/** What tells one audit from another: a journal continues only the audit that began it. */
export interface AuditIdentity {
  readonly shard: number;
  readonly of: number;
  readonly allLoops: number;
  readonly listed: string;
  readonly provenance: AuditProvenance;
}

/** A loop that the journal holds. */
export interface JournalEntry {
  /** What the file of the loop was like when it was read; null when it was not there. */
  readonly stamp: string | null;
  readonly failed: boolean;
}

interface Line {
  readonly stamp: string | null;
  readonly loop: FinishedLoop;
}

const schema = 'stickband/audit-journal/1';
const newLine = 0x0a;

export class Journal {
  readonly #path: string;
  readonly #file: number;
  /** By order of the loop. */
  readonly entries: ReadonlyMap<number, JournalEntry>;
  readonly #entries: Map<number, JournalEntry>;

  private constructor(path: string, file: number, entries: Map<number, JournalEntry>) {
    this.#path = path;
    this.#file = file;
    this.#entries = entries;
    this.entries = entries;
  }

  /**
   * Begins a journal, or continues the one that is there.
   *
   * @param resume whether a journal that is there may be continued
   * @throws WrongUse when one is there and may not be continued, or is that of another audit
   * @throws UnreadableInput when the file is no journal
   * @throws UnwritableOutput
   */
  static open(path: string, identity: AuditIdentity, resume: boolean): Journal {
    const header = Buffer.from(`${JSON.stringify({ schema, ...identity })}\n`);
    const file = opened(path);
    try {
      const entries = new Map<number, JournalEntry>();
      let end = 0;
      for (const line of linesOf(file)) {
        if (end === 0) checkHeader(path, line.text, header.toString(), resume);
        else {
          const read = parsed(line.text);
          if (read) entries.set(read.loop.order, { stamp: read.stamp, failed: hasFailed(read.loop.result) });
        }
        end = line.end;
      }
      if (end > 0) ftruncateSync(file, end);
      else {
        // Nothing is there, or only the start of a first line, which holds nothing yet.
        ftruncateSync(file, 0);
        append(path, file, header);
      }
      return new Journal(path, file, entries);
    } catch (error) {
      closeSync(file);
      throw error;
    }
  }

  /** Returns when the loop is safe on the disk. Throws {@link UnwritableOutput}. */
  add(loop: FinishedLoop, stamp: string | null): void {
    append(this.#path, this.#file, Buffer.from(`${JSON.stringify({ stamp, loop } satisfies Line)}\n`));
    this.#entries.set(loop.order, { stamp, failed: hasFailed(loop.result) });
  }

  /** All finished loops as they stand on the disk, in the order of the audit. */
  finished(): FinishedLoop[] {
    const loops = new Map<number, FinishedLoop>();
    for (const { text } of linesOf(this.#file)) {
      const read = parsed(text);
      if (read) loops.set(read.loop.order, read.loop);
    }
    return [...loops.values()].sort((a, b) => a.order - b.order);
  }

  close(): void {
    closeSync(this.#file);
  }
}

function opened(path: string): number {
  try {
    mkdirSync(dirname(path), { recursive: true });
    return openSync(path, 'a+');
  } catch (error) {
    throw unwritable(path, error);
  }
}

function append(path: string, file: number, bytes: Buffer): void {
  try {
    for (let at = 0; at < bytes.length; ) at += writeSync(file, bytes, at);
    fsyncSync(file);
  } catch (error) {
    throw unwritable(path, error);
  }
}

function unwritable(path: string, error: unknown): UnwritableOutput {
  return new UnwritableOutput(
    `The journal ${path} cannot be written (${(error as Error).message}). Name another folder with --out, or change ` +
      'what is in the way; then continue with --resume.',
  );
}

function checkHeader(path: string, text: string, wanted: string, resume: boolean): void {
  const name = basename(path);
  let header: { schema?: unknown; provenance?: Partial<AuditProvenance> } | null = null;
  try {
    header = JSON.parse(text);
  } catch {}
  if (header?.schema !== schema) {
    throw new UnreadableInput(`${path} is no journal of an audit. Name another folder with --out.`);
  }
  if (!resume) {
    throw new WrongUse(
      `The folder ${dirname(path)} has the journal of an audit (${name}) in it. Continue that audit with --resume, name ` +
        `another folder with --out, or delete ${name} to start again.`,
    );
  }
  if (text !== wanted.trimEnd()) {
    const begunBy = header.provenance?.version;
    throw new WrongUse(
      `The journal ${path} is that of another audit: its list of loops, options, shard or version (${begunBy}) differs. ` +
        'Resume it as it was begun, or name another folder with --out.',
    );
  }
}

function parsed(text: string): Line | null {
  try {
    const line = JSON.parse(text) as Partial<Line>;
    return line.loop === undefined ? null : (line as Line);
  } catch {
    return null; // damaged, e.g. by a power cut: this loop is done again
  }
}

/** Whole lines of a file from its start, with the place behind each; what follows the last end of line is left out. */
function* linesOf(file: number): Generator<{ text: string; end: number }> {
  const piece = Buffer.alloc(65_536);
  let begun: Buffer[] = [];
  for (let at = 0; ; ) {
    const length = readSync(file, piece, 0, piece.length, at);
    if (length === 0) return;
    let from = 0;
    for (let to = piece.indexOf(newLine); to >= 0 && to < length; to = piece.indexOf(newLine, from)) {
      const text = Buffer.concat([...begun, piece.subarray(from, to)]).toString();
      begun = [];
      from = to + 1;
      yield { text, end: at + from };
    }
    begun.push(Buffer.from(piece.subarray(from, length)));
    at += length;
  }
}
