/** The score of a set as tables in plain text. */
import { percent, textTable } from '../text-table';
import { type Counts, type NumbersScore, type Rate, type Score, type Spread, VERDICTS } from './score';
import { targetsOf } from './targets';

export function printScore(title: string, score: Score): string {
  return [
    `${title}: ${score.cases} cases, median ${score.seconds.median?.toFixed(2) ?? '-'} s each\n`,
    targetTable(score),
    numberTable(score),
    intervalTable(score),
    causeTable(score),
    textTable(
      'Verdicts by kind',
      ['designed kind', ...VERDICTS],
      Object.entries(score.confusion).map(([kind, counts]) => [
        kind,
        ...VERDICTS.map((verdict) => String(counts[verdict])),
      ]),
    ),
    reliabilityTable(score),
    reasonTable('Why numbers were withheld: scored records with stiction', score.refusals.stiction),
    reasonTable('Why numbers were withheld: the other records', score.refusals.others),
    reasonTable('Why no cause was named', score.refusals.cause),
  ].join('\n');
}

function targetTable(score: Score): string {
  return textTable(
    'Targets (records with stiction whose travel the element explains to at least 60 %)',
    ['what', 'target', 'reached', 'met'],
    targetsOf(score).map(({ what, target, reached, met }) => [what, target, reached, met ? 'yes' : 'no']),
  );
}

/** Rows of numbers: all records with stiction, then each kind that has a truth, each service and noise. */
function numberRows(score: Score): { name: string; numbers: NumbersScore }[] {
  const groups = [score.by.kind, score.by.service, score.by.noise].flatMap((group) =>
    Object.entries(group)
      .filter(([, { numbers }]) => numbers.scored > 0)
      .map(([name, { numbers }]) => ({ name, numbers })),
  );
  return [{ name: 'with stiction', numbers: score.stiction }, ...groups];
}

function numberTable(score: Score): string {
  return textTable(
    'Errors over the true S (median, 90th percentile) and what was withheld; services and noises: records with stiction',
    [
      'records',
      'scored',
      'S med',
      'S 90th',
      'J med',
      'J 90th',
      'beyond J as good',
      'withheld',
      'of uncompressed',
      'no J',
      'no J beside S',
    ],
    numberRows(score).map(({ name, numbers }) => [
      name,
      String(numbers.scored),
      percent(numbers.S.error.median),
      percent(numbers.S.error.p90),
      percent(numbers.J.error.median),
      percent(numbers.J.error.p90),
      both(numbers.outsideJumpAsGood),
      short(numbers.withheld),
      short(numbers.withheldUncompressed),
      short(numbers.unresolved),
      short(numbers.unresolvedWithS),
    ]),
  );
}

function intervalTable(score: Score): string {
  return textTable(
    'Intervals said to hold the truth in 90 % of cases (share with its own 95 % interval) and their half widths over true S',
    ['records', 'hold S', 'half width S, med / 90th', 'hold J', 'half width J, med / 90th'],
    numberRows(score).map(({ name, numbers: { S, J } }) => [
      name,
      long(S.held),
      both(S.halfWidth),
      long(J.held),
      both(J.halfWidth),
    ]),
  );
}

function causeTable(score: Score): string {
  const groups = [score.by.kind, score.by.service, score.by.noise].flatMap((group) => Object.entries(group));
  const rows: [string, { causes: Score['causes'] }][] = [['all', score], ...groups];
  const { namedUncompressed, namedOrRefusedUncompressed } = score.causes;
  return [
    textTable(
      'Causes (share with its 95 % interval)',
      ['records', 'right', 'refused', 'visible: named', 'visible: named or refused', 'false stiction'],
      rows.map(([name, { causes }]) => [
        name,
        short(causes.right),
        short(causes.refused),
        long(causes.named),
        long(causes.namedOrRefused),
        long(causes.falseStiction),
      ]),
    ),
    `Visible and not compressed: named ${long(namedUncompressed)}, named or refused ${long(namedOrRefusedUncompressed)}.`,
    `Lost motion named stiction: ${long(score.lostMotionNamedStiction)}.`,
    `Numbers given for good valves: ${long(score.numbersForGoodValves)}.`,
    `Compressed records seen to be so: ${long(score.compressionSeen)}; others taken for compressed: ${long(score.compressionFalse)}.`,
    '',
  ].join('\n');
}

function reliabilityTable(score: Score): string {
  const { bins, byVerdict, gap } = score.reliability;
  const rows = [
    ...bins
      .filter(({ right }) => right.of > 0)
      .map((bin) => ({ name: `${bin.low.toFixed(1)} to ${bin.high.toFixed(1)}`, bin })),
    ...Object.entries(byVerdict)
      .filter(([, { right }]) => right.of > 0)
      .map(([name, bin]) => ({ name, bin })),
  ];
  return textTable(
    `Confidences (weighted gap over the bins ${gap?.toFixed(3) ?? '-'})`,
    ['said', 'verdicts', 'mean said', 'right'],
    rows.map(({ name, bin }) => [name, String(bin.right.of), bin.said?.toFixed(2) ?? '-', long(bin.right)]),
  );
}

function reasonTable(title: string, counts: Counts): string {
  const rows = Object.entries(counts).map(([reason, count]) => [String(count), reason]);
  return [title, ...rows.map(([count, reason]) => `${count.padStart(5)}  ${reason}`), ''].join('\n');
}

/** Share with the counts. */
function short({ hits, of, share }: Rate): string {
  return share === null ? '-' : `${percent(share, 0)} (${hits}/${of})`;
}

/** Share with its interval and the counts. */
function long({ hits, of, share, low, high }: Rate): string {
  return share === null ? '-' : `${percent(share)} [${percent(low, 0)}, ${percent(high, 0)}] (${hits}/${of})`;
}

function both({ median, p90 }: Spread): string {
  return `${percent(median)} / ${percent(p90)}`;
}
