/** What every kind of export comes down to: its first rows as a table, and then all of its rows piece by piece. */
import type { Note } from '../../record/loop-record';
import type { CellColumn, Table } from '../../record/table';

/** Some rows, with some of the columns. */
export interface Batch {
  readonly columns: readonly number[];
  readonly rows: number;
  /** Cells of one of `columns`. They are good for as long as the batch is handed round. */
  readonly cells: (column: number) => CellColumn;
  /** Number of a row as its reader sees it. */
  readonly rowNumber: (row: number) => number;
}

export interface Wanted {
  readonly columns: readonly number[];
  /** Whether each batch has to hold all of the columns. Otherwise each column has its batches, in the order of rows. */
  readonly together: boolean;
}

/** Receives the share of the export that was read, 0..1. */
export type OnProgress = (share: number) => void;

export interface ReadThrough {
  /** SHA-256 of the bytes of the file. */
  readonly sha256: string;
  /** What came up while reading, such as a last line that was cut off. */
  readonly notes: readonly Note[];
}

export interface ExportReader {
  /** The first rows, with the names of all columns and the notes on the header. */
  readonly first: Table;
  /**
   * Reads the whole export once.
   *
   * @throws UnreadableInput for what cannot be read, with the row
   */
  read(wanted: Wanted, take: (batch: Batch) => void, onProgress: OnProgress): Promise<ReadThrough>;
}
