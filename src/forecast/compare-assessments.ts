/**
 * Whether a repair worked, from the assessments before and after it. "Repaired" needs two things: the cycle gone under
 * comparable tuning, load and record length, and a bound from above on what dead band is left. A cycle can also go
 * because the load, the tuning or the season changed.
 */
import { cautions } from '../assessment/cautions';
import type { Findings } from '../assessment/findings';
import { duration, withInterval } from '../assessment/make-answer-card';
import { refuseUnknownOptions, WrongUse } from '../errors';
import type { ValveTestReading } from '../field-test/valve-test-reading';
import { findCycle } from '../oscillation/find-cycle';
import type { LoopRecord } from '../record/loop-record';
import { mean } from '../signal/statistics';
import { version } from '../version';
import { boundDeadBand, type DeadBandBound } from './bound-dead-band';
import { swingWithin } from './cycle-measure';

export type RepairAnswer =
  | 'repaired'
  | 'cycle-gone'
  | 'improved'
  | 'no-change-shown'
  | 'worse'
  | 'cannot-tell';

export interface CompareOptions {
  /** A step or stroke test after the repair. Default null: only the record speaks. */
  readonly valveTest?: ValveTestReading | null;
  /** Largest dead band that counts as repaired, % of OP span. Default 1: common practice, no source. */
  readonly acceptedDeadBand?: number;
  /** State that the tuning is the same where it cannot be read from both records. Default false. */
  readonly tuningUnchanged?: boolean;
}

/** One thing set side by side. */
export interface ComparedRow {
  readonly what: string;
  readonly before: string;
  readonly after: string;
  /** Whether it is alike enough to compare the cycles; null where it is a result, not a condition. */
  readonly alike: boolean | null;
  /** The limit, or why it is not alike. */
  readonly note: string;
}

export interface RepairComparison {
  readonly schema: 'stickband/comparison/1';
  readonly loop: string;
  readonly answer: RepairAnswer;
  readonly inWords: string;
  readonly reasons: readonly string[];
  readonly rows: readonly ComparedRow[];
  /** Smallest upper bound on the dead band after the repair, % of OP span, and where it is from; null without one. */
  readonly deadBandBelow: { readonly value: number; readonly from: string } | null;
  /** What the set-point moves of the later record say; null where they were not needed. */
  readonly setPointMoves: DeadBandBound | null;
  readonly cautions: readonly string[];
  /** Fingerprints of both records, version and options. */
  readonly provenance: {
    readonly version: string;
    readonly options: object;
    readonly before: string;
    readonly after: string;
  };
}

/** Own choices: how far two records may differ and still be compared. */
const alike = { tuning: 0.25, op: 10, pvOfRange: 10, cycles: 10, samplePeriod: 2 };
/** A cycle is gone when PV moves less than this share of its swing within one of its periods. Own choice. */
const mostLeft = 0.5;
/** PV swings that differ by less than a third, either way, are no change. Own choice. */
const changed = 1.5;

const words: Record<RepairAnswer, string> = {
  repaired: 'Repaired: the cycle is gone and little dead band is left.',
  'cycle-gone': 'Cycle gone, valve not shown repaired.',
  improved: 'Improved, not repaired.',
  'no-change-shown': 'No change shown.',
  worse: 'Worse.',
  'cannot-tell': 'Cannot tell.',
};

/**
 * Compares a loop before and after work on its valve.
 *
 * @throws WrongUse for two loops of different names, an accepted dead band that is not above 0, or an unknown option
 */
export function compareAssessments(
  before: Findings,
  after: Findings,
  options: CompareOptions = {},
): RepairComparison {
  refuseUnknownOptions('compareAssessments', options, ['valveTest', 'acceptedDeadBand', 'tuningUnchanged']);
  const { valveTest = null, acceptedDeadBand = 1, tuningUnchanged = false } = options;
  if (before.record.loop !== after.record.loop) {
    throw new WrongUse(
      `Two records of one loop are compared. Received ${before.record.loop} and ${after.record.loop}.`,
    );
  }
  if (!(acceptedDeadBand > 0)) {
    throw new WrongUse(`The accepted dead band must be above 0 % of OP span. Received ${acceptedDeadBand}.`);
  }
  const period = before.assessment.oscillation.period;
  const conditions = [
    tuningRow(before, after, tuningUnchanged),
    ...loadRows(before, after),
    ...lengthRows(before, after),
  ];
  const results = resultRows(before, after);
  const base = {
    schema: 'stickband/comparison/1' as const,
    loop: before.record.loop,
    rows: [...conditions, ...results],
    cautions,
    provenance: {
      version,
      options: { acceptedDeadBand, tuningUnchanged, valveTest: valveTest?.kind ?? null },
      before: before.record.sha256,
      after: after.record.sha256,
    },
  };
  const answered = (
    answer: RepairAnswer,
    reasons: readonly string[],
    deadBandBelow: RepairComparison['deadBandBelow'] = null,
    setPointMoves: DeadBandBound | null = null,
  ): RepairComparison => ({ ...base, answer, inWords: words[answer], reasons, deadBandBelow, setPointMoves });

  if (!before.assessment.oscillation.present || period === null) {
    return answered('cannot-tell', [
      'The earlier record shows no cycle, so there is nothing whose end could be shown.',
    ]);
  }
  if (!after.fitness.allows.cycle) {
    return answered('cannot-tell', [
      'The later record is not fit to tell whether it cycles.',
      after.fitness.recordToAskFor,
    ]);
  }
  const unlike = conditions.filter((row) => row.alike === false);
  if (unlike.length > 0) {
    return answered(
      'cannot-tell',
      unlike.map((row) => `${row.what} differs: ${row.before} before, ${row.after} after. ${row.note}`),
    );
  }

  const moved = ({ record }: Findings): number => swingWithin(deviation(record), period, record.samplePeriod);
  const share = moved(after) / moved(before);
  const cycling = stillCycles(after);
  const percent = `${Math.round(100 * share)} %`;
  if (!cycling && share <= mostLeft) {
    const gone = `The cycle is gone: within one of its former periods (${duration(period)}) PV now moves by ${percent} of the former swing.`;
    const moves = boundFromMoves(before, after, period);
    const bound = deadBandBound(after, valveTest, moves);
    if (bound === null) {
      return answered(
        'cycle-gone',
        [gone, `Nothing bounds the dead band that is left: ${noTest(valveTest)} ${moves.why}`],
        null,
        moves,
      );
    }
    const was = before.stiction.fit?.S.low ?? Number.POSITIVE_INFINITY;
    const said = `${bound.from} puts the dead band below ${bound.value.toPrecision(2)} %`;
    if (bound.value > acceptedDeadBand) {
      return answered(
        'cycle-gone',
        [gone, `${said}; at most ${acceptedDeadBand} % is asked for.`],
        bound,
        moves,
      );
    }
    if (bound.value >= was) {
      return answered(
        'cycle-gone',
        [gone, `${said}, which is not below the ${was.toPrecision(2)} % that it had at least before.`],
        bound,
        moves,
      );
    }
    return answered('repaired', [gone, `${said}; up to ${acceptedDeadBand} % is accepted.`], bound, moves);
  }
  return answered(...stillMoving(before, after, share, cycling));
}

/** PV from its set point, so that moves of the set point do not count; PV itself where none was logged. */
function deviation({ sp, pv }: LoopRecord): Float64Array {
  return sp === null ? pv : pv.map((value, k) => value - sp[k]!);
}

/** A cycle that is seen in PV and OP but not in PV's distance from a moving set point follows the set point. */
function stillCycles({ assessment, record }: Findings): boolean {
  if (!assessment.oscillation.present) return false;
  const moves = record.sp?.some((value, k) => k > 0 && value !== record.sp![k - 1]) ?? false;
  return !moves || findCycle(deviation(record), record.samplePeriod).present;
}

function stillMoving(
  before: Findings,
  after: Findings,
  share: number,
  cycling: boolean,
): [RepairAnswer, string[]] {
  const swing = `PV swings by ${Math.round(100 * share)} % of what it did.`;
  const S = { before: before.stiction.fit?.S ?? null, after: after.stiction.fit?.S ?? null };
  const lower = S.before !== null && S.after !== null && S.after.high < S.before.low;
  const higher = S.before !== null && S.after !== null && S.after.low > S.before.high;
  const band =
    S.before === null || S.after === null
      ? 'The dead band was not told in both records.'
      : `The dead band was ${withInterval(S.before)} and is ${withInterval(S.after)}.`;
  const reasons = [
    cycling ? 'The loop still cycles.' : 'No regular cycle is left, but PV still moves.',
    swing,
    band,
  ];
  const smaller = share <= 1 / changed;
  const larger = share >= changed;
  if ((lower && larger) || (higher && smaller)) {
    return ['cannot-tell', [...reasons, 'Swing and dead band contradict each other.']];
  }
  if (lower || smaller) return ['improved', reasons];
  if (higher || larger) return ['worse', reasons];
  return ['no-change-shown', [...reasons, 'The intervals overlap and the swing differs by less than half.']];
}

function noTest(test: ValveTestReading | null): string {
  if (test === null) return 'no step or stroke test was given.';
  if (test.kind === 'hold') return 'a hold test does not measure the dead band.';
  return 'the valve test did not give a dead band.';
}

function deadBandBound(
  after: Findings,
  test: ValveTestReading | null,
  moves: DeadBandBound,
): RepairComparison['deadBandBelow'] {
  // A test on site goes before logged travel, and that before what set-point moves show in PV.
  const tested = test === null || test.kind === 'hold' ? null : (test.deadBand ?? test.S);
  if (tested !== null) return { value: tested.high, from: `The ${test!.kind} test` };
  const { fit } = after.stiction;
  if (fit?.travelSource === 'measured') return { value: fit.S.high, from: 'The logged travel' };
  if (moves.below === null) return null;
  return { value: Math.max(moves.below, fit?.S.high ?? 0), from: 'The answer of PV to set-point moves' };
}

function boundFromMoves(before: Findings, after: Findings, period: number): DeadBandBound {
  const process = before.stiction.drawn?.process ?? after.stiction.drawn?.process ?? null;
  const gain = process?.gain ?? before.assessment.controller?.gain ?? 1;
  return boundDeadBand(after.record, {
    period,
    integrating: (process?.response ?? after.record.response) === 'integrating',
    sign: gain > 0 ? 1 : -1,
  });
}

function tuningRow(before: Findings, after: Findings, unchanged: boolean): ComparedRow {
  const [one, other] = [before.assessment.controller, after.assessment.controller];
  const told = (controller: typeof one): string =>
    controller === null
      ? 'not read'
      : `${controller.form}, gain ${short(controller.gain)}${controller.integralTime === null ? '' : `, integral time ${short(controller.integralTime)} s`}`;
  const row = { what: 'Tuning, as read', before: told(one), after: told(other) };
  const read = [one, other].every((controller) => controller !== null && controller.explains >= 0.6);
  if (!read || one === null || other === null) {
    return unchanged
      ? { ...row, alike: true, note: 'Stated as unchanged.' }
      : {
          ...row,
          alike: false,
          note: 'It cannot be read from both records; state tuningUnchanged if it is known to be the same.',
        };
  }
  const off = (a: number | null, b: number | null): number =>
    a === null || b === null ? (a === b ? 0 : Number.POSITIVE_INFINITY) : Math.abs(Math.log(Math.abs(a / b)));
  const limit = Math.log(1 + alike.tuning);
  const same =
    Math.sign(one.gain) === Math.sign(other.gain) &&
    off(one.gain, other.gain) <= limit &&
    off(one.integralTime, other.integralTime) <= limit;
  return { ...row, alike: same, note: `Alike within ${100 * alike.tuning} % (own choice).` };
}

function loadRows(before: Findings, after: Findings): ComparedRow[] {
  const op = [mean(before.record.op), mean(after.record.op)] as const;
  const pv = [mean(before.record.pv), mean(after.record.pv)] as const;
  const { pvRange, pvUnit } = before.record;
  const span = pvRange === null ? Math.abs(pv[0]) : pvRange.high - pvRange.low;
  const unit = pvUnit === '' ? '' : ` ${pvUnit}`;
  return [
    {
      what: 'Mean OP',
      before: `${op[0].toFixed(1)} %`,
      after: `${op[1].toFixed(1)} %`,
      alike: Math.abs(op[0] - op[1]) <= alike.op,
      note: `Alike within ${alike.op} % of span (own choice).`,
    },
    {
      what: 'Mean PV',
      before: `${short(pv[0])}${unit}`,
      after: `${short(pv[1])}${unit}`,
      alike: Math.abs(pv[0] - pv[1]) <= (alike.pvOfRange / 100) * span,
      note: `Alike within ${alike.pvOfRange} % of ${pvRange === null ? 'its value' : 'its range'} (own choice).`,
    },
  ];
}

function lengthRows(before: Findings, after: Findings): ComparedRow[] {
  const length = ({ record }: Findings): number => record.op.length * record.samplePeriod;
  const period = before.assessment.oscillation.period;
  const told = (findings: Findings): string => {
    const periods = period === null ? '' : `, ${(length(findings) / period).toFixed(1)} former periods`;
    return `${duration(length(findings))}${periods}`;
  };
  const sampled = ({ record }: Findings): number => record.samplePeriod;
  return [
    {
      what: 'Record length',
      before: told(before),
      after: told(after),
      alike: period === null || length(after) / period >= alike.cycles,
      note: `The later record must cover at least ${alike.cycles} former periods (own choice).`,
    },
    {
      what: 'Sample period',
      before: `${short(sampled(before))} s`,
      after: `${short(sampled(after))} s`,
      alike: sampled(after) <= alike.samplePeriod * sampled(before),
      note: `The later record must be sampled no more than ${alike.samplePeriod} times as slowly (own choice).`,
    },
  ];
}

function resultRows(before: Findings, after: Findings): ComparedRow[] {
  const { pvUnit } = before.record;
  const period = before.assessment.oscillation.period;
  const row = (what: string, of: (findings: Findings) => string, note = ''): ComparedRow => ({
    what,
    before: of(before),
    after: of(after),
    alike: null,
    note,
  });
  return [
    row('Cycle', ({ assessment: { oscillation } }) =>
      oscillation.present && oscillation.period !== null ? `every ${duration(oscillation.period)}` : 'none',
    ),
    row(
      `PV swing${pvUnit === '' ? '' : `, ${pvUnit}`}`,
      ({ record }) =>
        period === null ? 'not told' : short(swingWithin(deviation(record), period, record.samplePeriod)),
      'From its set point, within one of the former periods, median.',
    ),
    row('Dead band S', ({ stiction }) =>
      stiction.fit === null ? 'no number' : withInterval(stiction.fit.S),
    ),
    row('Cause as named', ({ assessment }) => assessment.cause.verdict),
  ];
}

function short(value: number): string {
  return String(Number(value.toPrecision(3)));
}
