import { describe, expect, it } from 'vitest';
import type { AuditPart, FinishedLoop } from '../../src/audit/audit';
import { mergeAudits } from '../../src/audit/merge-audits';

const failed = (order: number): FinishedLoop => ({
  order,
  file: `${order}.csv`,
  result: { schema: 'stickband/failed-loop/1', loop: `T${order}`, file: `${order}.csv`, error: 'No OP.' },
  signature: null,
});

function part(shard: number, change: Partial<AuditPart> = {}): AuditPart {
  return {
    schema: 'stickband/audit-part/1',
    shard,
    of: 3,
    allLoops: 3,
    listed: 'a'.repeat(64),
    loops: [failed(3 - shard)],
    cautions: [],
    provenance: { version: '1.2.3', options: {}, seed: 1 },
    ...change,
  };
}

describe('mergeAudits', () => {
  it('puts the loops into the order of the audit', () => {
    const { loops, provenance } = mergeAudits([part(2), part(3), part(1)]);
    expect(loops.map(({ loop }) => loop)).toEqual(['T0', 'T1', 'T2']);
    expect(provenance).toEqual({ version: '1.2.3', options: {}, seed: 1 });
  });

  it.each<[string, AuditPart[], RegExp]>([
    ['nothing', [], /no parts to merge/],
    ['a missing shard', [part(1), part(3)], /Shard 2 of 3 is missing\. Run it with --shard 2\/3/],
    ['several missing', [part(2)], /Shard 1, 3 of 3 is missing/],
    ['a shard given twice', [part(1), part(2), part(3), part(2)], /Shard 2 of 3 was given twice/],
    [
      'another number of shards',
      [part(1), part(2, { of: 4 }), part(3)],
      /Shard 1 of 3 and shard 2 of 4 do not belong together: their number of shards differs/,
    ],
    [
      'another version',
      [part(1), part(2, { provenance: { version: '1.3.0', options: {}, seed: 1 } }), part(3)],
      /their versions are 1\.2\.3 and 1\.3\.0/,
    ],
    [
      'another seed',
      [part(1), part(2, { provenance: { version: '1.2.3', options: {}, seed: 7 } }), part(3)],
      /their seeds are 1 and 7/,
    ],
    [
      'other options',
      [part(1), part(2, { provenance: { version: '1.2.3', options: { zone: 'UTC' }, seed: 1 } }), part(3)],
      /their options differ/,
    ],
    ['another list', [part(1), part(2, { listed: 'b'.repeat(64) }), part(3)], /their lists of loops differ/],
    ['a loop too few', [part(1), part(2, { loops: [] }), part(3)], /hold 2 loops, but the audit has 3/],
    ['a loop twice', [part(1), part(2, { loops: [failed(2)] }), part(3)], /a part was changed/],
  ])('refuses %s', (_, parts, sentence) => {
    expect(() => mergeAudits(parts)).toThrow(sentence);
  });
});
