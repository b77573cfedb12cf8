/** Tells automatic from manual by a column of the controller's mode. */
import type { Cell } from './table';

export interface Modes {
  /** 1 where the controller is in automatic, one a row; null when the values are not understood. */
  readonly automatic: Float64Array | null;
  /** What was taken as what, for a note. */
  readonly text: string;
}

/** Beginnings of words for modes in which the controller moves OP, and in which it does not (common practice, no source). */
const automatic = /^(a|aut|auto.*|cas.*|rcas.*|rsp|rem|remote|normal)$/;
const manual = /^(m|man.*|iman.*|lo|local.*|rout.*|oos.*|out of service|track.*|trk|init.*|hand.*)$/;

/** An empty cell repeats the mode above it. Plain numbers are understood only as 1 = automatic, 0 = manual. */
export function readModes(cells: readonly Cell[]): Modes {
  const words = cells.map((cell) =>
    String(cell)
      .trim()
      .toLowerCase()
      .replace(/\s*[(].*$/, ''),
  );
  const kinds = [...new Set(words)].filter((word) => word !== '');
  const shown = kinds.slice(0, 8).join(', ');
  const numbers = kinds.length > 0 && kinds.every((kind) => kind === '0' || kind === '1');
  const auto = kinds.filter((kind) => (numbers ? kind === '1' : automatic.test(kind)));
  const man = kinds.filter((kind) => (numbers ? kind === '0' : manual.test(kind)));
  if (kinds.length === 0 || auto.length + man.length < kinds.length) {
    return { automatic: null, text: `modes are not understood (${shown || 'empty'}); none was used.` };
  }
  const isAutomatic = new Set(auto);
  const flags = new Float64Array(cells.length);
  let now = isAutomatic.has(words.find((word) => word !== '')!);
  for (let i = 0; i < words.length; i++) {
    if (words[i] !== '') now = isAutomatic.has(words[i]!);
    flags[i] = now ? 1 : 0;
  }
  const said = [
    ...(auto.length > 0 ? [`${auto.join(', ')} taken as automatic`] : []),
    ...(man.length > 0 ? [`${man.join(', ')} as manual`] : []),
  ];
  return { automatic: flags, text: `${said.join(', ')}.` };
}
