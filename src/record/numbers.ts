/** Reads the numbers of a column, with decimal point or comma, and tells values that are missing or bad. */
import { UnreadableInput } from '../errors';
import type { CellColumn } from './table';

export interface NumberColumn {
  /** NaN where there is no value. */
  readonly values: Float64Array;
  /** Rows with nothing in them, and rows with a word that stands for no value. */
  readonly empty: number;
  readonly bad: number;
  /** Such words as found, without repeats. */
  readonly words: readonly string[];
  readonly decimalComma: boolean;
}

/** What historians and sheets write where there is no value (common practice, no source). Compared in small letters. */
const noValue = new Set(
  (
    'bad|bad input|bad quality|bad value|no data|nodata|no value|no good data|nan|null|none|nil|n/a|na|#n/a|#na|' +
    '#value!|#div/0!|-|--|---|?|i/o timeout|timeout|time out|comm fail|comm failure|communication failure|' +
    'not connected|disconnected|offline|shutdown|out of service|out of range|over range|under range|overrange|' +
    'underrange|error|err|invalid|missing|uncertain|questionable|inf|-inf|infinity|-infinity|1.#qnan|1.#inf|-1.#ind'
  ).split('|'),
);

const withPoint = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;
const withComma = /^[+-]?(\d+,?\d*|,\d+)(e[+-]?\d+)?$/i;
const groupedByPoint = /^[+-]?\d{1,3}(\.\d{3})+(,\d+)?$/;
const groupedByComma = /^[+-]?\d{1,3}(,\d{3})+(\.\d+)?$/;

/**
 * @param column name of the column, for messages
 * @param rowNumber number of a row as the reader sees it
 * @throws UnreadableInput for text that is no number and no word for a missing value, and where a comma may be a decimal
 *   comma or group thousands
 */
export function readNumbers(
  cells: CellColumn,
  column: string,
  rowNumber: (row: number) => number,
): NumberColumn {
  const values = new Float64Array(cells.length).fill(Number.NaN);
  const words = new Set<string>();
  const style = styleOf(cells, column, rowNumber);
  let empty = 0;
  let bad = 0;
  for (let i = 0; i < cells.length; i++) {
    const cell = cells.at(i)!;
    if (typeof cell === 'number') {
      if (Number.isFinite(cell)) values[i] = cell;
      else bad++;
      continue;
    }
    // Number() would take '', '0x1f' and 'Infinity' too: the first is excluded here, the others by their letters.
    const fast = cell === '' ? Number.NaN : Number(cell);
    if (style === 'point' && Number.isFinite(fast) && !/^\s*$|[xob]/i.test(cell)) {
      values[i] = fast;
      continue;
    }
    const text = cell.trim();
    if (text === '') {
      empty++;
    } else if (noValue.has(text.toLowerCase())) {
      bad++;
      words.add(text);
    } else {
      const number = numberOf(text, style);
      if (number === null) {
        throw new UnreadableInput(
          `Row ${rowNumber(i)} of the column "${column}" has the text "${text.slice(0, 40)}" where a number is needed. Correct it, or leave the cell empty when there is no value.`,
        );
      }
      values[i] = number;
    }
  }
  return { values, empty, bad, words: [...words], decimalComma: style === 'comma' };
}

function numberOf(text: string, style: 'point' | 'comma'): number | null {
  if (style === 'point') {
    if (withPoint.test(text)) return Number(text);
    return groupedByComma.test(text) ? Number(text.replaceAll(',', '')) : null;
  }
  if (withComma.test(text)) return Number(text.replace(',', '.'));
  return groupedByPoint.test(text) ? Number(text.replaceAll('.', '').replace(',', '.')) : null;
}

/**
 * Decimal sign of a column: the comma, when a cell has one that cannot group thousands. Where every comma stands before
 * three digits it is taken as decimal comma too, unless other cells are whole numbers without one.
 */
function styleOf(cells: CellColumn, column: string, rowNumber: (row: number) => number): 'point' | 'comma' {
  let doubtful = -1;
  let whole = false;
  for (let i = 0; i < cells.length; i++) {
    const cell = cells.at(i)!;
    if (typeof cell === 'number') continue;
    if (!cell.includes(',')) {
      whole ||= /^\s*[+-]?\d+\s*$/.test(cell);
      continue;
    }
    const text = cell.trim();
    if (groupedByComma.test(text) && !/^[+-]?0/.test(text)) {
      if (text.includes('.') || text.indexOf(',') !== text.lastIndexOf(',')) return 'point';
      doubtful = i;
    } else if (withComma.test(text) || groupedByPoint.test(text)) {
      return 'comma';
    }
  }
  if (doubtful < 0) return 'point';
  if (!whole) return 'comma';
  throw new UnreadableInput(
    `The column "${column}" has numbers such as "${String(cells.at(doubtful)).trim()}" (row ${rowNumber(doubtful)}), in which the comma may be a decimal comma or group thousands. Export it without grouping.`,
  );
}
