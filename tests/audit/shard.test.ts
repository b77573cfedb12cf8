import { describe, expect, it } from 'vitest';
import { checkShard, isInShard } from '../../src/audit/shard';

const tags = Array.from({ length: 1000 }, (_, i) => `31-FC-${100 + i}`);

describe('isInShard', () => {
  it('puts every tag into exactly one shard', () => {
    for (const of of [1, 2, 7]) {
      for (const tag of tags) {
        const shards = Array.from({ length: of }, (_, i) => ({ shard: i + 1, of }));
        expect(shards.filter((shard) => isInShard(tag, shard))).toHaveLength(1);
      }
    }
  });

  it('goes by the first 32 bits of the SHA-256 of the tag, in UTF-8', () => {
    // FIPS 180-4, the example "abc" of NIST: the digest starts with ba7816bf.
    const of = 1000;
    expect(isInShard('abc', { shard: (0xba7816bf % of) + 1, of })).toBe(true);
  });

  it('shares the loops out evenly: within five standard deviations of the binomial distribution', () => {
    const of = 8;
    const spread = Math.sqrt(tags.length * (1 / of) * (1 - 1 / of));
    for (let shard = 1; shard <= of; shard++) {
      const count = tags.filter((tag) => isInShard(tag, { shard, of })).length;
      expect(Math.abs(count - tags.length / of)).toBeLessThan(5 * spread);
    }
  });
});

describe('checkShard', () => {
  it.each([
    [0, 2],
    [3, 2],
    [1.5, 2],
    [1, 0],
    [1, 20_000],
    [Number.NaN, 2],
  ])('refuses %d/%d', (shard, of) => {
    expect(() => checkShard({ shard, of })).toThrow(/A shard is i\/n with whole numbers, i from 1 to n/);
  });

  it('takes the first and the last', () => {
    expect(() => checkShard({ shard: 1, of: 1 })).not.toThrow();
    expect(() => checkShard({ shard: 8, of: 8 })).not.toThrow();
  });
});
