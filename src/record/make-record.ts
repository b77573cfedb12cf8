/** From the chosen columns of a loop to its record: the way that every source ends in. */
import { extname } from 'node:path';
import { UnreadableInput, WrongUse } from '../errors';
import { align } from './align';
import type { ChosenColumns } from './columns';
import type { LoopRecord, Note, Range, Response, Service } from './loop-record';
import { isaTag, serviceOf } from './names';
import type { ReadLoopOptions } from './read-options';
import { readSignals } from './signals';
import { deadTravel } from './travel';
import { conversion, convert, rangeIn, readRange } from './units';

/** OP further out than this is not in % (own choice; some controllers go from -25 to 125 %). */
const opEnds = { low: -30, high: 130 };
/** OP may leave the valve's range by this much, % of span: rounding and overtravel of the output (own choice). */
const pastSplit = 0.5;

/** What is known of the source as a whole. */
export interface Logged {
  /** File name without folders, or `data frame`. */
  readonly name: string;
  /** How it is called in messages. */
  readonly what: string;
  readonly sha256: string;
  /** Rows of the export in which the loop is logged. */
  readonly rows: number;
  /** What was assumed up to here. */
  readonly notes: readonly Note[];
}

/** @throws UnreadableInput for what cannot be read, with row and column */
export function recordOf(logged: Logged, chosen: ChosenColumns, options: ReadLoopOptions): LoopRecord {
  const { name, what, sha256 } = logged;
  const signals = readSignals(chosen, options, what);
  const aligned = align(signals, logged.rows, what);
  const notes: Note[] = [...logged.notes, ...chosen.notes, ...signals.notes, ...aligned.notes];

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

function loopName(tag: string | undefined, fromColumns: string, file: string, notes: Note[]): string {
  if (tag !== undefined) return tag;
  if (fromColumns !== '') return fromColumns;
  const stem = file.slice(0, file.length - extname(file).length);
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
