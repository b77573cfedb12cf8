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

/** t over blocks above which the valve beats its rival, and the share of blocks it must win. Own choice, set on simulated loops. */
const clearT = 3;
const clearWins = 0.75;
/** J/S below which an integrating loop's cycle is put down to dead band alone. Own choice. */
const lostMotionRatio = 0.12;
/** 2 pi Ti / period from which control is proportional-dominated at the cycle: integral action lags less than 45 degrees. */
const proportionalRatio = 1;

export function nameCause(input: CauseInput): Cause {
  const { fitness, opCycle, pvCycle, stiction } = input;
  if (!fitness.allows.cycle) return cannotTell(failures(input, 'cycle'), []);
  if (!fitness.allows.cause) return cannotTell(failures(input, 'cause'), []);
  const { test } = stiction;
  const cycles = opCycle.present || pvCycle.present;
  if (!cycles && !(test && valveStands(test))) return notOscillating(input);
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
    confidence: 0.9,
    reasons: [`OP: ${opCycle.why}`, `PV: ${pvCycle.why}`],
    ruledOut: [],
    also: [],
  };
}

/** t of valve against straight line: the lower one when OP carries a steady line that was also taken out. */
function decisiveT(test: ValveTest): number {
  return Math.min(test.tOverLine, test.tWithoutLine ?? test.tOverLine);
}

function valveStands(test: ValveTest): boolean {
  return decisiveT(test) > clearT && test.blocksForValve / test.blocks >= clearWins;
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
  const valveSentence = `A sticking valve predicts PV better than a straight line from OP to travel in ${test.blocksForValve} of ${test.blocks} blocks (t = ${test.tOverLine.toFixed(1)}).`;
  const lineSentence =
    'With the steady line in OP taken out, ' +
    `the comparison of valve and straight line gives t = ${(test.tWithoutLine ?? 0).toFixed(1)}.`;

  if (valveStands(test)) {
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
        'tight tuning alone: the loop between OP and PV is not linear',
        'an outside disturbance alone: the valve model keeps its lead when a steady line is taken out',
      ],
      also: [],
    };
  }

  const noValve = t < 1.5 || share < 0.6;
  if (!noValve) {
    return cannotTell(
      [
        valveSentence,
        ...(coherent ? [lineSentence] : []),
        'That is too little to accuse the valve and too much to clear it.',
      ],
      [],
    );
  }
  const cleared = `stiction: ${lower(coherent ? lineSentence : valveSentence)}`;
  if (coherent) {
    return {
      verdict: 'outside-disturbance',
      confidence: 0.7,
      reasons: [
        `OP carries a steady line at a period of ${seconds(opCycle.period)}, sharper than a loop makes by itself.`,
        lineSentence,
      ],
      ruledOut: [
        cleared,
        'tight tuning: the cycle keeps its period and height too well for a lightly damped loop',
      ],
      also: [],
    };
  }
  const ti = controller?.integralTime ?? null;
  const ratio = ti !== null && opCycle.period ? (2 * Math.PI * ti) / opCycle.period : null;
  const proportional = controller !== null && (ti === null || (ratio !== null && ratio >= proportionalRatio));
  if (proportional) {
    return {
      verdict: 'tight-tuning',
      confidence: 0.7,
      reasons: [
        valveSentence,
        ratio === null
          ? 'The controller has no integral action, so the cycle is not an integral wind-up against a stuck valve.'
          : `At the period of the cycle control is proportional-dominated (2 pi Ti / period = ${ratio.toFixed(1)}), as in a loop near its stability limit.`,
        'The cycle wanders in height and phase like a lightly damped loop driven by noise.',
      ],
      ruledOut: [cleared, 'a steady outside cycle: OP carries no steady line'],
      also: [],
    };
  }
  return cannotTell(
    [
      valveSentence,
      record.sp === null
        ? 'Without the set point the controller cannot be read, so tuning and disturbance cannot be told apart.'
        : 'The cycle is neither a steady line nor proportional-dominated, so tuning and disturbance cannot be told apart.',
    ],
    [cleared],
  );
}

function valveConfidence(t: number, share: number): number {
  const strength = 1 / (1 + Math.exp(-(t - clearT) / 2));
  return Math.min(0.97, 0.6 + 0.4 * strength * share);
}

function percent(share: number): string {
  return `${(100 * share).toFixed(0)} %`;
}

function seconds(value: number | null): string {
  return value === null ? 'unknown length' : `${value.toFixed(value < 100 ? 1 : 0)} s`;
}

function lower(sentence: string): string {
  return sentence.charAt(0).toLowerCase() + sentence.slice(1).replace(/\.$/, '');
}
