import { describe, expect, it } from 'vitest';
import { groupLoops } from '../../src/audit/group-loops';
import { WrongUse } from '../../src/errors';
import { failedLoop, type MadeLoop, madeLoop } from './made-loops';

const made = (...loops: MadeLoop[]) => loops.map((loop, i) => madeLoop({ seed: i + 1, ...loop }));
const source: MadeLoop = { loop: '31-FC-201', verdict: 'stiction', confidence: 0.9, S: 3, corners: 0.2 };
const victims: MadeLoop[] = [
  { loop: '31-PC-202', delay: 7, noise: 0.3, verdict: 'outside-disturbance', confidence: 0.8 },
  { loop: '31-LC-203', delay: 21, samplePeriod: 5, samples: 600 },
];

describe('which loops share a cycle', () => {
  it('those that cycle together, and no others: another period, no cycle, failed', () => {
    const loops = [
      ...made(...victims, source, { loop: '31-FC-211', period: 83 }, { loop: '31-FC-301', period: null }),
      failedLoop('31-FC-999'),
    ];
    const groups = groupLoops(loops);
    expect(groups.map((group) => group.loops)).toEqual([['31-FC-201', '31-LC-203', '31-PC-202']]);
    expect(groups[0]!.period).toBeCloseTo(60, 0);
    expect(groups[0]!.reasons[0]).toMatch(
      /^3 loops cycle with a period of about 60 s: .* at least 39 cycles/,
    );
  });

  it('the order of the audit changes nothing', () => {
    const loops = made(source, ...victims);
    expect(groupLoops([...loops].reverse())).toEqual(groupLoops(loops));
  });

  it('not two cycles of nearly one period that drift apart', () => {
    // Over 2 400 s the first makes 40 cycles and the second 39.
    const loops = made({ loop: '31-FC-211' }, { loop: '31-FC-212', period: 2400 / 39 });
    expect(groupLoops(loops)).toEqual([]);
  });

  it('not two cycles that were logged at other times, whatever their periods', () => {
    const [one, other] = [{ loop: '31-FC-211' }, { loop: '31-FC-212', start: '2026-03-11T06:00:00Z' }];
    expect(groupLoops(made(one, other))).toEqual([]);
    // Half an hour in common is enough.
    expect(groupLoops(made(one, { ...other, start: '2026-03-10T06:10:00Z' }))).toHaveLength(1);
  });

  it('tells which loops have the period and yet are not in the group', () => {
    const loops = made(
      source,
      victims[0]!,
      { loop: '31-FC-211', period: 2400 / 39 },
      { loop: '31-FC-212', start: '2026-03-11T06:00:00Z' },
    );
    const [group] = groupLoops(loops);
    expect(group!.loops).toEqual(['31-FC-201', '31-PC-202']);
    expect(group!.reasons.slice(-2)).toEqual([
      'Of about this period but not in the group, as spectrum or step differ: 31-FC-211.',
      'Of about this period but logged at other times, so that nothing shows whether they share the cycle: 31-FC-212.',
    ]);
  });

  it('warns where the common time is short', () => {
    const short = { samples: 600 };
    const [group] = groupLoops(made({ ...source, ...short }, { ...victims[0]!, ...short }));
    expect(group!.reasons[0]).toContain(
      'Over so few, unrelated cycles of like period can keep step by chance',
    );
  });

  it('with another likeness asked for, other groups', () => {
    const loops = made(source, victims[0]!);
    expect(groupLoops(loops, { leastLikeness: 1 })).toEqual([]);
    expect(() => groupLoops(loops, { leastLikeness: 0 })).toThrow(WrongUse);
    expect(() => groupLoops(loops, { likeness: 1 } as never)).toThrow('has no option "likeness"');
  });
});

/** Of one group. */
function told(...loops: MadeLoop[]): { readonly source: string | null; readonly words: string } {
  const groups = groupLoops(made(...loops));
  expect(groups).toHaveLength(1);
  return { source: groups[0]!.likelySource, words: groups[0]!.reasons.join(' ') };
}

describe('the likely source', () => {
  it('is the one loop that was found sticking, with its victims and their phases', () => {
    const { source: named, words } = told(...victims, source);
    expect(named).toBe('31-FC-201');
    expect(words).toContain(
      'of these loops only its final control assembly was found sticking (confidence 90 %, S 3.0 % of OP span)',
    );
    expect(words).toContain('Likely shaken by it: 31-LC-203, 31-PC-202.');
    // 7 s and 21 s of 60 s.
    expect(words).toMatch(/31-LC-203 behind by 0\.3[45] of a cycle, 31-PC-202 behind by 0\.1[12] of a cycle/);
    expect(words).toContain('Phase alone does not tell who drives whom');
  });

  it('cannot be told when two were found sticking, and says so', () => {
    const { source: named, words } = told(source, { ...source, loop: '31-FC-205', verdict: 'lost-motion' });
    expect(named).toBeNull();
    expect(words).toContain(
      '2 of them were found sticking (31-FC-201, 31-FC-205), and nothing shows which of them cycled first',
    );
  });

  it('is the first in time of two that were found sticking', () => {
    const { source: named, words } = told({ ...source, quietUntil: 900 }, { ...source, loop: '31-FC-205' });
    expect(named).toBe('31-FC-205');
    expect(words).toMatch(/31-FC-205 cycled first: the next one began at least 1[45]\S* min later/);
    expect(words).toContain('over at least 25 cycles logged at the same time');
    expect(words).toContain('Also found sticking, so perhaps not only shaken: 31-FC-201.');
  });

  it('is not a sticking loop that began to cycle after another', () => {
    const { source: named, words } = told({ ...source, quietUntil: 900 }, victims[0]!);
    expect(named).toBeNull();
    expect(words).toContain("only 31-FC-201's final control assembly was found sticking");
    expect(words).toContain('but 31-PC-202 cycled before it');
  });

  it('is the one with tight tuning where none sticks, none where several are tight', () => {
    const tight: MadeLoop = { loop: '31-PC-231', verdict: 'tight-tuning', confidence: 0.8 };
    expect(told(tight, victims[0]!)).toMatchObject({ source: '31-PC-231' });
    const two = told(tight, { ...tight, loop: '31-PC-232' });
    expect(two.source).toBeNull();
    expect(two.words).toContain('coupled loops can cycle together');
  });

  it('without a cause is the first in time, else something outside is suspected', () => {
    const late: MadeLoop = { loop: '31-PC-242', quietUntil: 900 };
    expect(told({ loop: '31-FC-241' }, late)).toMatchObject({ source: '31-FC-241' });
    const outside = told({ loop: '31-FC-241', verdict: 'outside-disturbance' }, late);
    expect(outside.source).toBeNull();
    expect(outside.words).toContain('A source outside these loops is suspected');
  });

  it('nonlinearity is told for the reader, also where it speaks for another', () => {
    expect(told({ ...source, surrogate: 2.4 }, { ...victims[0]!, surrogate: 1.1 }).words).toContain(
      'Nonlinearity is strongest in 31-FC-201 (surrogate test 2.4',
    );
    const against = told({ ...source, surrogate: 1.1 }, { ...victims[0]!, surrogate: 2.4 });
    expect(against.source).toBe('31-FC-201');
    expect(against.words).toContain('so this speaks for another loop than the one named');
    expect(told({ ...source, surrogate: 0.4 }, { ...victims[0]!, surrogate: 0.2 }).words).toContain(
      'None of the cycles is clearly nonlinear',
    );
    expect(told(source, victims[0]!).words).toContain('ran on fewer than two of them');
  });
});
