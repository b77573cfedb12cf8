/** Units of PV: ranges stated with a unit, and conversion, through mathjs. */
import type { Unit } from 'mathjs';
import { WrongUse } from '../errors';
import type { Range } from './loop-record';

/** y = factor x + offset */
export interface Conversion {
  readonly factor: number;
  readonly offset: number;
}

/** Ways to write units that the trade uses and mathjs does not know; others go to it as they are. */
const written: readonly (readonly [RegExp, string])[] = [
  [/³/g, '^3'],
  [/²/g, '^2'],
  [/°\s*([CFR])\b/g, 'deg$1'],
  [/\bm3\b/g, 'm^3'],
  [/\bl(?:tr|itres?|iters?)\b/gi, 'l'],
  [/\bgpm\b/gi, 'gallon/minute'],
  [/\blpm\b/gi, 'l/minute'],
  [/\bmin\b/g, 'minute'],
];

function parse(text: string): Unit | null {
  // Loaded where it is needed: mathjs takes most of a second.
  const { unit } = require('mathjs') as typeof import('mathjs');
  const plain = written.reduce((sum, [from, to]) => sum.replace(from, to), text.trim());
  try {
    return unit(plain);
  } catch {
    return null;
  }
}

/**
 * How values in unit `from` become values in unit `to`. Equal names need no known unit.
 *
 * @throws WrongUse when one of them is not known, or when they measure different things
 */
export function conversion(from: string, to: string): Conversion {
  if (from.trim() === to.trim()) return { factor: 1, offset: 0 };
  const zero = parse(`0 ${from}`);
  const one = parse(`1 ${from}`);
  const target = parse(to);
  if (zero === null || one === null || target === null) {
    const unknown = target === null ? to : from;
    throw new WrongUse(
      `The unit "${unknown}" is not known, so that "${from}" cannot be converted to "${to}". Write it as in l/s, m^3/h, kPa, bar or degC, or state the range without units.`,
    );
  }
  if (!one.equalBase(target)) {
    throw new WrongUse(`The unit "${from}" cannot be converted to "${to}": they measure different things.`);
  }
  const offset = zero.toNumber(target.formatUnits());
  return { factor: one.toNumber(target.formatUnits()) - offset, offset };
}

export function convert(values: Float64Array, { factor, offset }: Conversion): Float64Array {
  return factor === 1 && offset === 0 ? values : values.map((value) => factor * value + offset);
}

/** A PV range as stated: numbers, or texts with units such as `0 l/s` and `30 l/s`. */
export interface StatedRange {
  readonly low: number | string;
  readonly high: number | string;
}

/** The range in its own unit; '' when it was stated without one. */
export interface ReadRange extends Range {
  readonly unit: string;
}

/** @throws WrongUse when an end is no number, when the ends have different units, or when low is not below high */
export function readRange(stated: StatedRange, option: string): ReadRange {
  const ends = [stated.low, stated.high].map((end) => {
    if (typeof end === 'number') return { value: end, unit: '' };
    const found = /^\s*([+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?)\s*(.*?)\s*$/i.exec(end);
    return found === null ? { value: Number.NaN, unit: '' } : { value: Number(found[1]), unit: found[2]! };
  });
  const [low, high] = ends as [(typeof ends)[number], (typeof ends)[number]];
  const unit = high.unit || low.unit;
  const start = low.unit === '' || low.unit === unit ? low.value : converted(low.value, low.unit, unit);
  if (!Number.isFinite(start) || !Number.isFinite(high.value) || !(start < high.value)) {
    throw new WrongUse(
      `The option "${option}" needs a low and a higher end, e.g. 0 and 120, or "0 l/s" and "30 l/s". Received ${JSON.stringify(stated)}.`,
    );
  }
  return { low: start, high: high.value, unit };
}

/** The range in another unit; as it is when it has none. */
export function rangeIn(range: ReadRange, unit: string): Range {
  if (range.unit === '' || unit === '' || range.unit === unit) return { low: range.low, high: range.high };
  return { low: converted(range.low, range.unit, unit), high: converted(range.high, range.unit, unit) };
}

function converted(value: number, from: string, to: string): number {
  const { factor, offset } = conversion(from, to);
  return factor * value + offset;
}
