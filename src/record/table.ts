/** A table as it was read from a file or a data frame, before anything is known about its columns. */
import type { Note } from './loop-record';

/** What stands in one place of a table; '' where nothing does. */
export type Cell = string | number;

/** Cells of a column, one a row. A list is one; a long column may fetch its cells as they are asked for, in order at best. */
export interface CellColumn {
  readonly length: number;
  at(row: number): Cell | undefined;
}

export interface Table {
  /** Names of the columns as written, blanks at the ends left out. */
  readonly names: readonly string[];
  /** Units from a line of their own below the names; '' where there is none. */
  readonly units: readonly string[];
  readonly rows: number;
  /** All cells of a column, one a row. */
  readonly cells: (column: number) => CellColumn;
  /** Number of a row as its reader sees it: the line of a file, the row of a sheet, the index in a data frame. */
  readonly rowNumber: (row: number) => number;
  readonly notes: readonly Note[];
}

/** Names of the columns for a message, at most thirty of them. */
export function listed(names: readonly string[]): string {
  const shown = names.slice(0, 30).map((name) => `"${name}"`);
  const more = names.length - shown.length;
  return more > 0 ? `${shown.join(', ')} and ${more} more` : shown.join(', ');
}
