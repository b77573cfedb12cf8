/** Reads a valve test from its record: a manual hold, a step test, or strokes. */
import { valveTestCautions } from '../assessment/cautions';
import { refuseUnknownOptions, UnreadableInput, WrongUse } from '../errors';
import type { DataFrameLike } from '../record/data-frame';
import type { Note } from '../record/loop-record';
import { mean } from '../signal/statistics';
import { type ActuatorFriction, type ActuatorSize, actuatorFriction } from './actuator-friction';
import { commandLegs, kindOf } from './command';
import { type HoldFindings, readHold } from './read-hold';
import { readSteps, type StepsFindings } from './read-steps';
import { readStroke, type StrokeFindings } from './read-stroke';
import {
  quantityIn,
  type ReadTestOptions,
  readTestOptions,
  readTestRecord,
  type TestRecord,
} from './test-record';
import type { ValveTestKind, ValveTestReading } from './valve-test-reading';

export interface ReadValveTestOptions extends ReadTestOptions {
  /** Default: from what the command did. */
  readonly kind?: ValveTestKind;
  /** For a hold without cycles before it: period, s, and peak-to-peak swing of PV as the assessment found them. */
  readonly period?: number;
  readonly swing?: number;
  /** Lag of the actuator behind the command, s, for strokes without pressure, e.g. the T63 of a step test. Default: not known. */
  readonly lag?: number;
  /** Effective area of diaphragm or piston with its unit, e.g. `645 cm2`: gives friction as a force. */
  readonly area?: string;
}

/** The reading and what it was made from, for figures and tables. */
export interface ValveTestFindings {
  readonly reading: ValveTestReading;
  readonly record: TestRecord;
  readonly hold: HoldFindings | null;
  readonly step: StepsFindings | null;
  readonly stroke: StrokeFindings | null;
  /** Spring and friction; null without strokes on which the actuator pressure was logged. */
  readonly friction: ActuatorFriction | null;
}

/**
 * Reads one valve test.
 *
 * Dead band, resolution and hysteresis are used as ISA-51.1, ANSI/ISA-75.25.01 and IEC 61298-2 define them (definitions
 * from memory). Dead band is counted from the command at the last movement before a reversal to the one at the first
 * movement after it. What the record does not resolve is null, with a note.
 *
 * @param source path of a file (CSV text or .xlsx), a data frame, or a record already read
 * @throws UnreadableInput for what cannot be read, a stroke without travel, and a hold without PV
 * @throws WrongUse for unknown options, and options that make no sense
 */
export function readValveTest(
  source: string | DataFrameLike | TestRecord,
  options: ReadValveTestOptions = {},
): ValveTestFindings {
  refuseUnknownOptions('readValveTest', options, [
    ...readTestOptions,
    'kind',
    'period',
    'swing',
    'lag',
    'area',
  ]);
  const { kind: statedKind, period, swing, lag, area, stroke: length, ...forFile } = options;
  const isRecord = typeof source !== 'string' && 'samplePeriod' in source;
  if (isRecord && Object.keys(forFile).length > 0) {
    throw new WrongUse(
      `Options that say how to read a file (${Object.keys(forFile).join(', ')}) do not go with a record that is read already.`,
    );
  }
  for (const [name, value] of Object.entries({ period, swing, lag })) {
    if (value !== undefined && !(value > 0 && Number.isFinite(value))) {
      throw new WrongUse(`The option "${name}" must be a number above 0. Received ${value}.`);
    }
  }
  const kinds: readonly ValveTestKind[] = ['hold', 'step', 'stroke'];
  if (statedKind !== undefined && !kinds.includes(statedKind)) {
    throw new WrongUse(`The option "kind" is one of ${kinds.join(', ')}. Received "${statedKind}".`);
  }
  const logged = isRecord
    ? (source as TestRecord)
    : readTestRecord(source as string | DataFrameLike, withStroke(forFile, length));
  const kind = statedKind ?? kindOf(logged.op, logged.automatic ?? null);
  const record = kind === 'stroke' ? risingWithCommand(logged) : logged;
  const what = record.source;
  const automatic = record.automatic ? mean(record.automatic) : 0;
  if (statedKind === undefined && kind !== 'hold' && automatic > 0.5) {
    throw new UnreadableInput(
      `${what} has the controller in automatic most of the time, so it is the record of a loop and no valve test: assess it with stickband assess. If it is a test after all, state its kind with --kind (option "kind").`,
    );
  }
  if (kind === 'hold' && record.pv === null) {
    throw new UnreadableInput(`${what} is a hold without PV. Whether the cycle died is seen in PV: log it.`);
  }
  if (kind === 'stroke' && record.travel === null) {
    throw new UnreadableInput(
      `${what} is a stroke without measured travel. Strokes are read from travel; without it make a step test.`,
    );
  }
  const hold = kind === 'hold' ? readHold(record, period ?? null, swing ?? null) : null;
  const step = kind === 'step' ? readSteps(record) : null;
  const stroke = kind === 'stroke' ? readStroke(record, lag ?? null) : null;
  const found = step ?? stroke;
  const frictionNotes: Note[] = [];
  const size: ActuatorSize = {
    area: area === undefined ? null : quantityIn(area, 'm^2', 'area'),
    stroke: length === undefined ? null : quantityIn(length, 'm', 'stroke'),
  };
  const friction = stroke && record.pressure ? actuatorFriction(record, stroke, size, frictionNotes) : null;
  const notes: Note[] = [
    ...(statedKind === undefined
      ? [
          {
            code: 'kind',
            text: `Read as a ${kind} test, by what the command did. State another kind if it was none.`,
          },
        ]
      : []),
    ...record.notes,
    ...(hold?.notes ?? []),
    ...(found?.notes ?? []),
    ...frictionNotes,
  ];
  return {
    reading: {
      schema: 'stickband/valve-test/1',
      kind,
      deadBand: found?.deadBand ?? null,
      resolution: found?.resolution ?? null,
      hysteresis: found?.hysteresis ?? null,
      steps: step?.steps ?? [],
      S: stroke?.S ?? null,
      J: stroke?.J ?? null,
      notes,
      cautions: valveTestCautions,
    },
    record,
    hold,
    step,
    stroke,
    friction,
  };
}

/** A stroke is read as travel that rises with the command; where it falls it is turned round, with a note. */
function risingWithCommand(record: TestRecord): TestRecord {
  const { op, travel } = record;
  if (travel === null) return record;
  // By where the stem stands from one turn of the command to the next: a sticky one may lag by more than a quarter cycle.
  const together = commandLegs(op).reduce(
    (sum, { from, to, direction }) => sum + direction * (travel[to]! - travel[from]!),
    0,
  );
  if (together >= 0) return record;
  return {
    ...record,
    travel: travel.map((value) => 100 - value),
    notes: [
      ...record.notes,
      {
        code: 'travel-turned-round',
        text: 'Travel falls as the command rises; it was turned round, so that 0 % here is what the record calls 100 %.',
      },
    ],
  };
}

function withStroke(options: ReadTestOptions, stroke: string | undefined): ReadTestOptions {
  return stroke === undefined ? options : { ...options, stroke };
}
