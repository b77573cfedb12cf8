/** Makes the answer card of a loop from its findings. */
import type { Estimate } from '../estimate/stiction-fit';
import type { AnswerCard, Decision } from './answer-card';
import type { Assessment, Verdict } from './assessment';
import type { Findings } from './findings';

/** What each cause asks for. */
export const decisions: Readonly<Record<Verdict, Decision>> = {
  stiction: 'repair',
  'lost-motion': 'repair',
  'tight-tuning': 'retune',
  'outside-disturbance': 'look-outside',
  'not-oscillating': 'nothing-to-do',
  'cannot-tell': 'get-better-data',
};

const causeWords: Record<Verdict, string> = {
  stiction: 'Stiction in the final control assembly makes the cycle',
  'lost-motion': 'Lost motion (dead band without a jump) in the final control assembly makes the cycle',
  'tight-tuning': 'Tight tuning makes the cycle',
  'outside-disturbance': 'A disturbance from outside the loop makes the cycle',
  'not-oscillating': 'The loop does not oscillate',
  'cannot-tell': 'The record cannot tell what makes the cycle',
};

/** Where there is no regular cycle, words that do not speak of one. */
const huntingWords: Partial<Record<Verdict, string>> = {
  stiction: 'Stiction in the final control assembly makes the loop hunt',
  'lost-motion': 'Lost motion (dead band without a jump) in the final control assembly makes the loop hunt',
  'cannot-tell': 'There is no regular cycle, and the record cannot tell whether the valve sticks',
};

export function answerCard(findings: Findings): AnswerCard {
  const { assessment, fitness } = findings;
  const { cause } = assessment;
  const decision = decisions[cause.verdict];
  const hunting = assessment.oscillation.present ? undefined : huntingWords[cause.verdict];
  const confidence = cause.confidence === null ? '' : ` (confidence ${Math.round(100 * cause.confidence)} %)`;
  return {
    loop: assessment.loop,
    decision,
    decisionLine: decisionLine(assessment),
    cause: `${hunting ?? causeWords[cause.verdict]}${confidence}.`,
    reasons: cause.reasons,
    ruledOut: cause.ruledOut,
    figures: figuresOf(findings),
    decidingTest: assessment.next.find((step) => /manual/.test(step.do)) ?? null,
    workRequest: workRequest(assessment),
    record: [
      recordSentence(findings, fitness.checks.filter((check) => !check.passed).length),
      ...(decision === 'get-better-data' ? [fitness.recordToAskFor] : []),
    ].join(' '),
    cautions: assessment.cautions,
  };
}

/** One line that says what to do. */
export function decisionLine({ loop, cause, severity }: Assessment): string {
  switch (decisions[cause.verdict]) {
    case 'repair':
      return severity.size === 'small'
        ? `Confirm on site, then plan the check of the final control assembly of ${loop}; the effect is small.`
        : `Confirm on site, then have the final control assembly of ${loop} checked and repaired.`;
    case 'retune':
      return `Review the tuning of ${loop}; the valve is not accused.`;
    case 'look-outside':
      return `Look outside ${loop} for the source of the cycle; the valve is not accused.`;
    case 'get-better-data':
      return `Get better data of ${loop} before anyone works on it.`;
    case 'nothing-to-do':
      return `Nothing to do for ${loop} on this record.`;
  }
}

function figuresOf({ assessment, record, opCycle, pvCycle }: Findings): AnswerCard['figures'] {
  const { stiction, severity } = assessment;
  const rows: { label: string; value: string; note: string }[] = [];
  if (stiction) {
    rows.push({
      label: 'Dead band S',
      value: withInterval(stiction.S),
      note: '90 % interval; dead band as ISA-51.1 tests it',
    });
    rows.push({
      label: 'Slip jump J',
      value: stiction.J ? withInterval(stiction.J) : 'not resolved',
      note: stiction.J
        ? '90 % interval; the resolution of the assembly'
        : (stiction.notes.find((note) => note.code === 'jump-not-resolved')?.text ?? ''),
    });
    if (severity.size) {
      rows.push({
        label: 'Size',
        value: severity.size,
        note: 'below 1 % small, 5 % and more large: common practice, no standard sets a limit',
      });
    }
  } else if (assessment.stictionRefused.length > 0) {
    rows.push({
      label: 'Dead band S, slip jump J',
      value: 'no numbers',
      note: assessment.stictionRefused[0],
    });
  }
  const period = opCycle.period ?? pvCycle.period;
  if (period !== null) {
    const r = assessment.oscillation.regularity;
    rows.push({
      label: 'Period',
      value: duration(period),
      note: r === null ? '' : `regularity ${r > 100 ? 'above 100' : r.toFixed(1)}; above 1 is regular`,
    });
  }
  const pvUnit = record.pvUnit === '' ? 'PV units' : record.pvUnit;
  rows.push({
    label: 'PV swing',
    value: `${short(severity.pvSwing)} ${pvUnit}`,
    note: 'median peak to peak',
  });
  rows.push({ label: 'OP swing', value: `${short(severity.opSwing)} %`, note: 'median peak to peak' });
  rows.push({
    label: 'Valve reversals',
    value: `${Math.round(severity.reversalsPerDay)} a day`,
    note: 'turns of OP larger than its noise',
  });
  return rows;
}

/** Value and interval, as many digits as a tenth of the interval's half width deserves. */
export function withInterval({ value, low, high, unit }: Estimate): string {
  const half = (high - low) / 2;
  const digits = half > 0 ? Math.max(0, Math.min(3, 1 - Math.floor(Math.log10(half)))) : 2;
  return `${value.toFixed(digits)} ${unit} (${low.toFixed(digits)} to ${high.toFixed(digits)})`;
}

function short(value: number): string {
  return Number(value.toPrecision(2)).toString();
}

export function duration(seconds: number): string {
  if (seconds < 120) return `${Number(seconds.toPrecision(3))} s`;
  if (seconds < 7200) return `${Number((seconds / 60).toPrecision(3))} min`;
  return `${Number((seconds / 3600).toPrecision(3))} h`;
}

/** `2026-03-04T06:00:00.000Z` as `2026-03-04 06:00 UTC`; other forms as they are. */
function readableTime(iso: string): string {
  const parts = /^(\d{4}-\d\d-\d\d)T(\d\d:\d\d)(?::\d\d(?:\.\d+)?)?Z$/.exec(iso);
  return parts ? `${parts[1]} ${parts[2]} UTC` : iso;
}

/** A paragraph to copy into a work request; '' when no work is asked for. */
export function workRequest({ loop, cause, stiction, severity, record, oscillation }: Assessment): string {
  if (cause.verdict !== 'stiction' && cause.verdict !== 'lost-motion') return '';
  const size = stiction
    ? ` The record gives a dead band of ${withInterval(stiction.S)}${stiction.J ? ` and a slip jump of ${withInterval(stiction.J)}` : ''}.`
    : '';
  const period = oscillation.period === null ? '' : ` with a period of ${duration(oscillation.period)}`;
  const moves = oscillation.present ? `cycles${period}` : 'hunts without a fixed period';
  return (
    `${loop}: the loop ${moves} (record from ${readableTime(record.start)}, OP swing ${short(severity.opSwing)} %), and the record points to the final control assembly.${size} ` +
    'The record cannot tell which part: check air supply, positioner, linkage and packing in the order your site prescribes. ' +
    'Please record dead band and resolution as found and as left. Estimates from operating data, not a test of the valve; site permits and procedures apply.'
  );
}

function recordSentence({ record, opCycle }: Findings, failed: number): string {
  const span = duration((record.op.length - 1) * record.samplePeriod);
  const cycles = opCycle.present ? `, ${opCycle.cycles} cycles` : '';
  const fit =
    failed === 0 ? 'all fitness checks passed' : `${failed} fitness check${failed > 1 ? 's' : ''} not passed`;
  return `${span} from ${readableTime(record.start)}, ${record.op.length} samples of ${Number(record.samplePeriod.toPrecision(3))} s${cycles}; ${fit}.`;
}
