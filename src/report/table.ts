/** A table as plain data, and as HTML. */
import { escapeHtml } from './html-text';

export type TableValue = string | number | boolean | null;

export interface Table {
  readonly title: string;
  readonly columns: readonly { readonly name: string; readonly values: readonly TableValue[] }[];
}

/**
 * Shows at most `rows` rows and says how many are left out. Numbers are shown with four significant digits; the
 * table itself keeps them whole. null is shown as a dash. On a narrow screen the rows of a table with more than four
 * columns stand as blocks.
 */
export function tableHtml(table: Table, rows: number = 40): string {
  const count = table.columns[0]?.values.length ?? 0;
  const title = `<strong>${escapeHtml(table.title)}.</strong>`;
  if (count === 0) return `<p>${title} None.</p>`;
  const shown = Math.min(count, rows);
  const head = table.columns.map((column) => `<th>${escapeHtml(column.name)}</th>`).join('');
  const body = Array.from({ length: shown }, (_, row) => {
    const cells = table.columns.map((column) => cellHtml(column.name, column.values[row] ?? null));
    return `<tr>${cells.join('')}</tr>`;
  });
  const more = count > shown ? ` First ${shown} of ${count}.` : '';
  return [
    `<div class="sb-table${table.columns.length > 4 ? ' sb-wide' : ''}"><table>`,
    `<caption>${title}${more}</caption>`,
    `<thead><tr>${head}</tr></thead><tbody>${body.join('')}</tbody>`,
    '</table></div>',
  ].join('');
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
