import { describe, expect, it } from 'vitest';
import { valveTestCautions } from '../../src/assessment/cautions';
import { readValveTest } from '../../src/field-test/read-valve-test';
import { readingCard } from '../../src/field-test/reading-card';
import { testCardHtml, testCardText } from '../../src/report/test-card';
import { testRecord } from './records';

const read = (name: string) =>
  readingCard(readValveTest(`data/31-FC-104-${name}.csv`, { area: '645 cm2', stroke: '101.6 mm' }));

describe('the card of a valve test', () => {
  it('says the answer in its first line, the figures after it, and every caution', () => {
    const card = read('stroke');
    expect(card.headline).toMatch(/^31-FC-104: dead band 3\.4\d* % of span \(.*\), resolution 1\.\d+ %/);
    expect(card.lead).toMatch(/notable.*No standard sets a limit/);
    expect(card.figures.map(({ label }) => label)).toEqual(
      expect.arrayContaining([
        'Dead band',
        'Resolution',
        'S',
        'J',
        'Spring rate',
        'Bench set',
        'Friction band',
      ]),
    );
    expect(card.cautions).toEqual(valveTestCautions);
  });

  it('says whether a cycle died', () => {
    expect(read('hold-test').headline).toBe(
      'The cycle of 31-FC-104 died in the hold: it is made in the loop.',
    );
  });

  it('says so where nothing is resolved', () => {
    const op = Float64Array.from({ length: 100 }, (_, k) => 50 + 5 * Math.floor(k / 25));
    const travel = new Float64Array(100).fill(30);
    const card = readingCard(readValveTest(testRecord({ op, travel, samplePeriod: 1 })));
    expect(card.headline).toBe('This test of 31-FC-104 does not resolve the dead band.');
    expect(card.figures.map(({ value }) => value)).toContain('not resolved');
  });

  it('reads the same in a terminal and on a page', () => {
    const card = read('step-test');
    const text = testCardText(card, 60);
    expect(Math.max(...text.split('\n').map((line) => line.length))).toBeLessThanOrEqual(60);
    const html = testCardHtml({ ...card, lead: '<b>' });
    expect(html).toContain('&lt;b&gt;');
    for (const { label, value } of card.figures) {
      expect(text).toContain(label);
      expect(html).toContain(value);
    }
    for (const caution of card.cautions) {
      expect(text.replace(/\s+/g, ' ')).toContain(caution);
    }
  });
});
