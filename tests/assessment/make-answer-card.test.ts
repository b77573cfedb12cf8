import { describe, expect, it } from 'vitest';
import type { Decision } from '../../src/assessment/answer-card';
import type { Verdict } from '../../src/assessment/assessment';
import { cautions } from '../../src/assessment/cautions';
import type { Findings } from '../../src/assessment/findings';
import { answerCard, duration, withInterval } from '../../src/assessment/make-answer-card';
import { nextSteps } from '../../src/assessment/next-steps';
import { type FixtureOptions, fixtureFindings } from '../figures/findings-fixture';

/** Findings with the steps that go with their cause. */
function findingsFor(options: FixtureOptions): Findings {
  const findings = fixtureFindings(options);
  const { assessment, fitness } = findings;
  return {
    ...findings,
    assessment: { ...assessment, next: nextSteps(assessment.cause, fitness.recordToAskFor) },
  };
}

const decisions: Record<Verdict, Decision> = {
  stiction: 'repair',
  'lost-motion': 'repair',
  'tight-tuning': 'retune',
  'outside-disturbance': 'look-outside',
  'not-oscillating': 'nothing-to-do',
  'cannot-tell': 'get-better-data',
};
const verdicts = Object.keys(decisions) as Verdict[];

describe('answerCard', () => {
  it('decides by the cause, in one line that names the loop', () => {
    const lines = new Set<string>();
    for (const verdict of verdicts) {
      const card = answerCard(findingsFor({ verdict }));
      expect(card.decision).toBe(decisions[verdict]);
      expect(card.decisionLine).toMatch(/^[A-Z][^\n]*31-FC-104[^\n]*\.$/);
      lines.add(card.decisionLine);
    }
    // Stiction and lost motion both ask for the repair.
    expect(lines.size).toBe(verdicts.length - 1);
  });

  it('asks for confirmation on site before any repair', () => {
    for (const verdict of ['stiction', 'lost-motion'] as const) {
      expect(answerCard(findingsFor({ verdict })).decisionLine).toMatch(/^Confirm on site/);
    }
  });

  it('does not accuse the valve where something else is the cause', () => {
    for (const verdict of ['tight-tuning', 'outside-disturbance'] as const) {
      expect(answerCard(findingsFor({ verdict })).decisionLine).toMatch(/valve is not accused/);
    }
  });

  it('speaks of no cycle where there is none', () => {
    for (const verdict of ['stiction', 'lost-motion', 'cannot-tell'] as const) {
      const findings = findingsFor({ verdict });
      const { assessment } = findings;
      const hunting = { ...assessment, oscillation: { ...assessment.oscillation, present: false } };
      expect(answerCard(findings).cause).toMatch(/makes the cycle/);
      const card = answerCard({ ...findings, assessment: hunting });
      expect(card.cause).toMatch(/hunt|no regular cycle/);
      expect(card.workRequest).not.toMatch(/the loop cycles/);
    }
  });

  it('gives cause and confidence in one sentence, without a confidence where it cannot tell', () => {
    for (const verdict of verdicts) {
      const { cause } = answerCard(findingsFor({ verdict }));
      expect(cause).toMatch(/^[A-Z].*\.$/);
      expect(/confidence 90 %/.test(cause)).toBe(verdict !== 'cannot-tell');
    }
  });

  it('writes a work request for a repair and for nothing else', () => {
    for (const verdict of verdicts) {
      const { workRequest } = answerCard(findingsFor({ verdict }));
      if (decisions[verdict] !== 'repair') expect(workRequest).toBe('');
      else {
        expect(workRequest).toContain('31-FC-104');
        expect(workRequest).toContain(
          'cannot tell which part: check air supply, positioner, linkage and packing in the order your site prescribes',
        );
        expect(workRequest).toMatch(/not a test of the valve/);
        expect(workRequest).toMatch(/permits/);
      }
    }
  });

  it('shows S and J with their intervals, or says that J is not resolved, or that there are no numbers and why', () => {
    const shown = (options: FixtureOptions) =>
      answerCard(findingsFor(options)).figures.map(({ label, value, note }) => `${label}: ${value}; ${note}`);
    const given = shown({});
    expect(given[0]).toMatch(/Dead band S: 3\.2\d? .*\(2\.9\d? to 3\.5\d?\).*90 %/);
    expect(given[1]).toMatch(/Slip jump J: 1\.1\d? .*to 1\.4\d?\)/);
    expect(shown({ jumpResolved: false })[1]).toMatch(/Slip jump J: not resolved/);
    const refused = shown({ fit: 'refused' });
    expect(refused[0]).toMatch(/no numbers; the element explains less than half/);
    expect(refused.join(' ')).not.toMatch(/3\.2/);
  });

  it('gives swings with their units, the period and the reversals', () => {
    const { figures } = answerCard(findingsFor({}));
    const value = (label: RegExp) => figures.find((figure) => label.test(figure.label))!.value;
    expect(value(/PV swing/)).toBe('9.8 m3/h');
    expect(value(/OP swing/)).toBe('6 %');
    expect(value(/Period/)).toBe('96 s');
    expect(value(/reversals/i)).toBe('1800 a day');
  });

  it('names the test that decides, with its caution, and none where there is nothing to do', () => {
    for (const verdict of verdicts) {
      const { decidingTest } = answerCard(findingsFor({ verdict }));
      if (verdict === 'not-oscillating') expect(decidingTest).toBeNull();
      else {
        expect(decidingTest!.do).toMatch(/manual at constant OP/);
        expect(decidingTest!.caution.length).toBeGreaterThan(20);
      }
    }
  });

  it('says of the record how long it is, and how many checks failed', () => {
    const { record } = answerCard(findingsFor({ samples: 3601 }));
    expect(record).toMatch(/^60 min from 2031-03-05.*3601 samples of 1 s.*all fitness checks passed\.$/);
    const check = {
      code: 'x',
      title: 'x',
      value: 1,
      unit: '',
      limit: 'x',
      source: 'x',
      passed: false,
      forbids: [],
      text: 'x',
    } as const;
    expect(answerCard(findingsFor({ checks: [check, check] })).record).toMatch(/2 fitness checks not passed/);
  });

  it('carries reasons, what was ruled out, and every caution', () => {
    const findings = findingsFor({});
    const card = answerCard(findings);
    expect(card.reasons).toEqual(findings.assessment.cause.reasons);
    expect(card.ruledOut).toEqual(findings.assessment.cause.ruledOut);
    expect(card.cautions).toEqual(cautions);
  });

  it('has no hole in any of its texts', () => {
    for (const verdict of verdicts) {
      for (const fit of ['given', 'refused', 'none'] as const) {
        const card = answerCard(findingsFor({ verdict, fit, jumpResolved: false, setPointLogged: false }));
        expect(JSON.stringify({ ...card, decidingTest: card.decidingTest ?? '' })).not.toMatch(
          /undefined|NaN|null|Infinity/,
        );
      }
    }
  });
});

describe('withInterval', () => {
  const said = (value: number, half: number) =>
    withInterval({ value, low: value - half, high: value + half, unit: '%' });

  it('shows as many digits as the interval deserves: two in its half width', () => {
    expect(said(2.71523, 0.31)).toBe('2.72 % (2.41 to 3.03)');
    expect(said(2.71523, 1.2)).toBe('2.7 % (1.5 to 3.9)');
    expect(said(27.1523, 12)).toBe('27 % (15 to 39)');
    expect(said(0.271523, 0.042)).toBe('0.272 % (0.230 to 0.314)');
  });

  it('shows no more digits where the interval is wider', () => {
    const digits = [0.03, 0.3, 3, 30].map((half) => said(40.123456, half).split(' ')[0].length);
    for (let i = 1; i < digits.length; i++) expect(digits[i]).toBeLessThanOrEqual(digits[i - 1]);
  });
});

describe('duration', () => {
  it('takes the unit in which a time is read best', () => {
    expect(duration(12.34)).toBe('12.3 s');
    expect(duration(600)).toBe('10 min');
    expect(duration(86_400)).toBe('24 h');
  });
});
