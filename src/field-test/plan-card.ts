/** Makes the card of a plan for valve tests. */
import { duration } from '../assessment/make-answer-card';
import { threeDigits } from '../signal/three-digits';
import type { TestCard } from './test-card';
import type { PlannedTest, ValveTestPlan } from './valve-test-plan';

export function planCard(plan: ValveTestPlan): TestCard {
  const { loop, tests, refused, leftOut, limits, basis, pvUnit } = plan;
  const amount = (value: number): string => `${threeDigits(value)} ${pvUnit}`.trim();
  const limitRows = [
    {
      label: 'OP band, as stated',
      value: `${limits.opBand.low} to ${limits.opBand.high} %`,
      note: `OP runs around ${threeDigits(basis.op)} %`,
    },
    {
      label: 'PV band, as stated',
      value: `${limits.pvBand.low} to ${limits.pvBand.high} ${pvUnit}`.trim(),
      note: `PV runs around ${amount(basis.pv)}`,
    },
    { label: 'Largest step, as stated', value: `${limits.largestStep} %`, note: '' },
    { label: 'Longest hold, as stated', value: duration(limits.longestHold), note: '' },
  ];
  const testRows = tests.map(({ kind, title, duration: seconds, expectedPv, stopPv }) => ({
    label: `${kind} test`,
    value: title,
    note: `${duration(seconds)} in manual; PV expected within ${threeDigits(expectedPv.low)} to ${amount(expectedPv.high)}, stop at ${threeDigits(stopPv.low)} or ${amount(stopPv.high)}`,
  }));
  const parts = [
    { title: 'Why there is no plan', sentences: refused.map(({ text }) => text) },
    { title: 'The tests, in this order', sentences: tests.map(testSentence) },
    { title: 'Left out', sentences: leftOut.map(({ kind, text }) => `${kind} test: ${text}`) },
    { title: 'Stop when', sentences: plan.stopWhen },
    { title: 'Agree beforehand', sentences: plan.checkList },
    { title: 'What the plan rests on', sentences: plan.notes.map(({ text }) => text) },
  ];
  return {
    loop,
    label: plan.standing,
    headline:
      tests.length > 0
        ? `Proposal for ${loop}: ${tests.map(({ kind }) => kind).join(', then ')}.`
        : `No valve test is proposed for ${loop}.`,
    lead:
      tests.length > 0
        ? 'A proposal, not released: authorised people decide whether, when and how anything is moved.'
        : (refused[0]?.text ?? ''),
    figures: [...testRows, ...limitRows],
    parts: parts.filter(({ sentences }) => sentences.length > 0),
    cautions: plan.cautions,
  };

  function testSentence({ title, purpose, moves, startOp, stepsInPv }: PlannedTest): string {
    const ops = moves.map(({ op }) => op);
    const low = Math.min(startOp, ...ops);
    const high = Math.max(startOp, ...ops);
    const range =
      low === high
        ? `OP stays at ${threeDigits(low)} %`
        : `OP starts at ${threeDigits(startOp)} % and goes from ${threeDigits(low)} to ${threeDigits(high)} % in ${moves.length} moves, each held ${duration(moves[0]!.hold)}`;
    const pv =
      stepsInPv.length === 0 || basis.process === null
        ? ''
        : ` Once the dead band is taken up, ${stepsInPv
            .map(
              ({ step, pv: move }) =>
                `${threeDigits(step)} % moves PV by ${basis.process!.response === 'integrating' ? `${amount(move)} a second` : amount(move)}`,
            )
            .join(', ')}.`;
    return `${title}. ${purpose} ${range}.${pv}`;
  }
}
