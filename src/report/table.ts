/** A table as plain data, and as HTML. */
import { escapeHtml } from './html-text';

export type TableValue = string | number | boolean | null;

export interface Table {
  readonly title: string;
  readonly columns: readonly { readonly name: string; readonly values: readonly TableValue[] }[];
}

/**
 * Shows at most `rows` rows and says how many are left out. Numbers are shown with four significant digits; the
 * table itself keeps them whole. null is shown as a dash.
 */
export function tableHtml(table: Table, rows: number = 40): string {
  const count = table.columns[0]?.values.length ?? 0;
  const shown = Math.min(count, rows);
  const head = table.columns.map((column) => `<th>${escapeHtml(column.name)}</th>`).join('');
  const body = Array.from({ length: shown }, (_, row) => {
    const cells = table.columns.map((column) => cellHtml(column.values[row] ?? null));
    return `<tr>${cells.join('')}</tr>`;
  });
  const more = count > shown ? ` First ${shown} of ${count}.` : '';
  return [
    '<div class="sb-table"><table>',
    `<caption>${escapeHtml(table.title)}.${more}</caption>`,
    `<thead><tr>${head}</tr></thead><tbody>${body.join('')}</tbody>`,
    '</table></div>',
  ].join('');
}

function cellHtml(value: TableValue): string {
  if (typeof value === 'number') return `<td class="sb-number">${shortNumber(value)}</td>`;
  if (value === null) return '<td>–</td>';
  if (typeof value === 'boolean') return `<td>${value ? 'yes' : 'no'}</td>`;
  return `<td>${escapeHtml(value)}</td>`;
}

function shortNumber(value: number): string {
  if (Number.isInteger(value) && Math.abs(value) < 1e9) return String(value);
  return String(Number(value.toPrecision(4)));
}
