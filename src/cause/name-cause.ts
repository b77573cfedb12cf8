/**
 * Names what makes the cycle, with reasons and what was ruled out, or says that the record cannot tell.
 *
 * The valve is accused only when it predicts PV better than a straight line does, block after block, and still does
 * once a steady line in OP is taken out of the comparison. Without valve evidence a steady line points outside the
 * loop, and a wandering, linearly predictable cycle with proportional-dominated control points at the tuning.
 */
import type { Cause, Verdict } from '../assessment/assessment';
import type { StictionResult, ValveTest } from '../estimate/stiction-fit';
import type { Cycle } from '../oscillation/cycle';
import type { ControllerReading } from '../process/read-controller';
import type { Fitness } from '../record/fitness';
import type { LoopRecord } from '../record/loop-record';

export interface CauseInput {
  readonly record: LoopRecord;
  readonly fitness: Fitness;
  readonly opCycle: Cycle;
  readonly pvCycle: Cycle;
  readonly stiction: StictionResult;
  readonly controller: ControllerReading | null;
}

/**
 * t over blocks above which the valve beats the straight line, with a cycle and without one, and the share of blocks it
 * must win. Between the lower pair and these the record does not decide. Own choice, set on simulated loops.
 */
const clearT = { cycling: 3, hunting: 4.5 };
const clearWins = 0.75;
const doubtfulT = 1.8;
const doubtfulWins = 0.65;
/** t of jump against dead band alone that a very regular cycle of a self-regulating loop asks for, and how regular. */
const jumpT = 1.5;
const veryRegular = 10;
/** Share of odd harmonics below which a cycle is a clean sine; a triangle has 0.014. Own choice. */
const sineShare = 0.002;
/** J/S below which an integrating loop's cycle is put down to dead band alone. Own choice. */
const lostMotionRatio = 0.12;
/** 2 pi Ti / period near 1: from here on control is proportional-dominated at the cycle. Own choice. */
const proportionalRatio = 0.7;

export function nameCause(input: CauseInput): Cause {
  const { fitness, stiction } = input;
  if (!fitness.allows.cycle) return cannotTell(failures(input, 'cycle'), []);
  if (!fitness.allows.cause) return cannotTell(failures(input, 'cause'), []);
  const { test } = stiction;
  if (!cycling(input) && !(test && valveMayMatter(input, test))) return notOscillating(input);
  if (!test) {
    return cannotTell(
      ['OP and PV do not share a cycle to which a valve could be fitted.', ...stiction.refused],
      [],
    );
  }
  return weigh(input, test);
}

function notOscillating({ opCycle, pvCycle }: CauseInput): Cause {
  return {
    verdict: 'not-oscillating',
    confidence: 0.65,
    reasons: [`OP: ${opCycle.why}`, `PV: ${pvCycle.why}`],
    ruledOut: [],
    also: [],
  };
}

/** t of valve against straight line: the lower one when OP carries a steady line that was also taken out. */
function decisiveT(test: ValveTest): number {
  return Math.min(test.tOverLine, test.tWithoutLine ?? test.tOverLine);
}

function cycling({ opCycle, pvCycle }: CauseInput): boolean {
  return opCycle.present || pvCycle.present;
}

/** Dead band alone cannot hold a regular cycle in a self-regulating loop; there the jump must show. */
function deadBandWouldNotCycle({ opCycle, stiction }: CauseInput, test: ValveTest): boolean {
  return (
    stiction.drawn?.process?.response === 'self-regulating' &&
    (opCycle.regularity ?? 0) > veryRegular &&
    test.tOverDeadBand < jumpT
  );
}

/** A clean sine in OP and PV alike, steady over the record: no valve that sticks and slips makes that. */
function cleanSine({ opCycle, pvCycle }: CauseInput, test: ValveTest): boolean {
  const odd = Math.max(opCycle.oddHarmonicShare ?? 1, pvCycle.oddHarmonicShare ?? 1);
  return test.tWithoutLine !== null && odd < sineShare;
}

function valveStands(input: CauseInput, test: ValveTest): boolean {
  const least = cycling(input) ? clearT.cycling : clearT.hunting;
  return (
    decisiveT(test) > least &&
    test.blocksForValve / test.blocks >= clearWins &&
    !deadBandWouldNotCycle(input, test) &&
    !cleanSine(input, test)
  );
}

function valveMayMatter(input: CauseInput, test: ValveTest): boolean {
  return (
    valveStands(input, test) ||
    (decisiveT(test) > doubtfulT && test.blocksForValve / test.blocks >= doubtfulWins)
  );
}

function failures(input: CauseInput, what: 'cycle' | 'cause'): string[] {
  return input.fitness.checks
    .filter((check) => !check.passed && check.forbids.includes(what))
    .map((check) => check.text);
}

function cannotTell(reasons: readonly string[], ruledOut: readonly string[]): Cause {
  return { verdict: 'cannot-tell', confidence: null, reasons, ruledOut, also: [] };
}

function weigh(input: CauseInput, test: ValveTest): Cause {
  const { record, opCycle, pvCycle, controller, stiction } = input;
  const share = test.blocksForValve / test.blocks;
  const coherent = test.tWithoutLine !== null;
  const t = decisiveT(test);
  const valveSentence = `A sticking valve predicts PV better than a straight line from OP to travel in ${test.blocksForValve} of ${test.blocks} parts of the record (t = ${test.tOverLine.toFixed(1)}; above ${clearT.cycling} is clear).`;
  const lineSentence =
    'With the steady line in OP taken out, ' +
    `the comparison of valve and straight line gives t = ${(test.tWithoutLine ?? 0).toFixed(1)} (above ${clearT.cycling} is clear).`;

  if (valveStands(input, test)) {
    const drawn = stiction.drawn;
    const ratio = drawn ? drawn.jumpDrawn / drawn.S.value : 0;
    const jumpBeats = test.tOverDeadBand > 2 && ratio > lostMotionRatio;
    const integrating = drawn?.process?.response === 'integrating';
    const verdict: Verdict = integrating && !jumpBeats ? 'lost-motion' : 'stiction';
    const reasons = [valveSentence];
    if (coherent) reasons.push(lineSentence);
    if (!opCycle.present && !pvCycle.present) {
      reasons.push(
        'The loop hunts without a fixed period, as a sticking valve makes it do when the load keeps changing.',
      );
    }
    if (drawn) {
      reasons.push(
        `The fitted valve explains ${percent(drawn.explains)} of the travel, and valve and process together ${percent(drawn.explainsPv)} of the movement of PV.`,
      );
    }
    reasons.push(
      verdict === 'stiction'
        ? `Dead band with a slip jump fits better than dead band alone (t = ${test.tOverDeadBand.toFixed(1)}).`
        : `A slip jump adds little to dead band alone (t = ${test.tOverDeadBand.toFixed(1)}), and the loop integrates: dead band by itself makes such a loop cycle.`,
    );
    return {
      verdict,
      confidence: valveConfidence(t, share),
      reasons,
      ruledOut: [
        'Tight tuning alone: the loop between OP and PV is not linear.',
        coherent
          ? 'An outside disturbance alone: the valve keeps its lead when the steady line in OP is taken out.'
          : 'A steady outside disturbance alone: OP carries no steady line.',
      ],
      also: [],
    };
  }

  const deadBandOnly = deadBandWouldNotCycle(input, test);
  if (valveMayMatter(input, test) && !deadBandOnly && !cleanSine(input, test)) {
    return cannotTell(
      [
        valveSentence,
        ...(coherent ? [lineSentence] : []),
        'That is too little to accuse the valve and too much to clear it.',
      ],
      [],
    );
  }
  const lineDecides = coherent && (test.tWithoutLine as number) < test.tOverLine;
  const decidingSentence = lineDecides ? lineSentence : valveSentence;
  const cleared = cleanSine(input, test)
    ? 'Stiction: OP and PV are clean sines, which a valve that sticks and slips does not make.'
    : `Stiction: ${lower(decidingSentence)}`;
  if (coherent) {
    return {
      verdict: 'outside-disturbance',
      confidence: 0.8,
      reasons: [
        `OP carries a steady line at a period of ${seconds(opCycle.period)}, sharper than a loop makes by itself.`,
        ...(cleanSine(input, test) ? [] : [decidingSentence]),
      ],
      ruledOut: [
        cleared,
        'Tight tuning: the cycle keeps its period and height too well for a lightly damped loop.',
      ],
      also: [],
    };
  }
  const ti = controller?.form === 'I' ? null : (controller?.integralTime ?? null);
  const ratio = ti !== null && opCycle.period ? (2 * Math.PI * ti) / opCycle.period : null;
  const proportional = controller?.form === 'P' || (ratio !== null && ratio >= proportionalRatio);
  if (proportional || (opCycle.regularity ?? 0) > veryRegular) {
    const reasons = [
      deadBandOnly
        ? `What speaks for the valve is dead band without a jump (t = ${test.tOverDeadBand.toFixed(1)} for the jump), and dead band alone does not hold a regular cycle in a self-regulating loop.`
        : valveSentence,
      'OP carries no steady line as a cycle from outside makes it: the cycle keeps wandering a little, like a lightly damped loop driven by noise.',
    ];
    if (ratio !== null) {
      reasons.push(
        proportional
          ? `At the period of the cycle control is proportional-dominated (2 pi Ti / period = ${ratio.toFixed(1)}), as in a loop near its stability limit.`
          : `At the period of the cycle integral action leads (2 pi Ti / period = ${ratio.toFixed(1)}): too short an integral time is as likely as too high a gain.`,
      );
    }
    return {
      verdict: 'tight-tuning',
      confidence: proportional ? 0.75 : 0.65,
      reasons,
      ruledOut: [cleared, 'A steady outside cycle: OP carries no steady line.'],
      also: deadBandOnly ? ['lost-motion'] : [],
    };
  }
  return cannotTell(
    [
      valveSentence,
      record.sp === null
        ? 'Without the set point the controller cannot be read, so tuning and disturbance cannot be told apart.'
        : 'The cycle is neither a steady line nor very regular nor proportional-dominated, so tuning and disturbance cannot be told apart.',
    ],
    [cleared],
  );
}

function valveConfidence(t: number, share: number): number {
  const strength = 1 / (1 + Math.exp(-(t - clearT.cycling) / 2));
  return Math.min(0.93, 0.5 + 0.45 * strength * share);
}

function percent(share: number): string {
  return `${(100 * share).toFixed(0)} %`;
}

function seconds(value: number | null): string {
  return value === null ? 'unknown length' : `${value.toFixed(value < 100 ? 1 : 0)} s`;
}

function lower(sentence: string): string {
  return sentence.charAt(0).toLowerCase() + sentence.slice(1);
}
