/** Makes the card of a valve test that was read. */
import { duration, withInterval } from '../assessment/make-answer-card';
import type { Estimate } from '../estimate/stiction-fit';
import type { Note } from '../record/loop-record';
import { threeDigits } from '../signal/three-digits';
import type { FrictionAmount } from './actuator-friction';
import type { ValveTestFindings } from './read-valve-test';
import type { TestCard } from './test-card';

/** Notes on reading the file, which stand apart from what limits the numbers. */
const aboutTheRecord = [
  'columns',
  'kind',
  'time-epoch',
  'time-zone',
  'time-count',
  'response-assumed',
  'mode',
];

export function readingCard(findings: ValveTestFindings): TestCard {
  const { reading, record } = findings;
  const seconds = (record.op.length - 1) * record.samplePeriod;
  const of = (wanted: (note: Note) => boolean): string[] =>
    reading.notes.filter(wanted).map(({ text }) => text);
  const parts = [
    {
      title: 'What limits the numbers',
      sentences: of(({ code }) => !aboutTheRecord.includes(code) && !/^cycle-/.test(code)),
    },
    {
      title: 'The record',
      sentences: [
        `${duration(seconds)} from ${record.start}, ${record.op.length} samples of ${threeDigits(record.samplePeriod)} s, ${record.source}.`,
        ...of(({ code }) => aboutTheRecord.includes(code)),
      ],
    },
  ];
  return {
    loop: record.loop,
    label: `${reading.kind} test`,
    ...answer(findings),
    figures: figuresOf(findings),
    parts: parts.filter(({ sentences }) => sentences.length > 0),
    cautions: reading.cautions,
  };
}

function answer({ reading, hold, record }: ValveTestFindings): Pick<TestCard, 'headline' | 'lead'> {
  const { loop } = record;
  if (hold) {
    const headline = {
      died: `The cycle of ${loop} died in the hold: it is made in the loop.`,
      stayed: `The cycle of ${loop} stayed in the hold: it comes from outside the loop.`,
      'not-decided': `The hold of ${loop} does not decide.`,
    }[hold.outcome];
    return { headline, lead: hold.notes[0]?.text ?? '' };
  }
  const { deadBand, resolution } = reading;
  if (!deadBand) {
    return {
      headline: `This test of ${loop} does not resolve the dead band.`,
      lead: 'What is missing stands below; a test with a reversal that moves the stem gives it.',
    };
  }
  const jump = resolution ? `, resolution ${bounded(resolution)}` : '';
  const size =
    deadBand.high < 1 ? 'small' : deadBand.low >= 5 ? 'large' : deadBand.low >= 1 ? 'notable' : 'about 1 %';
  return {
    headline: `${loop}: dead band ${bounded(deadBand)}${jump}.`,
    lead: `By common practice that dead band is ${size}: below 1 % counts as small, 5 % and more as large. No standard sets a limit; the site decides what it accepts.`,
  };
}

/** A bracket that begins at nothing is a bound. */
function bounded(one: Estimate): string {
  if (one.high === 0) return `0 ${one.unit}`;
  return one.low === 0 ? `at most ${threeDigits(one.high)} ${one.unit}` : withInterval(one);
}

function figuresOf(findings: ValveTestFindings): TestCard['figures'] {
  const { reading, hold, step, friction, record, stroke } = findings;
  if (hold) {
    const amount = (value: number | null): string =>
      value === null ? 'not known' : `${threeDigits(value)} ${record.pvUnit}`.trim();
    return [
      {
        label: 'PV swing before',
        value: amount(hold.swingBefore),
        note: 'at the period of the cycle, peak to peak',
      },
      { label: 'PV swing in the hold', value: amount(hold.swingIn), note: 'its first period left out' },
      { label: 'Period', value: hold.period === null ? 'not known' : duration(hold.period), note: '' },
      {
        label: 'Length of the hold',
        value: hold.periods === null ? 'not known' : `${threeDigits(hold.periods)} periods`,
        note: 'at least 3 are needed',
      },
    ];
  }
  const rows: { label: string; value: string; note: string }[] = [];
  const add = (label: string, one: Estimate | null | undefined, note: string): void => {
    rows.push({ label, value: one ? bounded(one) : 'not resolved', note });
  };
  add('Dead band', reading.deadBand, 'on reversal, last to first movement (ISA-51.1)');
  add('Resolution', reading.resolution, 'smallest move in one direction (ANSI/ISA-75.25.01)');
  add('Hysteresis', reading.hysteresis, 'without the dead band (ISA-51.1, IEC 61298-2)');
  if (stroke) {
    add('S', reading.S, stroke.variants[0] ? `fitted, variant ${stroke.variants[0].model}` : '');
    add('J', reading.J, 'fitted slip jump');
  }
  if (step) {
    const { overall } = step;
    add('Dead time', overall.deadTime, `step to first movement of ${step.watched}`);
    add('T63', overall.T63, '63.2 % of the change, dead time included');
    add('T86', overall.T86, '86.5 % of the change, dead time included');
    add('Overshoot', overall.overshoot, '');
  }
  if (friction) {
    add('Spring rate', friction.springRate, `spring range ${withInterval(friction.springRange)}`);
    const { closed, open } = friction.benchSet;
    rows.push({
      label: 'Bench set',
      value: `${threeDigits(closed.value)} to ${threeDigits(open.value)} ${open.unit}`,
      note: 'pressure at 0 and 100 % of travel, process forces in it',
    });
    rows.push({ label: 'Friction band', ...amountRow(friction.frictionBand, 'pressure change on reversal') });
    rows.push({
      label: 'Friction standing',
      ...amountRow(friction.standing, 'to break loose after a reversal'),
    });
    rows.push({ label: 'Friction moving', ...amountRow(friction.moving, 'in the slowest strokes') });
  }
  return rows;
}

function amountRow({ pressure, force }: FrictionAmount, what: string): { value: string; note: string } {
  return force
    ? { value: withInterval(force), note: `${what}; ${withInterval(pressure)}` }
    : { value: withInterval(pressure), note: what };
}
