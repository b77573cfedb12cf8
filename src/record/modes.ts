/** Tells automatic from manual by a column of the controller's mode. */
import type { CellColumn } from './table';

export interface Modes {
  /** 1 where the controller is in automatic, one a row; null when the values are not understood. */
  readonly automatic: Float64Array | null;
  /** What was taken as what, for a note. */
  readonly text: string;
}

/** Beginnings of words for modes in which the controller moves OP, and in which it does not (common practice, no source). */
const automatic = /^(a|aut|auto.*|cas.*|rcas.*|rsp|rem|remote|normal)$/;
const manual = /^(m|man.*|iman.*|lo|local.*|rout.*|oos.*|out of service|track.*|trk|init.*|hand.*)$/;

/** More words than any controller has modes (own choice). */
const mostKinds = 200;

/** An empty cell repeats the mode above it. Plain numbers are understood only as 1 = automatic, 0 = manual. */
export function readModes(cells: CellColumn): Modes {
  // Number of the kind of mode in each row, counted from 1; 0 for an empty cell.
  const kindOf = new Uint16Array(cells.length);
  const kinds: string[] = [];
  for (let i = 0; i < cells.length; i++) {
    const word = String(cells.at(i))
      .trim()
      .toLowerCase()
      .replace(/\s*[(].*$/, '');
    if (word === '') continue;
    if (!kinds.includes(word)) kinds.push(word);
    // So many kinds are no modes.
    if (kinds.length > mostKinds) break;
    kindOf[i] = kinds.indexOf(word) + 1;
  }
  const shown = kinds.slice(0, 8).join(', ');
  const numbers = kinds.length > 0 && kinds.every((kind) => kind === '0' || kind === '1');
  const auto = kinds.filter((kind) => (numbers ? kind === '1' : automatic.test(kind)));
  const man = kinds.filter((kind) => (numbers ? kind === '0' : manual.test(kind)));
  if (kinds.length === 0 || kinds.length > mostKinds || auto.length + man.length < kinds.length) {
    return { automatic: null, text: `modes are not understood (${shown || 'empty'}); none was used.` };
  }
  const isAutomatic = kinds.map((kind) => auto.includes(kind));
  const flags = new Float64Array(cells.length);
  let now = isAutomatic[kindOf.find((kind) => kind > 0)! - 1];
  for (let i = 0; i < flags.length; i++) {
    if (kindOf[i]! > 0) now = isAutomatic[kindOf[i]! - 1];
    flags[i] = now ? 1 : 0;
  }
  const said = [
    ...(auto.length > 0 ? [`${auto.join(', ')} taken as automatic`] : []),
    ...(man.length > 0 ? [`${man.join(', ')} as manual`] : []),
  ];
  return { automatic: flags, text: `${said.join(', ')}.` };
}
