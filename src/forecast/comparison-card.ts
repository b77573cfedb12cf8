/** The card of a comparison before and after work on a valve. */
import type { TestCard } from '../field-test/test-card';
import type { RepairComparison } from './compare-assessments';

export function comparisonCard(comparison: RepairComparison): TestCard {
  const { loop, inWords, reasons, rows, deadBandBelow, answer, cautions } = comparison;
  // The table holds the rest; what bounds the dead band goes before what a quiet record seems to show.
  const tiles = ['Cycle', 'PV swing', ...(deadBandBelow === null ? ['Dead band S'] : [])];
  const shown = rows.filter(({ what }) => tiles.some((tile) => what.startsWith(tile)));
  const unlike = rows.filter(({ alike }) => alike === false);
  return {
    loop,
    label: 'before and after',
    headline: inWords,
    lead: reasons[0] ?? '',
    figures: [
      ...shown.map(({ what, before, after, note }) => ({
        label: what,
        value: `${before}, then ${after}`,
        note,
      })),
      ...(deadBandBelow === null
        ? []
        : [
            {
              label: 'Dead band left',
              value: `below ${Number(deadBandBelow.value.toPrecision(2))} % of OP span`,
              note: deadBandBelow.from,
            },
          ]),
    ],
    parts: [
      { title: 'Why', sentences: reasons.slice(1) },
      {
        title: unlike.length > 0 ? 'What was not alike' : 'What was alike',
        sentences: (unlike.length > 0 ? unlike : rows.filter(({ alike }) => alike === true)).map(
          ({ what, before, after, note }) => `${what}: ${before} before, ${after} after. ${note}`,
        ),
      },
      {
        title: 'What to do next',
        sentences: [nextSteps[answer]],
      },
    ].filter(({ sentences }) => sentences.length > 0),
    cautions,
  };
}

const nextSteps: Readonly<Record<RepairComparison['answer'], string>> = {
  repaired: 'Close the work order as your site prescribes, and keep both records with it.',
  'cycle-gone':
    'Have the dead band bounded before the work order is closed: a step or stroke test, or a record with at least eight set-point moves, four of them reversals, inside agreed limits.',
  improved: 'Look for the rest: assess the later record by itself and follow its next steps.',
  'no-change-shown':
    'The work has not reached the cause. Assess the later record by itself before more is repaired.',
  worse:
    'Check what was changed in the work, packing load and positioner calibration among it, before the loop is left so.',
  'cannot-tell': 'Log the loop again at the load and tuning of the earlier record, and compare that.',
};
