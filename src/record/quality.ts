/** Tells good samples by a column of quality: words, or the codes of OPC. */
import type { Cell } from './table';

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
export function isGoodQuality(cells: readonly Cell[]): Float64Array | null {
  const kinds = new Set(cells.map((cell) => String(cell).trim().toLowerCase()));
  if ([...kinds].every((kind) => goodWords.has(kind) || badWords.has(kind))) {
    return Float64Array.from(cells, (cell) => (goodWords.has(String(cell).trim().toLowerCase()) ? 1 : 0));
  }
  const codes = [...kinds].map((kind) => (kind === '' ? 192 : Number(kind)));
  const isOpc =
    codes.every((code) => Number.isInteger(code) && code >= 0 && code <= 65535) && Math.max(...codes) >= 64;
  if (!isOpc) return null;
  return Float64Array.from(cells, (cell) => ((Number(cell === '' ? 192 : cell) & 0xc0) === 0xc0 ? 1 : 0));
}
