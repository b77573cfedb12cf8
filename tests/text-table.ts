/** Tables in plain text for what the measuring commands print. */

/** Columns under their names, the first to the left and the others to the right, under a title. */
export function textTable(
  title: string,
  columns: readonly string[],
  rows: readonly (readonly string[])[],
): string {
  const widths = columns.map((name, i) => Math.max(name.length, ...rows.map((row) => row[i].length)));
  const line = (cells: readonly string[]): string =>
    cells
      .map((cell, i) => (i === 0 ? cell.padEnd(widths[i]) : cell.padStart(widths[i])))
      .join('  ')
      .trimEnd();
  return [
    title,
    line(columns),
    widths.map((width) => '-'.repeat(width)).join('  '),
    ...rows.map(line),
    '',
  ].join('\n');
}

/** A share in %, or a dash. */
export function percent(share: number | null, digits: number = 1): string {
  return share === null ? '-' : `${(100 * share).toFixed(digits)} %`;
}
