/** Tells good samples by a column of quality: words, or the codes of OPC. */
import type { CellColumn } from './table';

const goodWords = new Set(['good', 'g', 'ok', 'valid', 'normal', 'true', '']);
const badWords = new Set([
  'bad',
  'b',
  'uncertain',
  'u',
  'invalid',
  'questionable',
  'q',
  'error',
  'false',
  'substituted',
]);

/**
 * Uncertain samples count as bad. OPC codes are good when their two highest bits of eight are set (192 to 255; OPC
 * Data Access 3.0, value from memory).
 *
 * @returns 1 for good, 0 for bad, one a row; null when the values are not understood
 */
export function isGoodQuality(cells: CellColumn): Float64Array | null {
  const kindAt = (row: number): string => String(cells.at(row)).trim().toLowerCase();
  const flags = (isGood: (kind: string) => boolean): Float64Array =>
    new Float64Array(cells.length).map((_, row) => (isGood(kindAt(row)) ? 1 : 0));
  const kinds = new Set<string>();
  for (let row = 0; row < cells.length; row++) kinds.add(kindAt(row));
  if ([...kinds].every((kind) => goodWords.has(kind) || badWords.has(kind))) {
    return flags((kind) => goodWords.has(kind));
  }
  const codes = [...kinds].map((kind) => (kind === '' ? 192 : Number(kind)));
  const isOpc =
    codes.every((code) => Number.isInteger(code) && code >= 0 && code <= 65535) && Math.max(...codes) >= 64;
  if (!isOpc) return null;
  return flags((kind) => (Number(kind === '' ? 192 : kind) & 0xc0) === 0xc0);
}
