import { describe, expect, it } from 'vitest';
import { trackStiction } from '../../src/audit/track-stiction';
import { WrongUse } from '../../src/errors';
import type { LoopRecord } from '../../src/record/loop-record';
import { textbookStem } from '../../src/valve/stem';
import { flowLoop } from '../estimate/loops';

const part = 1200;

/** A flow loop over one part after another, each with a stem of its own S (0: a stem that hardly sticks). */
function wearing(S: readonly number[]): LoopRecord {
  const parts = S.map((one, i) =>
    flowLoop({
      valve: textbookStem({ S: one || 0.05, J: 0.45 * one, actuatorLag: 0.3, startOp: 52 }),
      samples: part,
      seed: i + 1,
      loop: { controller: { gain: 0.45, integralTime: 5, bias: 52 } },
    }),
  );
  const joined = (of: (record: LoopRecord) => Float64Array): Float64Array =>
    Float64Array.from(parts.flatMap((one) => [...of(one)]));
  return {
    ...parts[0]!,
    op: joined(({ op }) => op),
    pv: joined(({ pv }) => pv),
    sp: joined(({ sp }) => sp!),
  };
}

describe('trackStiction', () => {
  it('gives S window by window, and says since when it is larger', () => {
    const shares: number[] = [];
    const track = trackStiction(wearing([2, 2, 2, 2, 4, 4, 4, 4]), {
      window: part,
      onProgress: (share) => shares.push(share),
    });
    expect(track.windows.map(({ from, to }) => [from, to])).toEqual(
      Array.from({ length: 8 }, (_, i) => [i * part, (i + 1) * part]),
    );
    track.windows.forEach(({ S, refused }, i) => {
      expect(refused, `window ${i}`).toEqual([]);
      expect(Math.abs(S!.value - (i < 4 ? 2 : 4)), `S of window ${i}: ${S!.value}`).toBeLessThan(0.5);
    });
    expect(track.change).toMatchObject({ says: 'rising', shape: 'step' });
    expect(track.change.since!.value).toBe(4 * part);
    expect(track.reasons.join(' ')).toMatch(/^8 of 8 windows of 20 min give S\. S went up from about 2/);
    expect(track.reasons[1]).toContain('at 2024-01-01 01:20 (90 % interval');
    expect(shares[0]).toBe(0);
    expect(shares.at(-1)).toBe(1);
  });

  it('keeps a window without numbers with its reasons', () => {
    const track = trackStiction(wearing([3, 0]), { window: part });
    const [sticks, good] = track.windows;
    expect(sticks!.S).not.toBeNull();
    expect(good!.S).toBeNull();
    expect(good!.refused.length).toBeGreaterThan(0);
    expect(track.change.says).toBe('cannot tell');
    expect(track.reasons).toEqual([
      '1 of 2 windows of 20 min give S.',
      'Fewer than 6 are too few to tell whether S changes.',
    ]);
  });

  it('says why nothing can be had of a loop that stands still', () => {
    const still = { ...wearing([0]), op: new Float64Array(part).fill(50) };
    const { windows } = trackStiction(still, { window: 600 });
    for (const { S, refused } of windows) {
      expect(S).toBeNull();
      expect(refused.join(' ')).toMatch(/\w/);
    }
  });

  it('takes a twelfth of the record where nothing is asked for', () => {
    const record = { ...wearing([0]), op: new Float64Array(part).fill(50) };
    const { window, windows } = trackStiction(record);
    expect([window, windows.length]).toEqual([100, 12]);
  });

  it('refuses windows that make no sense', () => {
    const record = wearing([0]);
    for (const window of [0, -5, 1, Number.NaN, 5000]) {
      expect(() => trackStiction(record, { window }), `${window}`).toThrow(WrongUse);
    }
    expect(() => trackStiction(record, { step: 5 } as never)).toThrow('has no option "step"');
  });
});
