/** Splits an audit into shards that run on their own, by a hash of the tag: the order of the list does not matter. */
import { createHash } from 'node:crypto';
import { WrongUse } from '../errors';

/** Shard number `shard`, from 1, of `of`. */
export interface Shard {
  readonly shard: number;
  readonly of: number;
}

/** More shards than this are taken for a slip of the pen (own choice). */
const mostShards = 10_000;

/** @throws WrongUse unless 1 <= shard <= of */
export function checkShard({ shard, of }: Shard): void {
  if (!(Number.isInteger(shard) && Number.isInteger(of) && shard >= 1 && shard <= of && of <= mostShards)) {
    throw new WrongUse(
      `A shard is i/n with whole numbers, i from 1 to n, n at most ${mostShards}, e.g. 2/8. Received ${shard}/${of}.`,
    );
  }
}

/** Whether a loop with this tag belongs to the shard. Every tag belongs to exactly one of them. */
export function isInShard(tag: string, { shard, of }: Shard): boolean {
  return createHash('sha256').update(tag).digest().readUInt32BE(0) % of === shard - 1;
}
