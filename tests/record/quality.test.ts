import { describe, expect, it } from 'vitest';
import { isGoodQuality } from '../../src/record/quality';

describe('isGoodQuality', () => {
  it('reads words', () => {
    expect([...isGoodQuality(['Good', 'BAD', '', 'uncertain'])!]).toEqual([1, 0, 1, 0]);
  });

  it('reads the codes of OPC', () => {
    // OPC Data Access: 192 good, 216 good (local override), 0 bad, 24 bad (comm failure), 64 uncertain. Values from memory.
    expect([...isGoodQuality([192, 216, 0, 24, 64])!]).toEqual([1, 1, 0, 0, 0]);
  });

  it('does not guess at 0 and 1, which are used both ways', () => {
    expect(isGoodQuality([0, 1])).toBeNull();
    expect(isGoodQuality(['fine'])).toBeNull();
  });
});
