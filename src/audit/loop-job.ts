/** What a worker is sent: one loop to read and assess. Plain data, fit for another thread. */
import type { ReadLoopOptions } from '../record/read-loop';
import type { SpooledLoop } from './sources/spooled-loop';

/** One loop of the folder, list or map that an audit goes through, before anything of it is read. */
export interface ListedLoop {
  /** Position in the whole audit, from 0. */
  readonly order: number;
  /** Tag as stated, else from the name of the file. Shards go by it, and so is a loop called that cannot be read. */
  readonly tag: string;
  /** File as the list names it, or its name in the folder; never an absolute path that the user did not write. */
  readonly file: string;
  /** Where that file lies. */
  readonly path: string;
  /** What is stated of the loop; the rest is assumed at reading, and noted. */
  readonly reading: ReadLoopOptions;
}

export type LoopSource =
  | { readonly kind: 'file'; readonly path: string; readonly reading: ReadLoopOptions }
  | { readonly kind: 'spooled'; readonly loop: SpooledLoop };

export interface LoopJob {
  readonly order: number;
  readonly tag: string;
  readonly file: string;
  readonly source: LoopSource;
  readonly seed: number;
}
