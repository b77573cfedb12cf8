/**
 * Tables as danfo data frames, to filter, join and group in a cell. danfo is loaded when first asked for: it is
 * large, and an optional companion of this package. Its arithmetic is not exact, so nothing here computes with it.
 */
import type { DataFrame } from 'danfojs';
import { MissingTool } from '../errors';
import type { Table, TableValue } from '../report/table';

/** What is read of a data frame. */
export interface FrameLike {
  readonly columns: string[];
  readonly values: unknown;
}

/** Whether danfo is installed where this package can find it. */
export function canMakeDataFrames(): boolean {
  try {
    require.resolve('danfojs');
    return true;
  } catch {
    return false;
  }
}

/** A table as a danfo data frame. Throws {@link MissingTool} when danfo is not installed. */
export async function dataFrame(table: Table): Promise<DataFrame> {
  if (!canMakeDataFrames()) {
    throw new MissingTool(
      'Data frames need the package danfojs, which is not installed: "npm install danfojs@1.1.2" gives it. ' +
        'Without it, showTable shows every table, and table.columns holds the values.',
    );
  }
  const danfo = await import('danfojs');
  const count = table.columns[0]?.values.length ?? 0;
  // From rows, because danfo cannot make an empty frame from columns.
  const rows = Array.from({ length: count }, (_, row) => table.columns.map(({ values }) => values[row]!));
  return new danfo.DataFrame(rows, { columns: table.columns.map(({ name }) => name) });
}

/** A data frame as a plain table. */
export function tableOf(frame: FrameLike, title: string): Table {
  const rows = frame.values as TableValue[][];
  const columns = frame.columns.map((name, place) => ({
    name,
    values: rows.map((row) => row[place] ?? null),
  }));
  return { title, columns };
}
