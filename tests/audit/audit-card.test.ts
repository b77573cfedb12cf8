import { describe, expect, it } from 'vitest';
import { cautions } from '../../src/assessment/cautions';
import { auditCard } from '../../src/audit/audit-card';
import { failedLoop, madeLoop } from './made-loops';
import { largeUnit, madeUnit } from './made-unit';

describe('the answer to a unit', () => {
  it('says how many loops cycle, what to look at first and why, and what cycles together', () => {
    const card = auditCard(madeUnit().audit);
    expect(card.headline).toBe('4 of 5 assessed loops cycle. Look first at 31-FC-201.');
    expect(card.counts).toBe(
      '6 loops: 2 cannot-tell, 1 failed, 1 not-oscillating, 1 stiction, 1 tight-tuning.',
    );
    expect(card.first.map(({ loop }) => loop).slice(0, 2)).toEqual(['31-FC-201', '31-PC-231']);
    expect(card.first[0]!.line).toBe(
      'The final control assembly was found sticking (confidence 90 %). S is 4.00 % of OP span (3.60 to 4.40). ' +
        'Likely shakes 2 other loops.',
    );
    expect(card.first.find(({ loop }) => loop === '31-PC-202')!.line).toContain(
      'Likely shaken by 31-FC-201.',
    );
    expect(card.together).toEqual([
      expect.stringMatching(
        /^31-FC-201, 31-LC-203, 31-PC-202 share a cycle of 60(\.\d)? s\. Likely source: 31-FC-201\.$/,
      ),
    ]);
    expect(card.figures.map(({ value }) => value)).toEqual(['4 of 5', '1', '1', '1']);
    expect(card.cautions).toEqual(cautions);
  });

  it('says so when nothing cycles, and when nothing could be assessed', () => {
    const quiet = madeLoop({ loop: '31-FC-301', period: null, verdict: 'not-oscillating' });
    expect(auditCard(madeUnit([quiet]).audit).headline).toBe(
      'None of 1 loop cycles; nothing stands out to be looked at first.',
    );
    const none = auditCard(madeUnit([failedLoop('31-FC-900')]).audit);
    expect(none.headline).toMatch(/^None of 0 assessed loops/);
    expect(none.first).toEqual([]);
  });

  it('names no more groups than can be read, and counts the rest', () => {
    const card = auditCard(largeUnit(60).audit);
    expect(card.first).toHaveLength(5);
    expect(card.together).toHaveLength(6);
    expect(card.together[5]).toBe('And 5 more.');
  });
});
