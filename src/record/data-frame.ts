/** Reads a danfo data frame, told by its shape: danfo itself is not loaded. */
import { UnreadableInput, WrongUse } from '../errors';
import type { Cell, Table } from './table';

/** What is used of a danfo DataFrame. */
export interface DataFrameLike {
  readonly columns: readonly string[];
  column(name: string): { readonly values: ArrayLike<unknown> };
}

/**
 * Rows are numbered from 0 in messages, as the frame's own index does.
 *
 * @throws WrongUse when `frame` is not a data frame
 * @throws UnreadableInput when it has no columns or no rows
 */
export function readDataFrame(frame: DataFrameLike): Table {
  if (
    typeof frame !== 'object' ||
    frame === null ||
    !Array.isArray(frame.columns) ||
    typeof frame.column !== 'function'
  ) {
    throw new WrongUse('readLoop needs the path of a file or a danfo DataFrame. Received neither.');
  }
  const names = frame.columns.map((name) => String(name).trim());
  if (names.length === 0) throw new UnreadableInput('The data frame has no columns.');
  const columns = frame.columns.map((name) => frame.column(name).values);
  const rows = columns[0]!.length;
  if (rows === 0) {
    throw new UnreadableInput(`The data frame has no rows. Columns found: ${names.join(', ')}.`);
  }
  return {
    names,
    units: names.map(() => ''),
    rows,
    cells: (column) => Array.from(columns[column]!, cellOf),
    rowNumber: (row) => row,
    notes: [],
  };
}

function cellOf(value: unknown): Cell {
  if (typeof value === 'number') return value;
  if (value === null || value === undefined) return '';
  return value instanceof Date ? value.toISOString() : String(value);
}
