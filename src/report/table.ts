/** A table as plain data, and as HTML. */
import { escapeHtml } from './html-text';

export type TableValue = string | number | boolean | null;

export interface Table {
  readonly title: string;
  readonly columns: readonly { readonly name: string; readonly values: readonly TableValue[] }[];
}

export interface TableLook {
  /** Rows shown at most; the others are counted. Default 40. */
  readonly rows?: number;
  /** Whether only the title shows until it is clicked. Default false. */
  readonly folded?: boolean;
}

/**
 * Numbers are shown with four significant digits; the table itself keeps them whole. null is shown as a dash. On a
 * narrow screen the rows of a table with more than four columns stand as blocks.
 */
export function tableHtml(table: Table, look: TableLook = {}): string {
  const { rows = 40, folded = false } = look;
  const count = table.columns[0]?.values.length ?? 0;
  const title = `<strong>${escapeHtml(table.title)}.</strong>`;
  if (count === 0) return `<p>${title} None.</p>`;
  const shown = Math.min(count, rows);
  const head = table.columns.map((column) => `<th>${escapeHtml(column.name)}</th>`).join('');
  const body = Array.from({ length: shown }, (_, row) => {
    const cells = table.columns.map((column) => cellHtml(column.name, column.values[row] ?? null));
    return `<tr>${cells.join('')}</tr>`;
  });
  const heading = count > shown ? `${title} First ${shown} of ${count}.` : title;
  const grid = [
    `<div class="sb-table${table.columns.length > 4 ? ' sb-wide' : ''}"><table>`,
    folded ? '' : `<caption>${heading}</caption>`,
    `<thead><tr>${head}</tr></thead><tbody>${body.join('')}</tbody>`,
    '</table></div>',
  ].join('');
  return folded ? `<details class="sb-folded"><summary>${heading}</summary>${grid}</details>` : grid;
}

function cellHtml(column: string, value: TableValue): string {
  const look = typeof value === 'number' ? ' class="sb-number"' : '';
  return `<td${look} data-column="${escapeHtml(column)}">${valueHtml(value)}</td>`;
}

function valueHtml(value: TableValue): string {
  if (value === null) return '–';
  if (typeof value === 'number') return shortNumber(value);
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  return escapeHtml(value);
}

function shortNumber(value: number): string {
  if (Number.isInteger(value) && Math.abs(value) < 1e9) return String(value);
  return String(Number(value.toPrecision(4)));
}
