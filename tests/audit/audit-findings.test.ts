import { describe, expect, it } from 'vitest';
import type { Assessment } from '../../src/assessment/assessment';
import { auditFindings, roleOf, swingOfRange } from '../../src/audit/audit-findings';
import { madeLoops, madeUnit } from './made-unit';

describe('auditFindings', () => {
  const { audit, ranked, failed } = madeUnit();

  it('joins each ranked loop with what its own record left, failed loops apart', () => {
    const finished = madeLoops();
    expect(ranked.map(({ assessment }) => assessment.loop)).toEqual(audit.ranking.map(({ loop }) => loop));
    expect(ranked.map(({ place }) => place)).toEqual([1, 2, 3, 4, 5]);
    for (const { assessment, signature, order, file } of ranked) {
      expect(finished[order]!.result.loop).toBe(assessment.loop);
      expect(signature).toEqual(finished[order]!.signature);
      expect(file).toBe(`${assessment.loop}.csv`);
    }
    expect(failed).toEqual([finished[2]!.result]);
  });

  it('knows source, shaken loops and loops that cycle alone', () => {
    const roles = Object.fromEntries(ranked.map((loop) => [loop.assessment.loop, roleOf(loop)]));
    expect(roles).toEqual({
      '31-FC-201': 'likely source',
      '31-PC-202': 'likely shaken',
      '31-LC-203': 'likely shaken',
      '31-PC-231': null,
      '31-TC-308': null,
    });
    const noSource = ranked.map((one) => ({
      ...one,
      group: one.group && { ...one.group, likelySource: null },
    }));
    expect(noSource.map(roleOf).filter(Boolean)).toEqual(Array(3).fill('source not told'));
  });

  it('gives the swing in % of the range where that was stated', () => {
    const shares = Object.fromEntries(ranked.map((loop) => [loop.assessment.loop, swingOfRange(loop)]));
    expect(shares['31-FC-201']).toBe(2); // 2 of a range of 100
    expect(shares['31-PC-231']).toBeNull();
  });

  it('keeps apart two records of one tag', () => {
    const [first, second, ...others] = madeLoops();
    const result = { ...(second!.result as Assessment), loop: first!.result.loop };
    const twice = madeUnit([first!, { ...second!, result }, ...others]);
    const named = twice.ranked.map(({ assessment }) => assessment.loop);
    expect(named).toContain('31-TC-308 (31-TC-308.csv)');
    expect(named).toContain('31-TC-308 (31-FC-201.csv)');
    const sticky = twice.ranked.find(({ assessment }) => assessment.loop.endsWith('(31-FC-201.csv)'))!;
    expect(sticky.signature).toEqual(second!.signature);
  });

  it('ranks by another rule, and refuses an unknown option', () => {
    const run = { loops: madeLoops(), provenance: { version: '1', options: {}, seed: 1 }, leftOut: [] };
    const plain = auditFindings(run, { ranking: { perShakenLoop: 0 } });
    expect(plain.ranked[0]!.score).toBeLessThan(ranked[0]!.score);
    expect(() => auditFindings(run, { rule: {} } as object)).toThrow(/auditFindings.*"rule"/);
  });
});
