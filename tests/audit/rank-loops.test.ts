import { describe, expect, it } from 'vitest';
import type { LoopGroup } from '../../src/audit/audit';
import { rankingRule, rankLoops } from '../../src/audit/rank-loops';
import { WrongUse } from '../../src/errors';
import { failedLoop, type MadeLoop, madeLoop } from './made-loops';

const sticky: MadeLoop = {
  loop: '31-FC-201',
  verdict: 'stiction',
  confidence: 0.9,
  S: 2,
  pvSwing: 6,
  pvRange: { low: 0, high: 120 },
  reversalsPerDay: 1500,
};
const group = (likelySource: string | null, ...loops: string[]): LoopGroup => ({
  period: 60,
  loops,
  likelySource,
  reasons: [],
});

describe('score of a loop', () => {
  it('is the rule, worked out by hand', () => {
    const loop = madeLoop(sticky);
    const noise = loop.signature!.pvNoise;
    // Swing 5 % of the range (full at 10, weight 2), S 2 % (full at 5), 1 500 reversals (full at 3 000).
    const severity = (2 * 0.5 + Math.min(1, 6 / noise / 50) + 2 / 5 + 0.5) / 5;
    const [ranked] = rankLoops([loop], []);
    expect(ranked!.score).toBeCloseTo(100 * 1 * 0.9 * (0.1 + 0.9 * severity), 0);
    expect(ranked!.reasons).toEqual([
      'The final control assembly was found sticking (confidence 90 %).',
      'PV swings by 6 m3/h peak to peak, 5 % of its range.',
      expect.stringMatching(/^That is \d+ times its own fast noise\.$/),
      'S is 2 % (1.8 to 2.2).',
      'The valve turns about 1500 times a day.',
    ]);
  });

  it('leaves out what is not known: range and S', () => {
    const loop = madeLoop({ ...sticky, S: null, pvRange: null });
    const severity = (Math.min(1, 6 / loop.signature!.pvNoise / 50) + 0.5) / 2;
    const [ranked] = rankLoops([loop], []);
    expect(ranked!.score).toBeCloseTo(90 * (0.1 + 0.9 * severity), 0);
    expect(ranked!.reasons[1]).toMatch(
      /^PV swings by 6 m3\/h peak to peak \(its range is not stated\), \d+ times/,
    );
  });

  it('rises with confidence, S, swing, reversals and loops shaken', () => {
    const score = (change: Partial<MadeLoop>, groups: LoopGroup[] = []): number =>
      rankLoops([madeLoop({ ...sticky, ...change })], groups)[0]!.score;
    const plain = score({});
    for (const more of [{ confidence: 0.95 }, { S: 3 }, { pvSwing: 9 }, { reversalsPerDay: 2500 }]) {
      expect(score(more), JSON.stringify(more)).toBeGreaterThan(plain);
    }
    const shaking = score({}, [group('31-FC-201', '31-FC-201', '31-PC-202', '31-LC-203')]);
    expect(shaking / plain).toBeCloseTo(1.5, 2);
  });
});

describe('ranking', () => {
  const victim: MadeLoop = {
    ...sticky,
    loop: '31-FC-105',
    verdict: 'outside-disturbance',
    S: null,
    pvSwing: 60,
    reversalsPerDay: 9000,
  };

  it('puts the source above its victims, healthy loops last with 0, equals by tag, and failed ones nowhere', () => {
    const small: MadeLoop = { ...sticky, pvSwing: 0.2, S: 0.5, confidence: 0.9, reversalsPerDay: 10 };
    const loops = [
      failedLoop('31-FC-999'),
      madeLoop({ loop: '31-FC-302', period: null, verdict: 'not-oscillating' }),
      madeLoop({ loop: '31-FC-301', period: null, verdict: 'not-oscillating' }),
      madeLoop(victim),
      madeLoop(small),
    ];
    const alone = rankLoops(loops, []);
    expect(alone.map(({ loop }) => loop)).toEqual(['31-FC-105', '31-FC-201', '31-FC-301', '31-FC-302']);
    const ranked = rankLoops(loops, [group('31-FC-201', '31-FC-105', '31-FC-201')]);
    expect(ranked.map(({ loop }) => loop)).toEqual(['31-FC-201', '31-FC-105', '31-FC-301', '31-FC-302']);
    expect(ranked[1]!.score).toBeCloseTo(ranked[0]!.score / 2, 0);
    expect(ranked[1]!.reasons.at(-1)).toMatch(/^Likely shaken by 31-FC-201: look there first\./);
    expect(ranked[0]!.reasons.at(-1)).toBe('Likely shakes 1 more: 31-FC-105.');
    expect(ranked.slice(2).map(({ score }) => score)).toEqual([0, 0]);
  });

  it('does not hold a loop down that was found sticking itself', () => {
    const other: MadeLoop = { ...sticky, loop: '31-FC-205', pvSwing: 12 };
    const shared = [group('31-FC-201', '31-FC-201', '31-FC-205')];
    const loops = [madeLoop(sticky), madeLoop(other)];
    expect(rankLoops(loops, shared)).toEqual([
      expect.objectContaining({ score: rankLoops(loops, [])[0]!.score, loop: '31-FC-205' }),
      expect.objectContaining({ score: rankLoops(loops, [])[1]!.score, loop: '31-FC-201' }),
    ]);
    expect(rankLoops(loops, shared)[0]!.reasons.at(-1)).toContain('31-FC-201, which is the likelier source');
  });

  it('says so where the source of a shared cycle is open', () => {
    const [first] = rankLoops([madeLoop(sticky)], [group(null, '31-FC-105', '31-FC-201')]);
    expect(first!.reasons.at(-1)).toBe(
      'Shares its cycle with 31-FC-105; which of them is the source cannot be told.',
    );
  });

  it('follows a rule that was changed, and refuses one that makes no sense', () => {
    const loops = [madeLoop(sticky), madeLoop(victim)];
    const cause = { ...rankingRule.cause, stiction: 0.1, 'outside-disturbance': 1 };
    expect(rankLoops(loops, [], { rule: { cause } })[0]!.loop).toBe('31-FC-105');
    for (const rule of [
      { shakenShare: 2 },
      { cause: { ...rankingRule.cause, stiction: -1 } },
      { weights: 1 },
    ]) {
      expect(() => rankLoops(loops, [], { rule: rule as never }), JSON.stringify(rule)).toThrow(WrongUse);
    }
    const severity = { ...rankingRule.severity, S: { full: 0, weight: 1 } };
    expect(() => rankLoops(loops, [], { rule: { severity } })).toThrow('"severity.S.full"');
    expect(() => rankLoops(loops, [], { groups: [] } as never)).toThrow('has no option "groups"');
  });
});
