import { describe, expect, it } from 'vitest';
import type { AnswerCard } from '../../src/assessment/answer-card';
import { answerHtml } from '../../src/report/answer-html';
import { answerText } from '../../src/report/answer-text';

const card: AnswerCard = Object.freeze({
  loop: '31-<FC>-104',
  decision: 'repair',
  decisionLine: 'Have the assembly checked.',
  cause: 'Stiction makes the cycle (confidence 93 %).',
  reasons: ['The PV holds & jumps.'],
  ruledOut: ['Tuning: the period is far too long.'],
  figures: [
    { label: 'Dead band S', value: '4.1 % (3.8 to 4.4)', note: '90 % interval' },
    { label: 'OP swing', value: '5 %', note: '' },
  ],
  decidingTest: { do: 'Hold OP.', why: 'It tells.', caution: 'Ask first.' },
  workRequest: 'Check the assembly.',
  record: 'One hour.',
  cautions: ['Not a test of the valve.', 'Local codes decide.'],
} as const);

describe('the answer card as text', () => {
  it('says everything on the card, the decision first, within the width', () => {
    const text = answerText(card, 60);
    const said = text.replace(/\s+/g, ' ');
    for (const sentence of [
      card.decisionLine,
      card.cause,
      ...card.reasons,
      ...card.ruledOut,
      'Dead band S 4.1 % (3.8 to 4.4) (90 % interval)',
      'Hold OP.',
      'It tells.',
      'Ask first.',
      card.workRequest,
      card.record,
      ...card.cautions,
    ]) {
      expect(said).toContain(sentence);
    }
    expect(text.split('\n')[0]).toBe('31-<FC>-104: Repair');
    expect(Math.max(...text.split('\n').map((line) => line.length))).toBeLessThanOrEqual(60);
  });

  it('leaves out what the card does not have', () => {
    const text = answerText({ ...card, workRequest: '', decidingTest: null, ruledOut: [] });
    expect(text).not.toMatch(/Work request|The test that decides|Ruled out/);
  });

  it('keeps a word that is longer than the line whole', () => {
    const long = 'x'.repeat(80);
    expect(answerText({ ...card, decisionLine: long }, 40).split('\n')).toContain(long);
  });
});

describe('the answer card as HTML', () => {
  it('says everything on the card and lets no text act as markup', () => {
    const html = answerHtml(card);
    expect(html).toContain('31-&lt;FC&gt;-104');
    expect(html).toContain('The PV holds &amp; jumps.');
    expect(html).not.toContain('<FC>');
    for (const sentence of [
      card.cause,
      'Ask first.',
      card.workRequest,
      ...card.cautions,
      'Prepared by',
      'Reviewed by',
    ]) {
      expect(html).toContain(sentence);
    }
  });
});
