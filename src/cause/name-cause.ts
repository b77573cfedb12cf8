/**
 * Names what makes the cycle, with reasons and what was ruled out, or says that the record cannot tell.
 *
 * The valve is accused by a probability (`valve-odds.ts`): above all, how clearly it predicts PV better than a straight
 * line does, block after block, also once a steady line in OP is taken out of the comparison. Without valve evidence a
 * steady line points outside the loop, and a wandering, linearly predictable cycle with proportional-dominated control
 * points at the tuning.
 */
import type { Cause, Verdict } from '../assessment/assessment';
import type { StictionFit, StictionResult, ValveTest } from '../estimate/stiction-fit';
import type { Cycle } from '../oscillation/cycle';
import type { ControllerReading } from '../process/read-controller';
import type { Fitness } from '../record/fitness';
import type { LoopRecord } from '../record/loop-record';
import { median } from '../signal/statistics';
import { valveProbability, valveSigns } from './valve-odds';

export interface CauseInput {
  readonly record: LoopRecord;
  readonly fitness: Fitness;
  readonly opCycle: Cycle;
  readonly pvCycle: Cycle;
  readonly stiction: StictionResult;
  readonly controller: ControllerReading | null;
}

/**
 * Probability of a sticking valve from which it is accused, and below which it is cleared, with a cycle and without
 * one; in between the record does not decide. Own choice, set on simulated loops for one false accusation in fifty.
 */
const accuseFrom = 0.88;
const clearBelow = { cycling: 0.2, hunting: 0.4 };
/** Highest confidence that is ever said. */
const surest = 0.95;
/**
 * Confidence in the other causes: about the share that was right on simulated loops, less where the valve stays in doubt
 * (`notCycling` and `outside` by the probability that is left to it). Own choice.
 */
const confidence = { notCycling: 0.85, smallDeadBand: 0.7, outside: 0.85, proportional: 0.85, integral: 0.8 };
/**
 * In an integrating loop: J/S, or median slip over S, below which a cycle is put down to dead band alone; and how often
 * that is so on simulated loops, where the rest had stems that stick but slide on softly. Own choice.
 */
const lostMotion = { ratio: 0.12, tOverDeadBand: 2, slip: 0.3, share: 0.7 };
/** Regularity above which a cycle is very regular, and above which it keeps time like a clock. Own choice. */
const veryRegular = 10;
const clockwork = 60;
/** Shares of odd harmonics in PV below and above which its shape is told; a triangle has 0.014, a square 0.15. Own choice. */
const nearlySine = 0.002;
const squarish = 0.1;
/** S, % of span, that good valves have as well. Own choice; common practice calls 1 % and less small. */
const goodValve = 0.3;
/** Share of logged travel that the element must explain for its dead band to be told beside another cause. Own choice. */
const travelExplained = 0.8;
/** 2 pi Ti / period near 1: from here on control is proportional-dominated at the cycle. Own choice. */
const proportionalRatio = 0.7;

export function nameCause(input: CauseInput): Cause {
  return withTravelSeen(causeOf(input), input.stiction.fit);
}

/** Logged travel shows a dead band whatever makes the cycle: then the valve is named beside it. */
function withTravelSeen(cause: Cause, fit: StictionFit | null): Cause {
  if (fit?.travelSource !== 'measured' || fit.explains < travelExplained || fit.S.low < goodValve) {
    return cause;
  }
  if (cause.verdict === 'stiction' || cause.verdict === 'lost-motion') return cause;
  const seen = `Whatever makes the cycle, the logged travel shows a dead band of ${fit.S.value.toFixed(2)} % of span.`;
  return { ...cause, reasons: [...cause.reasons, seen], also: ['stiction'] };
}

function causeOf(input: CauseInput): Cause {
  const { fitness, stiction } = input;
  if (!fitness.allows.cycle) return cannotTell(failures(input, 'cycle'), []);
  if (!fitness.allows.cause) return cannotTell(failures(input, 'cause'), []);
  const { test, drawn } = stiction;
  const cycles = input.opCycle.present || input.pvCycle.present;
  if (!test || !drawn) {
    if (!cycles) return notOscillating(input, null);
    return cannotTell(
      ['OP and PV do not share a cycle to which a valve could be fitted.', ...stiction.refused],
      [],
    );
  }
  const probability = valveProbability(valveSigns(input.opCycle, input.pvCycle, test, drawn));
  if (probability >= accuseFrom) return accused(input, test, drawn, probability);
  const nothingToFind = !cycles && drawn.S.value < goodValve;
  if (!nothingToFind && probability >= (cycles ? clearBelow.cycling : clearBelow.hunting)) {
    return cannotTell(
      [
        ...valveSentences(input, test, drawn, probability),
        'That is too little to accuse the valve and too much to clear it.',
      ],
      [],
    );
  }
  return cycles ? cleared(input, test, drawn, probability) : notOscillating(input, probability);
}

/** No cycle and no valve to accuse. A loop that hunts a little because of its valve may look the same: the valve is not cleared. */
function notOscillating({ opCycle, pvCycle, stiction }: CauseInput, probability: number | null): Cause {
  const small = stiction.drawn !== null && stiction.drawn.S.value < goodValve;
  const doubt = Math.min(probability ?? clearBelow.hunting, clearBelow.hunting);
  return {
    verdict: 'not-oscillating',
    confidence: small ? confidence.smallDeadBand : confidence.notCycling * (1 - doubt),
    reasons: [
      `OP: ${opCycle.why}`,
      `PV: ${pvCycle.why}`,
      ...(small ? [`The fit finds less than ${goodValve} % of dead band, as good valves have it.`] : []),
    ],
    ruledOut: [],
    also: [],
  };
}

function failures(input: CauseInput, what: 'cycle' | 'cause'): string[] {
  return input.fitness.checks
    .filter((check) => !check.passed && check.forbids.includes(what))
    .map((check) => check.text);
}

function cannotTell(reasons: readonly string[], ruledOut: readonly string[]): Cause {
  return { verdict: 'cannot-tell', confidence: null, reasons, ruledOut, also: [] };
}

/** What speaks for and against the valve, and how it weighs together. */
function valveSentences(
  { opCycle, pvCycle }: CauseInput,
  test: ValveTest,
  { S }: StictionFit,
  probability: number,
): string[] {
  const sentences = [
    `A sticking valve predicts PV ${test.tOverLine > 0 ? 'better' : 'worse'} than a straight line from OP to travel: it wins in ${test.blocksForValve} of ${test.blocks} parts of the record (t = ${test.tOverLine.toFixed(1)}; below 2 it can be chance).`,
  ];
  if (test.tWithoutLine !== null) {
    sentences.push(
      `OP carries a steady line; with that taken out the comparison gives t = ${test.tWithoutLine.toFixed(1)}.`,
    );
  }
  if (S.value < goodValve) {
    sentences.push(
      `A dead band of less than ${goodValve} % of span would explain it, as good valves have it.`,
    );
  }
  const regularity = opCycle.regularity ?? 0;
  if ((opCycle.present || pvCycle.present) && regularity > clockwork) {
    sentences.push(
      `The cycle keeps time like a clock (regularity ${regularity.toFixed(0)}), which a cycle from outside does more often than a sticking valve.`,
    );
  }
  const odd = pvCycle.oddHarmonicShare;
  if (odd !== null && odd < nearlySine) {
    sentences.push(
      `PV is nearly a pure sine (odd harmonics hold ${(100 * odd).toFixed(2)} % of its power), while slips leave corners in it.`,
    );
  }
  if (odd !== null && odd > squarish && regularity > veryRegular) {
    sentences.push(
      `PV is squarer than a slip behind a process leaves it (odd harmonics hold ${(100 * odd).toFixed(0)} % of its power), as something that switches outside the loop makes it.`,
    );
  }
  sentences.push(
    `Weighed together, that gives a sticking valve a probability ${told(probability)} (from ${accuseFrom} on it is named).`,
  );
  return sentences;
}

function accused(input: CauseInput, test: ValveTest, drawn: StictionFit, probability: number): Cause {
  const { opCycle, pvCycle } = input;
  const coherent = test.tWithoutLine !== null;
  const slips = Float64Array.from(drawn.slips, ({ size }) => Math.abs(size));
  const slip = slips.length === 0 ? 0 : median(slips) / drawn.S.value;
  const jumpShows =
    slip > lostMotion.slip ||
    (test.tOverDeadBand > lostMotion.tOverDeadBand && drawn.jumpDrawn > lostMotion.ratio * drawn.S.value);
  const integrating = drawn.process?.response === 'integrating';
  const verdict: Verdict = integrating && !jumpShows ? 'lost-motion' : 'stiction';
  const reasons = valveSentences(input, test, drawn, probability);
  if (!opCycle.present && !pvCycle.present) {
    reasons.push(
      'The loop hunts without a fixed period, as a sticking valve makes it do when the load keeps changing.',
    );
  }
  reasons.push(
    `The fitted valve explains ${percent(drawn.explains)} of the travel, and valve and process together ${percent(drawn.explainsPv)} of the movement of PV.`,
  );
  if (verdict === 'lost-motion') {
    reasons.push(
      `A slip jump adds little to dead band alone (t = ${test.tOverDeadBand.toFixed(1)}), and the loop integrates: dead band by itself makes such a loop cycle. A stem that sticks but slides on softly looks the same.`,
    );
  } else if (test.tOverDeadBand > lostMotion.tOverDeadBand) {
    reasons.push(
      `Dead band with a slip jump fits better than dead band alone (t = ${test.tOverDeadBand.toFixed(1)}).`,
    );
  }
  return {
    verdict,
    confidence: Math.min(surest, probability) * (verdict === 'lost-motion' ? lostMotion.share : 1),
    reasons,
    ruledOut: [
      'Tight tuning alone: the loop between OP and PV is not linear.',
      coherent
        ? 'An outside disturbance alone: the valve keeps its lead when the steady line in OP is taken out.'
        : 'A steady outside disturbance alone: OP carries no steady line.',
    ],
    also: verdict === 'lost-motion' ? ['stiction'] : [],
  };
}

/** The loop cycles and it is not the valve: a steady line comes from outside, else it may be the tuning. */
function cleared(input: CauseInput, test: ValveTest, drawn: StictionFit, probability: number): Cause {
  const { record, opCycle, controller } = input;
  const [comparison, ...others] = valveSentences(input, test, drawn, probability);
  const notTheValve = [`Stiction: ${lower(others[others.length - 1])}`];
  if (test.tWithoutLine !== null) {
    return {
      verdict: 'outside-disturbance',
      confidence: confidence.outside * (1 - probability / 2),
      reasons: [
        `OP carries a steady line at a period of ${seconds(opCycle.period)}, sharper than a loop makes by itself.`,
        comparison,
        ...others,
      ],
      ruledOut: [
        ...notTheValve,
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
      'OP carries no steady line as a cycle from outside makes it: the cycle keeps wandering a little, like a lightly damped loop driven by noise.',
      comparison,
      ...others,
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
      confidence: proportional ? confidence.proportional : confidence.integral,
      reasons,
      ruledOut: [...notTheValve, 'A steady outside cycle: OP carries no steady line.'],
      also: [],
    };
  }
  return cannotTell(
    [
      comparison,
      ...others,
      record.sp === null
        ? 'Without the set point the controller cannot be read, so tuning and disturbance cannot be told apart.'
        : 'The cycle is neither a steady line nor very regular nor proportional-dominated, so tuning and disturbance cannot be told apart.',
    ],
    notTheValve,
  );
}

/** No record makes it certain. */
function told(probability: number): string {
  if (probability > 0.99) return 'above 0.99';
  return probability < 0.01 ? 'below 0.01' : `of ${probability.toFixed(2)}`;
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
