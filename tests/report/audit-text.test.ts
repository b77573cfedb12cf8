import { describe, expect, it } from 'vitest';
import { cautions } from '../../src/assessment/cautions';
import type { Audit, FailedLoop, LoopGroup, RankedLoop } from '../../src/audit/audit';
import { auditText } from '../../src/report/audit-text';

const failed = (loop: string): FailedLoop => ({
  schema: 'stickband/failed-loop/1',
  loop,
  file: `${loop}.csv`,
  error: 'No OP.',
});
const found = (loop: string, verdict: string): Audit['loops'][number] =>
  ({ schema: 'stickband/assessment/1', loop, cause: { verdict } }) as unknown as Audit['loops'][number];

const audit = (
  loops: Audit['loops'],
  ranking: readonly RankedLoop[] = [],
  groups: readonly LoopGroup[] = [],
): Audit => ({
  schema: 'stickband/audit/1',
  loops,
  groups,
  ranking,
  cautions,
  provenance: { version: '1.2.3', options: {}, seed: 1 },
});

describe('auditText', () => {
  it('counts the loops by cause, the most frequent first, and the failed ones', () => {
    const loops = [
      found('a', 'stiction'),
      failed('b'),
      found('c', 'not-oscillating'),
      found('d', 'not-oscillating'),
      found('e', 'stiction'),
      found('f', 'not-oscillating'),
    ];
    expect(auditText(audit(loops))).toMatch(
      /^6 loops: 3 not-oscillating, 2 stiction, 1 failed\.\n\nCautions/,
    );
    expect(auditText(audit([failed('b')]))).toMatch(/^1 loop: 1 failed\./);
  });

  it('names what to look at first, with reasons, and no loop that needs no look', () => {
    const ranking = [
      { loop: '31-FC-104', score: 80, reasons: ['It sticks.', 'S is 3 %.'] },
      { loop: '31-FC-105', score: 0, reasons: ['It is quiet.'] },
    ];
    const text = auditText(audit([], ranking));
    expect(text).toContain('Look first at\n  1. 31-FC-104: It sticks. S is 3 %.\n');
    expect(text).not.toContain('31-FC-105');
  });

  it('shows eight at most', () => {
    const ranking = Array.from({ length: 12 }, (_, i) => ({
      loop: `L${i}`,
      score: 20 - i,
      reasons: ['So.'],
    }));
    expect(auditText(audit([], ranking)).match(/^ {2}\d+\. /gm)).toHaveLength(8);
  });

  it('says which loops cycle together, and a source only where one can be told', () => {
    const group = { period: 83.4567, loops: ['A', 'B'], reasons: ['So.'] };
    const groups = [
      { ...group, likelySource: 'B' },
      { ...group, likelySource: null },
    ];
    const text = auditText(audit([], [], groups));
    expect(text).toContain('  - 83.5 s: A, B; likely source B');
    expect(text).toContain('  - 83.5 s: A, B; the source cannot be told');
  });

  it('ends with every caution, in lines that a terminal can hold', () => {
    const text = auditText(audit([found('a', 'stiction')]));
    for (const caution of cautions) expect(text.replace(/\s+/g, ' ')).toContain(caution);
    for (const line of text.split('\n')) expect(line.length).toBeLessThanOrEqual(92);
  });
});
