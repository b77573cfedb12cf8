/** One loop of a spooled export: what a worker needs to read it. Plain data, fit to be sent to a thread. */
import type { ReadLoopOptions } from '../../record/read-options';

export interface SpooledLoop {
  /** Position in the whole map, from 0. */
  readonly order: number;
  readonly tag: string;
  /** File name of the export, without folders. */
  readonly file: string;
  /** SHA-256 of the whole export, 64 hexadecimal digits. */
  readonly sha256: string;
  /** Folder in which the spool lies. */
  readonly folder: string;
  /** What the map states of the loop, with `tag`. */
  readonly reading: ReadLoopOptions;
}
