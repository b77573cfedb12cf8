/** Reads what was logged of one loop: a file of a historian, a workbook or a data frame, into a loop record. */
import { createHash } from 'node:crypto';
import { readFileSync, statSync } from 'node:fs';
import { basename, extname } from 'node:path';
import { refuseUnknownOptions, UnreadableInput, WrongUse } from '../errors';
import { align } from './align';
import { type ChosenColumns, chooseColumns } from './columns';
import { type DataFrameLike, readDataFrame } from './data-frame';
import { decodeText, readDelimited } from './delimited';
import type { LoopRecord, Note, Range, Response, Service } from './loop-record';
import { isaTag, serviceOf } from './names';
import { seriesOf } from './series';
import { readSignals } from './signals';
import { readSpreadsheet } from './spreadsheet';
import type { Table } from './table';
import { deadTravel } from './travel';
import { conversion, convert, rangeIn, readRange, type StatedRange } from './units';

export interface ReadLoopOptions {
  /** Tag of the loop, needed where the export holds several. Default: from the column names, else the file name. */
  readonly tag?: string;
  /** Default: from the first letter of an ISA-5.1 tag, noted; else `other`. */
  readonly service?: Service;
  /** Default: from the service, noted. */
  readonly response?: Response;
  /**
   * Range of PV: numbers, or texts with units such as `0 l/s` and `30 l/s`, which are converted to the unit of PV.
   * Default: not known; PV is then shown without a share of its range.
   */
  readonly pvRange?: StatedRange;
  /**
   * Unit in which PV and SP are wanted. Where the export names another one, they are converted (mathjs); where it
   * names none, they are taken to be in this unit. Default: the unit of the export, else that of the range.
   */
  readonly pvUnit?: string;
  /**
   * OP at which this valve is closed (low) and open (high), % of OP span, for a split range; OP is then given in % of
   * travel. Default: OP's whole span is the travel.
   */
  readonly valveRange?: Range;
  /** Names of columns, or of tags in a long export. Default: found by their names, noted. */
  readonly time?: string;
  readonly sp?: string;
  readonly pv?: string;
  readonly op?: string;
  readonly travel?: string;
  readonly mode?: string;
  /** Format of the stamps in luxon's tokens, e.g. `dd.MM.yyyy HH:mm:ss`. Default: ISO 8601, or numbers since 1970. */
  readonly timeFormat?: string;
  /** Zone of stamps that carry none: an IANA name, UTC, or a distance such as UTC+2. Default: UTC, noted. */
  readonly zone?: string;
}

const OPTIONS = [
  'tag',
  'service',
  'response',
  'pvRange',
  'pvUnit',
  'valveRange',
  'time',
  'sp',
  'pv',
  'op',
  'travel',
  'mode',
  'timeFormat',
  'zone',
] as const;

const services: readonly Service[] = ['flow', 'pressure', 'level', 'temperature', 'other'];
const responses: readonly Response[] = ['self-regulating', 'integrating', 'unknown'];

/** OP further out than this is not in % (own choice; some controllers go from -25 to 125 %). */
const opEnds = { low: -30, high: 130 };
/** OP may leave the valve's range by this much, % of span: rounding and overtravel of the output (own choice). */
const pastSplit = 0.5;

/**
 * Reads one loop.
 *
 * A file may be .csv, .txt or .tsv (comma, semicolon or tab; decimal point or comma) or an Excel workbook; wide (a
 * column for each signal) or long (tag, time, value). The record is evenly spaced; OP, SP and PV are brought to common
 * samples by last value, never interpolated; manual stretches, bad values and long gaps are cut out and the longest
 * stretch kept. Whatever was assumed or left out is in the record's notes, and `logging` counts it.
 *
 * @param source path of the file, or a danfo DataFrame
 * @throws UnreadableInput for what cannot be read, with row and column
 * @throws WrongUse for unknown options and values of options that make no sense
 */
export function readLoop(source: string | DataFrameLike, options: ReadLoopOptions = {}): LoopRecord {
  refuseUnknownOptions('readLoop', options, OPTIONS);
  refuseUnknownValue('service', options.service, services);
  refuseUnknownValue('response', options.response, responses);
  const { table, name, what, sha256 } = openSource(source);
  const { series, notes: layoutNotes } = seriesOf(table, options.time, what);
  const chosen = chooseColumns(series, options, what);
  const signals = readSignals(chosen, options, what);
  const aligned = align(signals, table.rows, what);
  const notes: Note[] = [...table.notes, ...layoutNotes, ...chosen.notes, ...signals.notes, ...aligned.notes];

  const loop = loopName(options.tag, chosen.loop, name, notes);
  const service = options.service ?? assumedService(loop, notes);
  const response = options.response ?? assumedResponse(service, notes);
  const unit = unitOf(options, chosen, notes);
  const op = inTravel(checkedOp(aligned.op, chosen, what, notes), options.valveRange, what, notes);
  if (aligned.sp === null) {
    notes.push({ code: 'no-set-point', text: 'No SP was logged; what depends on it takes SP as constant.' });
  }
  let travel = aligned.travel;
  const dead = travel && deadTravel(travel, op);
  if (dead) {
    travel = null;
    notes.push({
      code: 'travel-not-alive',
      text: `The travel in "${chosen.travel?.name}" was left out: ${dead}.`,
    });
  }
  return {
    loop,
    service,
    response,
    source: name,
    sha256,
    start: new Date(aligned.start).toISOString(),
    samplePeriod: aligned.samplePeriod,
    pv: convert(aligned.pv, unit.toWanted),
    sp: aligned.sp && convert(aligned.sp, unit.toWanted),
    op,
    travel,
    pvUnit: unit.name,
    pvRange: unit.range,
    logging: aligned.logging,
    notes,
  };
}

function refuseUnknownValue(option: string, value: string | undefined, known: readonly string[]): void {
  if (value !== undefined && !known.includes(value)) {
    throw new WrongUse(`The option "${option}" is one of ${known.join(', ')}. Received "${value}".`);
  }
}

export interface OpenedSource {
  readonly table: Table;
  /** File name without folders, or `data frame`. */
  readonly name: string;
  /** How it is called in messages. */
  readonly what: string;
  readonly sha256: string;
}

/** @throws UnreadableInput for what is not there, is a folder, is empty, or holds no table */
export function openSource(source: string | DataFrameLike): OpenedSource {
  const hash = createHash('sha256');
  if (typeof source !== 'string') {
    const table = readDataFrame(source);
    const columns = table.names.map((column, i) => [column, table.cells(i)]);
    return {
      table,
      name: 'data frame',
      what: 'The data frame',
      sha256: hash.update(JSON.stringify(columns)).digest('hex'),
    };
  }
  const name = basename(source);
  const what = `The file ${name}`;
  const bytes = bytesOf(source, what);
  if (bytes.length === 0) throw new UnreadableInput(`${what} is empty.`);
  const sha256 = hash.update(bytes).digest('hex');
  // Workbooks are zip archives (PK) or, the old ones, compound files; a text file that is called .xlsx is read as text.
  const start = bytes.toString('latin1', 0, 4);
  const isBook = start.startsWith('PK') || start === '\u00d0\u00cf\u0011\u00e0';
  const table = isBook ? readSpreadsheet(bytes, what) : readDelimited(decodeText(bytes, what), what);
  return { table, name, what, sha256 };
}

function bytesOf(path: string, what: string): Buffer {
  try {
    if (statSync(path).isDirectory()) {
      throw new UnreadableInput(`"${path}" is a folder. Give the file of one loop.`);
    }
    return readFileSync(path);
  } catch (error) {
    if (error instanceof UnreadableInput) throw error;
    const { code, message } = error as NodeJS.ErrnoException;
    if (code === 'ENOENT') throw new UnreadableInput(`There is no file "${path}". Check the path.`);
    throw new UnreadableInput(`${what} cannot be read (${message}).`);
  }
}

function loopName(tag: string | undefined, fromColumns: string, file: string, notes: Note[]): string {
  if (tag !== undefined) return tag;
  if (fromColumns !== '') return fromColumns;
  const stem = basename(file, extname(file));
  const loop = isaTag(stem.replaceAll(' ', '_'))?.text ?? stem;
  notes.push({
    code: 'loop-from-source',
    text: `The loop is called "${loop}" after its source; state its tag with --tag.`,
  });
  return loop;
}

function assumedService(loop: string, notes: Note[]): Service {
  const tag = isaTag(loop);
  const service = tag && serviceOf(tag.letters);
  if (tag !== null && service !== null) {
    notes.push({
      code: 'service-assumed',
      text: `The service was taken from the first letter of ${tag.text}: ${service}. State another with --service.`,
    });
    return service;
  }
  notes.push({
    code: 'service-assumed',
    text: `The service is not known from "${loop}" and was set to other. State it with --service.`,
  });
  return 'other';
}

function assumedResponse(service: Service, notes: Note[]): Response {
  const response: Response =
    service === 'level' ? 'integrating' : service === 'other' ? 'unknown' : 'self-regulating';
  const text =
    response === 'unknown'
      ? 'How PV answers the valve is not known from the service. State it with --response.'
      : `The response was assumed from the service ${service}: ${response}. State another with --response.`;
  notes.push({ code: 'response-assumed', text });
  return response;
}

/** Unit in which PV is given, how the logged values get there, and the range in that unit. */
function unitOf(
  options: ReadLoopOptions,
  chosen: ChosenColumns,
  notes: Note[],
): { name: string; toWanted: { factor: number; offset: number }; range: Range | null } {
  const stated = options.pvRange === undefined ? null : readRange(options.pvRange, 'pvRange');
  const logged = chosen.pv.unit;
  const name = options.pvUnit ?? (logged || stated?.unit || '');
  if (options.pvUnit === undefined && name !== '') {
    notes.push({
      code: 'unit',
      text: `PV is taken to be in ${name}, as ${logged === '' ? 'its range is' : `the column "${chosen.pv.name}" says`}.`,
    });
  }
  const converts = logged !== '' && logged !== name;
  if (converts)
    notes.push({ code: 'unit-converted', text: `PV and SP were converted from ${logged} to ${name}.` });
  return {
    name,
    toWanted: converts ? conversion(logged, name) : { factor: 1, offset: 0 },
    range: stated && rangeIn(stated, name),
  };
}

function checkedOp(op: Float64Array, chosen: ChosenColumns, what: string, notes: Note[]): Float64Array {
  const { name, unit } = chosen.op;
  if (unit !== '' && !unit.includes('%') && !/percent|pct/i.test(unit)) {
    throw new UnreadableInput(
      `The column "${name}" of ${what} is in ${unit}. OP is needed in % of its span: convert it before reading.`,
    );
  }
  const low = op.reduce((a, b) => Math.min(a, b), Infinity);
  const high = op.reduce((a, b) => Math.max(a, b), -Infinity);
  if (low < opEnds.low || high > opEnds.high) {
    throw new UnreadableInput(
      `OP in the column "${name}" of ${what} goes from ${low} to ${high}. OP is needed in % of its span: convert it before reading, or name another column with --op.`,
    );
  }
  if (low >= 0 && high <= 1 && low < high) {
    notes.push({
      code: 'op-small',
      text: `OP stays between ${low} and ${high} and is read as %. If it was logged as a fraction of 1, multiply it by 100 before reading.`,
    });
  }
  return op;
}

/** OP in % of the valve's travel. */
function inTravel(op: Float64Array, range: Range | undefined, what: string, notes: Note[]): Float64Array {
  if (range === undefined) return op;
  const { low, high } = range;
  if (
    !(Number.isFinite(low) && Number.isFinite(high)) ||
    low === high ||
    Math.min(low, high) < 0 ||
    Math.max(low, high) > 100
  ) {
    throw new WrongUse(
      `The option "valveRange" needs the OP, 0 to 100 %, at which the valve is closed (low) and open (high). Received ${low} and ${high}.`,
    );
  }
  const out = op.find(
    (value) => value < Math.min(low, high) - pastSplit || value > Math.max(low, high) + pastSplit,
  );
  if (out !== undefined) {
    throw new UnreadableInput(
      `OP of ${what} reaches ${out} %, outside the valve range ${low} to ${high} %: the record crosses the split point, where another valve takes over. Read a stretch that stays on one valve.`,
    );
  }
  notes.push({
    code: 'valve-range',
    text: `OP was scaled from ${low} to ${high} % of its span to 0 to 100 % of travel; 1 % of travel is ${Math.abs(high - low) / 100} % of OP span.`,
  });
  return op.map((value) => (100 * (value - low)) / (high - low));
}
