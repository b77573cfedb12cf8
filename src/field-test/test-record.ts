/**
 * Reads what was logged during a valve test: the command and, of travel, PV and actuator pressure, whatever is there.
 * Unlike a loop record it may have no PV, keeps manual stretches (a test is made in manual) and is not cut.
 */
import { refuseUnknownOptions, UnreadableInput, WrongUse } from '../errors';
import type { DataFrameLike } from '../record/data-frame';
import { layGrid } from '../record/grid';
import type { Note, Response } from '../record/loop-record';
import { isaTag, type Role, sameLoop, serviceOf } from '../record/names';
import { openSource } from '../record/read-loop';
import { findName, type Series, seriesOf } from '../record/series';
import { createSignalReader, type Signal } from '../record/signals';
import { listed } from '../record/table';
import { deadTravel } from '../record/travel';
import { conversion, convert } from '../record/units';
import { standardDeviation } from '../signal/statistics';

/** A loop record serves as one, too. */
export interface TestRecord {
  readonly loop: string;
  readonly source: string;
  readonly sha256: string;
  /** Time of the first sample, ISO 8601. */
  readonly start: string;
  /** s */
  readonly samplePeriod: number;
  readonly response: Response;
  /** The command, % of span. All arrays have one value a sample and the same length. */
  readonly op: Float64Array;
  /** Measured travel, % of its range. */
  readonly travel: Float64Array | null;
  readonly pv: Float64Array | null;
  readonly pvUnit: string;
  /** Pressure in the actuator, in `pressureUnit`. */
  readonly pressure?: Float64Array | null;
  readonly pressureUnit?: string;
  /** 1 where the controller was in automatic, 0 in manual; null when no mode was logged. */
  readonly automatic?: Float64Array | null;
  readonly notes: readonly Note[];
}

export interface ReadTestOptions {
  /** Tag of the loop, needed where the export holds several. */
  readonly tag?: string;
  /** How PV answers a lasting move of the valve. Default: from the first letter of an ISA-5.1 tag, noted. */
  readonly response?: Response;
  /** Names of columns. Default: found by their names, noted. `op` is the command. */
  readonly time?: string;
  readonly op?: string;
  readonly travel?: string;
  readonly pv?: string;
  readonly pressure?: string;
  readonly mode?: string;
  /** Unit of the pressure where the column does not name it. Default: that of the column, else bar, noted. */
  readonly pressureUnit?: string;
  /** Rated travel with its unit, e.g. `40 mm`: needed where travel was logged as a length. */
  readonly stroke?: string;
  readonly timeFormat?: string;
  readonly zone?: string;
}

export const readTestOptions: readonly (keyof ReadTestOptions)[] = [
  'tag',
  'response',
  'time',
  'op',
  'travel',
  'pv',
  'pressure',
  'mode',
  'pressureUnit',
  'stroke',
  'timeFormat',
  'zone',
];

/** Names of a command and of an actuator pressure beside those that a loop record knows. */
const commandName = /(^|[^a-z])(valve[\s._-]?)?(command|cmd|demand)\s*([[(].*)?$/i;
const pressureName =
  /(^|[^a-z])((actuator|air|diaphragm|chamber|act)[\s._-]?)?(pressure|press)\s*([[(].*)?$/i;

/**
 * Reads a test record from a file (CSV text or .xlsx) or a data frame. Signals are brought to the stamps of travel
 * (else PV) by last value; nothing is interpolated.
 *
 * @throws UnreadableInput for what cannot be read, and where there is no command or neither travel nor PV
 * @throws WrongUse for unknown options, and a unit or stroke that makes no sense
 */
export function readTestRecord(source: string | DataFrameLike, options: ReadTestOptions = {}): TestRecord {
  refuseUnknownOptions('readTestRecord', options, readTestOptions);
  const { table, name, what, sha256 } = openSource(source);
  const { series, notes: layoutNotes } = seriesOf(table, options.time, what);
  const chosen = chooseTestColumns(series, options, what);
  const reader = createSignalReader(options, what);
  const signal = (one: Series | null): Signal | null => one && reader.read(one);
  const command = reader.read(chosen.op);
  const travelSignal = signal(chosen.travel);
  const pvSignal = signal(chosen.pv);
  const pressureSignal = signal(chosen.pressure);
  const modeSignal = chosen.mode && reader.readMode(chosen.mode);
  const read = reader.done();
  const notes: Note[] = [...table.notes, ...layoutNotes, ...chosen.notes, ...read.notes];

  const lead = travelSignal ?? pvSignal!;
  if (lead.ms.length < 2) throw new UnreadableInput(`${what} has one row. A test record needs many.`);
  const grid = layGrid(lead.ms);
  const times = grid.time.map((seconds) => grid.origin + 1000 * seconds);
  const on = (one: Signal | null): Float64Array | null => one && heldOn(times, one);
  const op = on(command)!;
  if (grid.gaps > 0) {
    notes.push({
      code: 'gaps',
      text: `${grid.gaps} gap${grid.gaps > 1 ? 's' : ''} between rows, the longest ${grid.longestGap} s; the last value stands in them, and what was read beside them deserves a look.`,
    });
  }
  const loop = options.tag ?? (loopOf(chosen.op) || name.replace(/\.[^.]*$/, ''));
  const letters = isaTag(loop)?.letters ?? '';
  const response = options.response ?? (serviceOf(letters) === 'level' ? 'integrating' : 'self-regulating');
  if (options.response === undefined && chosen.travel === null) {
    notes.push({
      code: 'response-assumed',
      text: `PV is taken to be ${response}. State another response if it is not.`,
    });
  }
  let travel = on(travelSignal);
  if (travel) {
    travel = inPercent(travel, chosen.travel!, options.stroke, what);
    const dead = deadTravel(travel, op);
    // A travel that stands still is a finding of the test; one that hands the command back is no measurement.
    if (dead !== null && standardDeviation(travel) > 0.2 * standardDeviation(op)) {
      notes.push({
        code: 'travel-not-alive',
        text: `The travel in "${chosen.travel!.name}" was left out: ${dead}.`,
      });
      travel = null;
      if (!pvSignal)
        throw new UnreadableInput(`${what} has no PV, and its travel is no measurement: ${dead}.`);
    }
  }
  const pressureUnit = chosen.pressure ? pressureUnitOf(chosen.pressure, options.pressureUnit, notes) : '';
  return {
    loop,
    source: name,
    sha256,
    start: new Date(grid.origin).toISOString(),
    samplePeriod: grid.period,
    response,
    op,
    travel,
    pv: on(pvSignal),
    pvUnit: chosen.pv?.unit ?? '',
    pressure: on(pressureSignal),
    pressureUnit,
    automatic: on(modeSignal),
    notes,
  };
}

interface TestColumns {
  readonly op: Series;
  readonly travel: Series | null;
  readonly pv: Series | null;
  readonly pressure: Series | null;
  readonly mode: Series | null;
  readonly notes: readonly Note[];
}

function loopOf({ parsed, name }: Series): string {
  const before = parsed.role === null ? name.replace(commandName, '').replace(/[\s._-]+$/, '') : parsed.loop;
  return isaTag(before)?.text ?? before;
}

function chooseTestColumns(all: readonly Series[], options: ReadTestOptions, what: string): TestColumns {
  const { tag } = options;
  const mine = tag === undefined ? [] : all.filter(({ parsed }) => sameLoop(parsed.loop, tag));
  const series = mine.length > 0 ? mine : all;
  const found = `Columns found: ${listed(all.map(({ name }) => name))}.`;
  const assumed: string[] = [];
  const choose = (
    option: 'op' | 'travel' | 'pv' | 'pressure' | 'mode',
    fits: (one: Series) => boolean,
  ): Series | null => {
    const stated = options[option];
    if (stated !== undefined) {
      const at = findName(
        all.map(({ name }) => name),
        stated,
      );
      if (at < 0) throw new UnreadableInput(`${what} has no column "${stated}" for ${option}. ${found}`);
      return all[at]!;
    }
    const [first, second] = series.filter(fits);
    if (first !== undefined && second !== undefined) {
      throw new UnreadableInput(
        `${what} has two columns that may be ${option}: "${first.name}" and "${second.name}". Name one with --${option} (option "${option}").`,
      );
    }
    if (first !== undefined) assumed.push(`${option} from "${first.name}"`);
    return first ?? null;
  };
  const has = (role: Role) => (one: Series) => one.parsed.role === role;
  const isPressure = (one: Series): boolean => one.parsed.role === null && pressureName.test(one.name);
  const op = choose(
    'op',
    (one) => has('op')(one) || (one.parsed.role === null && commandName.test(one.name)),
  );
  const travel = choose('travel', has('travel'));
  const pv = choose('pv', has('pv'));
  const pressure = choose('pressure', isPressure);
  const mode = choose('mode', has('mode'));
  if (op === null) {
    throw new UnreadableInput(
      `${what} has no column for the command (OP). ${found} Name it with --op (option "op"). A column called MV is never taken by its name.`,
    );
  }
  if (travel === null && pv === null) {
    throw new UnreadableInput(
      `${what} has neither travel nor PV. ${found} Name one with --travel or --pv (option "travel" or "pv").`,
    );
  }
  const notes: Note[] =
    assumed.length === 0
      ? []
      : [{ code: 'columns', text: `Columns were taken by their names: ${assumed.join(', ')}.` }];
  return { op, travel, pv, pressure, mode, notes };
}

/** Last value at each time; the first good one before there is any. */
function heldOn(times: Float64Array, { ms, values }: Signal): Float64Array {
  const held = new Float64Array(times.length);
  let last = values.find((value) => !Number.isNaN(value))!;
  let row = 0;
  for (let i = 0; i < times.length; i++) {
    for (; row < ms.length && ms[row]! <= times[i]! + 0.5; row++) {
      if (!Number.isNaN(values[row]!)) last = values[row]!;
    }
    held[i] = last;
  }
  return held;
}

/** A length or a quantity as stated, such as `40 mm`, in `unit`. @throws WrongUse when it is none */
export function quantityIn(stated: string, unit: string, option: string): number {
  const found = /^\s*(\d+\.?\d*|\.\d+)(e[+-]?\d+)?\s*([^\s\d.].*?)\s*$/i.exec(stated);
  const value = found === null ? Number.NaN : Number(`${found[1]}${found[2] ?? ''}`);
  if (found === null || !(value > 0)) {
    throw new WrongUse(
      `The option "${option}" needs a number above 0 with its unit, in a unit such as ${unit}. Received "${stated}".`,
    );
  }
  return convert(Float64Array.of(value), conversion(found[3]!, unit))[0]!;
}

function inPercent(
  travel: Float64Array,
  series: Series,
  stroke: string | undefined,
  what: string,
): Float64Array {
  const { unit, name } = series;
  if (unit === '' || unit.includes('%')) return travel;
  if (stroke === undefined) {
    throw new UnreadableInput(
      `The travel in "${name}" of ${what} is in ${unit}. State the rated travel with --stroke, e.g. --stroke "40 mm" (option "stroke").`,
    );
  }
  const whole = quantityIn(stroke, unit, 'stroke');
  return travel.map((value) => (100 * value) / whole);
}

function pressureUnitOf(series: Series, stated: string | undefined, notes: Note[]): string {
  const unit = stated ?? series.unit;
  if (unit !== '') {
    conversion(unit, 'Pa');
    return unit;
  }
  notes.push({
    code: 'pressure-unit',
    text: `The pressure in "${series.name}" is taken to be in bar. State its unit if it is not.`,
  });
  return 'bar';
}
