/** Reads text with columns separated by comma, semicolon or tab. */
import { type ParseError, parse } from 'papaparse';
import { UnreadableInput } from '../errors';
import { tableOf } from './header';
import type { Table } from './table';

/** In the order of trust: a tab or semicolon is hardly anything else, a comma may be a decimal comma. */
const separators = ['\t', ';', ','] as const;
/** Lines on which the separator is judged. */
export const judged: number = 60;

/**
 * Encodings to try on text, in this order: UTF-16 with a byte order mark, or UTF-8, and Latin-1 where that fails.
 *
 * @param start the first 64 kB or more of the file
 * @throws UnreadableInput for bytes that are no text
 */
export function encodingsOf(start: Uint8Array, what: string): readonly [string, string?] {
  const mark = `${start[0]?.toString(16)} ${start[1]?.toString(16)}`;
  if (mark === 'ff fe') return ['utf-16le'];
  if (mark === 'fe ff') return ['utf-16be'];
  if (start.subarray(0, 65536).includes(0)) {
    throw new UnreadableInput(
      `${what} is not a text file. Export the loop as .csv, .txt or .tsv, or as .xlsx.`,
    );
  }
  return ['utf-8', 'latin1'];
}

/**
 * Text of a whole file.
 *
 * @throws UnreadableInput for bytes that are no text
 */
export function decodeText(bytes: Uint8Array, what: string): string {
  const [first, other] = encodingsOf(bytes, what);
  try {
    return new TextDecoder(first, { fatal: other !== undefined }).decode(bytes);
  } catch {
    return new TextDecoder(other).decode(bytes);
  }
}

/**
 * @param text decoded text, without a byte order mark
 * @param what how the source is called in messages
 * @throws UnreadableInput when it is empty, has no column names or no rows
 */
export function readDelimited(text: string, what: string): Table {
  if (text.trim() === '') throw new UnreadableInput(`${what} is empty.`);
  const { data, errors } = parse<string[]>(text, { delimiter: separatorOf(text) });
  refuseOpenQuote(errors, what);
  return tableOf(data, what);
}

/** A quotation mark that is never closed swallows all rows behind it. */
export function refuseOpenQuote(errors: readonly ParseError[], what: string, linesBefore = 0): void {
  const open = errors.find(({ code }) => code === 'MissingQuotes');
  if (open === undefined) return;
  throw new UnreadableInput(
    `${what} has a quotation mark on line ${linesBefore + (open.row ?? 0) + 1} that is never closed. Correct the cell, or export again.`,
  );
}

/** The separator that cuts most of the first lines into the same number of cells, more than one. */
export function separatorOf(text: string): string {
  let best = { separator: ',', share: 0 };
  for (const separator of separators) {
    const { data } = parse<string[]>(text, { delimiter: separator, preview: judged });
    const lines = data.filter((row) => row.some((cell) => cell.trim() !== ''));
    const counts = new Map<number, number>();
    for (const { length } of lines) if (length > 1) counts.set(length, (counts.get(length) ?? 0) + 1);
    const share = Math.max(0, ...counts.values()) / lines.length;
    if (share > best.share) best = { separator, share };
  }
  return best.separator;
}
