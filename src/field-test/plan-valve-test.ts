/**
 * Proposes tests of a valve inside limits that the user has to state: a manual hold, steps in a 1-2-5 series around S and
 * J, and a ramp. Every move is inside the limits, or there is no such test.
 */

import { valveTestCautions } from '../assessment/cautions';
import type { Findings } from '../assessment/findings';
import { WrongUse } from '../errors';
import type { Note, Range } from '../record/loop-record';
import { mean } from '../signal/statistics';
import { threeDigits } from '../signal/three-digits';
import { checkList, stopSentences } from './check-list';
import { shortestHold } from './read-hold';
import type {
  PlannedMove,
  PlannedTest,
  PlanRefusal,
  TypedValve,
  TypedValveBasis,
  ValveTestLimits,
  ValveTestPlan,
} from './valve-test-plan';
import type { ValveTestKind } from './valve-test-reading';

/** What each limit is, as asked for when it is missing. */
const asked: Readonly<Record<keyof ValveTestLimits, string>> = {
  opBand: 'opBand (lowest and highest OP of the test, %)',
  pvBand: 'pvBand (lowest and highest PV that operations agree to, unit of PV)',
  largestStep: 'largestStep (largest single step of OP, %)',
  longestHold: 'longestHold (longest time for which OP may stand still in manual, s)',
  hasSafetyFunction: 'hasSafetyFunction (true or false: does the valve have a safety function?)',
  isInTripPath: 'isInTripPath (true or false: is the valve in a trip path?)',
};

/** Periods that a hold should last (common practice, no source). */
const wantedPeriods = 5;
/** Steps of the 1-2-5 series that a test may use, %. */
const series: readonly number[] = [0.1, 0.2, 0.5, 1, 2, 5, 10];
/** The small steps resolve S to a quarter or better (own choice). */
const smallStepShare = 0.25;
/** More small steps than this in one direction are no sensible test (own choice). */
const mostSteps = 40;
/** A response has settled after its dead time and this many lags (98 %); a valve needs some seconds itself. */
const settledLags = 4;
const valveSeconds = 5;
/** Steps of a series beyond S: the largest is the first that is this much larger. */
const beyond = 1.5;
/** A ramp passes S in at least this many seconds and this many response times, so that it reads as slow (own choice). */
const rampThrough = { seconds: 60, responses: 8 };
/** Room between expected PV and the ends of the band, share of the band (own choice). */
const leastRoom = 0.05;
/** Share of the way from expected PV to the band at which the test is stopped. */
const stopShare = 0.5;

/**
 * @param valve findings of an assessment, or what is known of valve and loop
 * @param limits all six of them: there are no defaults
 * @throws WrongUse that names each limit which is missing or makes no sense
 */
export function planValveTest(valve: Findings | TypedValve, limits: ValveTestLimits): ValveTestPlan {
  checkLimits(limits);
  const basis = 'assessment' in valve ? basisOf(valve) : typedBasis(valve);
  const plan = {
    schema: 'stickband/valve-test-plan/1',
    standing: 'proposal, not released',
    loop: basis.loop,
    pvUnit: basis.pvUnit,
    limits,
    basis,
    checkList,
    cautions: valveTestCautions,
  } as const;
  const refused = [...refusals(basis, limits), ...('assessment' in valve ? splitRange(valve) : [])];
  if (refused.length > 0) return { ...plan, tests: [], refused, leftOut: [], stopWhen: [], notes: [] };

  const made = [holdTest(basis, limits), stepTest(basis, limits), rampTest(basis, limits)];
  const tests = made.flatMap(({ test }) => test ?? []);
  const leftOut = made.flatMap(({ kind, test, why }) => (test ? [] : [{ kind, text: why }]));
  if (tests.length === 0) {
    const text = `No sensible test fits the limits. ${leftOut.map((one) => one.text).join(' ')}`;
    const nothing: PlanRefusal = { code: 'nothing-fits', text };
    return { ...plan, tests, refused: [nothing], leftOut, stopWhen: [], notes: [] };
  }
  return {
    ...plan,
    tests,
    refused: [],
    leftOut,
    stopWhen: stopSentences(tests, basis.pvUnit),
    notes: notesOn(basis),
  };
}

function checkLimits(limits: ValveTestLimits): void {
  const given = (limits ?? {}) as unknown as Record<string, unknown>;
  const missing = Object.entries(asked).filter(([name]) => given[name] === undefined || given[name] === null);
  if (missing.length > 0) {
    throw new WrongUse(
      `A valve test is planned only inside limits that you state; none has a default. Missing: ${missing.map(([, what]) => what).join('; ')}.`,
    );
  }
  for (const name of Object.keys(given)) {
    if (!(name in asked)) {
      throw new WrongUse(
        `A plan knows no limit "${name}". Its limits are: ${Object.keys(asked).join(', ')}.`,
      );
    }
  }
  const { opBand, pvBand, largestStep, longestHold } = limits;
  const wrong: string[] = [];
  const isRange = (range: Range): boolean =>
    Number.isFinite(range.low) && Number.isFinite(range.high) && range.low < range.high;
  if (!isRange(opBand) || opBand.low < 0 || opBand.high > 100) {
    wrong.push(`opBand goes from a low to a higher OP within 0 to 100 %, received ${JSON.stringify(opBand)}`);
  }
  if (!isRange(pvBand))
    wrong.push(`pvBand goes from a low to a higher PV, received ${JSON.stringify(pvBand)}`);
  for (const [name, value] of Object.entries({ largestStep, longestHold })) {
    if (!(value > 0 && Number.isFinite(value))) wrong.push(`${name} is a number above 0, received ${value}`);
  }
  for (const name of ['hasSafetyFunction', 'isInTripPath'] as const) {
    if (typeof limits[name] !== 'boolean')
      wrong.push(`${name} is true or false, received ${String(limits[name])}`);
  }
  if (wrong.length > 0) throw new WrongUse(`These limits make no sense: ${wrong.join('; ')}.`);
}

function basisOf({ assessment, record, stiction, opCycle, pvCycle }: Findings): TypedValveBasis {
  const fit = stiction.fit;
  return {
    from: 'assessment',
    loop: assessment.loop,
    S: fit?.S.high ?? null,
    J: fit?.J?.high ?? null,
    op: Math.round(10 * mean(record.op)) / 10,
    pv: mean(record.pv),
    pvSwing: assessment.severity.pvSwing,
    pvUnit: record.pvUnit,
    period: opCycle.period ?? pvCycle.period,
    process: fit?.process ?? null,
  };
}

function typedBasis(valve: TypedValve): TypedValveBasis {
  const { S, J, op, pv, pvSwing, period, process } = valve;
  const numbers: [string, number | null, (value: number) => boolean, string][] = [
    ['S', S, (value) => value > 0, 'above 0'],
    ['J', J, (value) => value >= 0, '0 or more, or null'],
    ['op', op, (value) => value >= 0 && value <= 100, 'from 0 to 100'],
    ['pv', pv, () => true, 'a number'],
    ['pvSwing', pvSwing, (value) => value >= 0, '0 or more'],
    ['period', period, (value) => value > 0, 'above 0, or null'],
    ['process.gain', process?.gain ?? null, (value) => value !== 0, 'other than 0'],
    ['process.deadTime', process?.deadTime ?? null, (value) => value >= 0, '0 or more'],
    ['process.lag', process?.lag ?? null, (value) => value >= 0, '0 or more, or null'],
  ];
  const nullable = ['J', 'period', 'process.gain', 'process.deadTime', 'process.lag'];
  const wrong = numbers
    .filter(([name, value, holds]) =>
      value === null ? !nullable.includes(name) : !(Number.isFinite(value) && holds(value)),
    )
    .map(([name, value, , what]) => `${name} is ${what}, received ${String(value)}`);
  if (wrong.length > 0) throw new WrongUse(`A valve test cannot be planned from this: ${wrong.join('; ')}.`);
  return { ...valve, from: 'typed' };
}

function refusals(basis: TypedValveBasis, limits: ValveTestLimits): PlanRefusal[] {
  const { opBand, pvBand } = limits;
  const found: PlanRefusal[] = [];
  if (limits.hasSafetyFunction) {
    found.push({
      code: 'safety-function',
      text: 'The valve has a safety function. It is tested by the procedure that belongs to that function, never by this plan.',
    });
  }
  if (limits.isInTripPath) {
    found.push({
      code: 'trip-path',
      text: 'The valve is in a trip path. Moving it may trip the plant or hide a trip: its own procedure applies, not this plan.',
    });
  }
  if (basis.op < opBand.low || basis.op > opBand.high) {
    found.push({
      code: 'op-near-limit',
      text: `OP runs around ${threeDigits(basis.op)} %, outside the band of ${opBand.low} to ${opBand.high} %: no test starts there.`,
    });
  }
  const low = basis.pv - basis.pvSwing / 2;
  const high = basis.pv + basis.pvSwing / 2;
  if (low <= pvBand.low || high >= pvBand.high) {
    found.push({
      code: 'pv-near-limit',
      text: `PV swings between ${threeDigits(low)} and ${threeDigits(high)} ${basis.pvUnit} already, at or beyond the band of ${pvBand.low} to ${pvBand.high}: there is no room for a test.`,
    });
  }
  return found;
}

/** Of a record that was read with a valve range OP is in % of travel, and limits in % of OP would not hold. */
function splitRange({ record }: Findings): PlanRefusal[] {
  if (!record.notes.some(({ code }) => code === 'valve-range')) return [];
  return [
    {
      code: 'split-range',
      text: 'The record was read with a valve range, so that its OP is in % of travel while limits are in % of OP. Type what is known of the valve instead, all of it in % of OP.',
    },
  ];
}

interface Made {
  readonly kind: ValveTestKind;
  readonly test: PlannedTest | null;
  /** Why there is none; ''. */
  readonly why: string;
}

/** Whether PV stays inside the band, with room to stop before its ends. */
function inside(expected: Range, band: Range): boolean {
  const room = leastRoom * (band.high - band.low);
  return expected.low > band.low + room && expected.high < band.high - room;
}

function stopAt(expected: Range, band: Range): Range {
  return {
    low: expected.low - stopShare * (expected.low - band.low),
    high: expected.high + stopShare * (band.high - expected.high),
  };
}

function holdTest(
  { period, pv, pvSwing, op, process }: TypedValveBasis,
  { longestHold, pvBand }: ValveTestLimits,
): Made {
  const without = (why: string): Made => ({ kind: 'hold', test: null, why });
  if (period === null) return without('A hold needs a cycle whose period is known.');
  const mostPeriods = Math.min(wantedPeriods, longestHold / period);
  // Where the process settles PV stays within its swing, and as much again for what else moves it. Where it integrates,
  // or may, it runs on at the slope that it has in the cycle.
  const settles = process?.response === 'self-regulating';
  const expectedFor = (periods: number): Range => {
    const reach = settles ? pvSwing : pvSwing / 2 + 2 * pvSwing * periods;
    return { low: pv - reach, high: pv + reach };
  };
  let periods = mostPeriods;
  while (periods >= shortestHold && !inside(expectedFor(periods), pvBand)) periods -= 0.5;
  if (periods < shortestHold) {
    return without(
      mostPeriods < shortestHold
        ? `A hold of ${shortestHold} periods takes ${threeDigits(shortestHold * period)} s, longer than the longest hold of ${longestHold} s.`
        : `In a hold of ${shortestHold} periods PV may run out of its band.`,
    );
  }
  const hold = Math.min(longestHold, periods * period);
  const expectedPv = expectedFor(periods);
  const test: PlannedTest = {
    kind: 'hold',
    title: `Manual hold for ${threeDigits(hold / period)} periods`,
    purpose:
      'A cycle that dies was made in the loop; one that stays comes from outside. First, as it moves nothing.',
    startOp: op,
    moves: [{ op, rate: null, hold }],
    duration: hold,
    expectedPv,
    stopPv: stopAt(expectedPv, pvBand),
    stepsInPv: [],
  };
  return { kind: 'hold', test, why: '' };
}

/** How long PV takes to answer a step, s. */
function responseTime({ process }: TypedValveBasis): number {
  const { deadTime, lag } = process!;
  return deadTime + settledLags * (lag ?? 0);
}

/** Room for OP on either side of where it is, %: the larger side first. */
function sides({ op }: TypedValveBasis, { opBand }: ValveTestLimits): { sign: 1 | -1; room: number }[] {
  const up = { sign: 1 as const, room: opBand.high - op };
  const down = { sign: -1 as const, room: op - opBand.low };
  return up.room >= down.room ? [up, down] : [down, up];
}

const notKnown =
  'Steps and ramps need S and the process between valve and PV, so that the expected movement of PV can be stated.';

/**
 * A gain that was fitted together with S and J may be too small, the more so where J was not resolved: expected PV gets
 * room for a larger one (own choice). A typed gain is taken as it is.
 */
function gainRoom({ from, J }: TypedValveBasis): number {
  return from === 'typed' ? 1 : J === null ? 2 : 1.5;
}

/** Where PV goes when OP goes `reach` % to one side; the stem may lag and jump by J, and started anywhere in its stick band. */
function pvReach(basis: TypedValveBasis, sign: 1 | -1, reach: number, jump: number, seconds: number): Range {
  const { process, pv, pvSwing } = basis;
  const { response } = process!;
  const gain = process!.gain * gainRoom(basis);
  const moves =
    response === 'self-regulating'
      ? [sign * gain * (reach + jump), -sign * gain * jump]
      : // An integrating PV runs as long as travel is off balance: by the whole reach, and by what the stem was off.
        [1, -1].map((way) => way * gain * (reach + jump + basis.S!) * seconds);
  return {
    low: pv - pvSwing / 2 + Math.min(0, ...moves),
    high: pv + pvSwing / 2 + Math.max(0, ...moves),
  };
}

function stepTest(basis: TypedValveBasis, limits: ValveTestLimits): Made {
  const without = (why: string): Made => ({ kind: 'step', test: null, why });
  const { S, process, op } = basis;
  if (S === null || process === null) return without(notKnown);
  const jump = basis.J ?? S;
  const hold = Math.ceil(Math.max(2 * valveSeconds, responseTime(basis) + valveSeconds));
  if (hold > limits.longestHold) {
    return without(
      `A step needs ${hold} s for the response to settle, longer than the longest hold of ${limits.longestHold} s.`,
    );
  }
  const fitting = series.filter(
    (size) => size <= limits.largestStep && size <= Math.max(smallStepShare * S, series[0]!),
  );
  if (fitting.length === 0) {
    return without(
      `The largest step of ${limits.largestStep} % is below the smallest of the series, ${series[0]} %.`,
    );
  }
  // Of several reasons the one of the side with more room counts, for the largest of the small steps.
  let why = '';
  for (const small of [...fitting].reverse()) {
    // Enough to break loose from anywhere in the stick band, and two steps that move it for certain.
    const count = Math.ceil((S + jump) / small) + 2;
    if (count > mostSteps) {
      why ||= `Steps small enough to resolve S would be more than ${mostSteps} in one direction.`;
      break;
    }
    const reach = count * small;
    for (const { sign, room } of sides(basis, limits)) {
      if (reach > room) {
        why ||= `The test has to move OP by ${threeDigits(reach)} % to one side, and the band leaves ${threeDigits(room)} %: OP is too near a limit.`;
        continue;
      }
      const offsets = smallSteps(count, small);
      let furthest = reach;
      const expectedFor = (far: number, moves: number): Range =>
        pvReach(basis, sign, far, jump, moves * hold);
      if (!inside(expectedFor(reach, offsets.length), limits.pvBand)) {
        why ||= 'Steps that show the dead band would move PV out of its band.';
        continue;
      }
      // Larger steps for the response times, as far as OP and PV leave room: twice up, twice down.
      for (const size of series.filter((one) => one > small && one <= limits.largestStep)) {
        const far = Math.max(furthest, 2 * size);
        if (far > room || !inside(expectedFor(far, offsets.length + 4), limits.pvBand)) break;
        furthest = far;
        offsets.push(size, 2 * size, size, 0);
        if (size >= beyond * S) break;
      }
      const moves = offsets.map((offset): PlannedMove => ({ op: op + sign * offset, rate: null, hold }));
      const duration = moves.length * hold;
      const expectedPv = expectedFor(furthest, moves.length);
      const sizes = [
        ...new Set(offsets.map((offset, i) => rounded(Math.abs(offset - (offsets[i - 1] ?? 0))))),
      ];
      const stepsInPv = sizes
        .filter((size) => size > 0)
        .sort((a, b) => a - b)
        .map((step) => ({ step, pv: Math.abs(process.gain) * step }));
      const test: PlannedTest = {
        kind: 'step',
        title: `Steps of ${sizes
          .filter((size) => size > 0)
          .sort((a, b) => a - b)
          .join(', ')} % with reversals`,
        purpose:
          'Small steps in one direction, then back: they measure dead band and resolution; the larger ones the response times.',
        startOp: op,
        moves,
        duration,
        expectedPv,
        stopPv: stopAt(expectedPv, limits.pvBand),
        stepsInPv,
      };
      return { kind: 'step', test, why: '' };
    }
  }
  return without(why);
}

/** Offsets from the start: up in small steps, all the way down, up and down again, so that there are three reversals. */
function smallSteps(count: number, small: number): number[] {
  const up = Array.from({ length: count }, (_, i) => rounded((i + 1) * small));
  const down = [...up.slice(0, -1).reverse(), 0];
  return [...up, ...down, ...up, ...down];
}

function rampTest(basis: TypedValveBasis, limits: ValveTestLimits): Made {
  const without = (why: string): Made => ({ kind: 'stroke', test: null, why });
  const { S, process, op } = basis;
  if (S === null || process === null) return without(notKnown);
  const jump = basis.J ?? S;
  const seconds = Math.max(rampThrough.seconds, rampThrough.responses * responseTime(basis));
  // As a rate a minute from the 1-2-5 series, so that it can be typed in; a scan moves OP by less than the largest step.
  const wanted = Math.min((60 * S) / seconds, 60 * limits.largestStep);
  const decade = 10 ** Math.floor(Math.log10(wanted));
  const rate = (decade * [5, 2, 1].find((one) => one * decade <= wanted * (1 + 1e-9))!) / 60;
  const hold = Math.min(limits.longestHold, Math.ceil(responseTime(basis) + valveSeconds));
  const reach = rounded(2 * S + jump);
  let why = '';
  for (const { sign, room } of sides(basis, limits)) {
    if (reach > room) {
      why ||= `A ramp has to move OP by ${threeDigits(reach)} % to one side, and the band leaves ${threeDigits(room)} %: OP is too near a limit.`;
      continue;
    }
    const moves = [reach, 0, reach, 0].map((offset): PlannedMove => ({ op: op + sign * offset, rate, hold }));
    const duration = moves.length * (reach / rate + hold);
    const expectedPv = pvReach(basis, sign, reach, jump, duration);
    if (!inside(expectedPv, limits.pvBand)) {
      why ||= 'A ramp that shows the dead band would move PV out of its band.';
      continue;
    }
    const test: PlannedTest = {
      kind: 'stroke',
      title: `Ramp of ${threeDigits(reach)} % up and down twice at ${threeDigits(60 * rate)} % a minute`,
      purpose:
        'Shows dead band, jumps and hysteresis over a stretch of the stroke; worth making where travel is logged, more so with actuator pressure.',
      startOp: op,
      moves,
      duration,
      expectedPv,
      stopPv: stopAt(expectedPv, limits.pvBand),
      stepsInPv: [{ step: reach, pv: Math.abs(process.gain) * reach }],
    };
    return { kind: 'stroke', test, why: '' };
  }
  return without(why);
}

function notesOn(basis: TypedValveBasis): Note[] {
  const { from, op, pv, pvUnit, J, S, process } = basis;
  const notes: Note[] = [
    {
      code: 'starting-point',
      text: `The plan holds for OP near ${threeDigits(op)} % and PV near ${threeDigits(pv)} ${pvUnit}. Where they differ on the day, make a new one.`,
    },
  ];
  if (from === 'assessment' && S !== null) {
    notes.push({
      code: 'high-ends',
      text: 'S and J are taken at the high ends of their intervals, so that the steps suffice.',
    });
  }
  if (S !== null && J === null)
    notes.push({ code: 'jump-as-large', text: 'J is not known and is taken to be as large as S.' });
  if (process) {
    const per = process.response === 'integrating' ? `${pvUnit} per % and s` : `${pvUnit} per %`;
    notes.push({
      code: 'expected-pv',
      text: `Expected PV comes from a process gain of ${threeDigits(process.gain)} ${per}${from === 'assessment' ? `, as fitted to the record, with room for ${gainRoom(basis)} times as much` : ''}. If the first steps move PV by more, stop.`,
    });
  }
  return notes;
}

/** Without what binary fractions leave behind. */
function rounded(value: number): number {
  return Math.round(value * 1e6) / 1e6;
}
