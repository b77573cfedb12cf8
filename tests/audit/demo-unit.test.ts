/**
 * The demo unit audited as a user would, from its list in data/. What is true of each loop stands where it is made
 * (data/make/demo-unit.ts), not here.
 */
import { join } from 'node:path';
import { beforeAll, describe, expect, it } from 'vitest';
import { DEMO_UNIT, unitListFile } from '../../data/make/demo-unit';
import type { Assessment } from '../../src/assessment/assessment';
import { type Audit, hasFailed } from '../../src/audit/audit';
import { auditLoops } from '../../src/audit/audit-loops';

const tagsOf = (...causes: string[]): string[] =>
  DEMO_UNIT.filter(({ cause }) => causes.includes(cause)).map(({ tag }) => tag);
const sticking = tagsOf('stiction', 'lost-motion');
const healthy = tagsOf('not-oscillating');
const [source] = DEMO_UNIT.flatMap(({ shakenBy }) => (shakenBy === null ? [] : [shakenBy.tag]));
const victims = DEMO_UNIT.filter(({ shakenBy }) => shakenBy?.tag === source).map(({ tag }) => tag);

let audit: Audit;
const found = (tag: string): Assessment => {
  const result = audit.loops.find(({ loop }) => loop === tag)!;
  if (hasFailed(result)) throw new Error(`${tag} failed: ${result.error}`);
  return result;
};
const verdictOf = (tag: string): string => found(tag).cause.verdict;
const accused = (tag: string): boolean => ['stiction', 'lost-motion'].includes(verdictOf(tag));
const place = (tag: string): number => audit.ranking.findIndex(({ loop }) => loop === tag);

beforeAll(async () => {
  audit = await auditLoops(join(__dirname, '../../data', unitListFile), { workers: 0 });
}, 300_000);

describe('audit of the demo unit', () => {
  it('assesses every loop', () => {
    expect(audit.loops.map(({ loop }) => loop)).toEqual(DEMO_UNIT.map(({ tag }) => tag));
    expect(audit.loops.filter(hasFailed)).toEqual([]);
  });

  it('accuses all four valves that are to blame, with S within a quarter of what was built', () => {
    expect(sticking).toHaveLength(4);
    expect(sticking.filter((tag) => !accused(tag))).toEqual([]);
    for (const tag of sticking) {
      const { S } = DEMO_UNIT.find((loop) => loop.tag === tag)!.built;
      expect(Math.abs(found(tag).stiction!.S.value - S) / S, tag).toBeLessThan(0.25);
    }
  });

  it('accuses no healthy loop, no victim, none that is tuned too tight or shaken from outside', () => {
    const others = DEMO_UNIT.map(({ tag }) => tag).filter((tag) => !sticking.includes(tag));
    expect(others.filter(accused)).toEqual([]);
  });

  it('names other causes right, or says that it cannot tell: wrong in none, open in at most a third', () => {
    const others = tagsOf('tight-tuning', 'outside-disturbance', 'not-oscillating');
    const wrong = others.filter((tag) => {
      const { cause } = DEMO_UNIT.find((loop) => loop.tag === tag)!;
      return verdictOf(tag) !== cause && verdictOf(tag) !== 'cannot-tell';
    });
    expect(wrong).toEqual([]);
    const open = others.filter((tag) => verdictOf(tag) === 'cannot-tell');
    expect(open.length).toBeLessThanOrEqual(others.length / 3);
  });

  it('puts the shaking loop and its three neighbours into one group and names the source', () => {
    const group = audit.groups.find(({ loops }) => loops.includes(source!))!;
    expect(group.loops).toEqual([source, ...victims].sort());
    expect(group.loops).toHaveLength(4);
    expect(group.likelySource).toBe(source);
    expect(group.period).toBeCloseTo(found(source!).oscillation.period!, -1);
    expect(group.reasons.join(' ')).toContain('Likely shaken by it: 31-LC-203, 31-PC-202, 31-TC-204.');
  });

  it('sees that two loops share a cycle from outside, and names no source', () => {
    expect(audit.groups).toHaveLength(2);
    const [, outside] = audit.groups;
    expect(outside!.loops).toEqual(['31-FC-241', '31-PC-242']);
    expect(outside!.likelySource).toBeNull();
    expect(outside!.reasons.join(' ')).toContain('A source outside these loops is suspected');
  });

  it('ranks the source first, above its victims, sticking loops before all others, healthy ones below', () => {
    expect(place(source!)).toBe(0);
    for (const victim of victims) expect(place(victim), victim).toBeGreaterThan(place(source!));
    expect(
      audit.ranking
        .slice(0, 4)
        .map(({ loop }) => loop)
        .sort(),
    ).toEqual([...sticking].sort());
    const scores = new Map(audit.ranking.map(({ loop, score }) => [loop, score]));
    for (const tag of healthy) expect(scores.get(tag), tag).toBeLessThan(5);
    expect(healthy.filter((tag) => scores.get(tag) === 0).length).toBeGreaterThanOrEqual(healthy.length / 2);
  });
});
