import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { makeTightenedValve, TIGHTENED_VALVE } from '../../data/make/tightened-valve';
import { fitTruth } from '../../data/make/truth';
import { trackStiction } from '../../src/audit/track-stiction';
import { WrongUse } from '../../src/errors';
import type { LoopRecord } from '../../src/record/loop-record';
import { readLoop } from '../../src/record/read-loop';
import { textbookStem } from '../../src/valve/stem';
import { flowLoop } from '../estimate/loops';

const data = join(__dirname, '../../data');
const part = 900;

/** A flow loop over one part after another, the valve of the first sticks and that of the second is good. */
function repaired(): LoopRecord {
  const parts = [3, 0].map((S, i) =>
    flowLoop({
      valve: textbookStem({ S: S || 0.05, J: 0.45 * S, actuatorLag: 0.3, startOp: 52 }),
      samples: part,
      seed: i + 1,
      loop: { controller: { gain: 0.45, integralTime: 4, bias: 52 } },
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

/** A loop whose OP stands still. */
function still(): LoopRecord {
  const record = flowLoop({ samples: part });
  return { ...record, op: new Float64Array(part).fill(50) };
}

describe('trackStiction', () => {
  // True S by the true travel of the simulated stem, as data/make/truth.ts finds it.
  it('gives S of the demo record window by window, and says since when it is larger', () => {
    const { name, tightenedAt, samplePeriod, pvRange, before, after } = TIGHTENED_VALVE;
    const { op, travel } = makeTightenedValve().run;
    const at = tightenedAt / samplePeriod;
    const trueS = [
      fitTruth(op.slice(0, at), travel.slice(0, at), before)!.S,
      fitTruth(op.slice(at), travel.slice(at), after)!.S,
    ] as const;
    const shares: number[] = [];
    const track = trackStiction(readLoop(join(data, `${name}.csv`), { pvRange }), {
      window: 1800,
      onProgress: (share) => shares.push(share),
    });
    expect(track.windows.map(({ from, to }) => [from, to])).toEqual(
      Array.from({ length: 8 }, (_, i) => [1800 * i, 1800 * (i + 1)]),
    );
    track.windows.forEach(({ S, refused, from }) => {
      const truth = trueS[from < tightenedAt ? 0 : 1];
      expect(refused, `window from ${from} s`).toEqual([]);
      expect(S!.low, `window from ${from} s`).toBeLessThan(truth * 1.1);
      expect(S!.high, `window from ${from} s`).toBeGreaterThan(truth * 0.9);
    });
    const { change } = track;
    expect(change).toMatchObject({ says: 'rising', shape: 'step' });
    expect(change.since!.value).toBe(tightenedAt);
    expect(Math.abs(change.before! / trueS[0] - 1)).toBeLessThan(0.1);
    expect(Math.abs(change.after! / trueS[1] - 1)).toBeLessThan(0.1);
    expect(track.reasons[0]).toBe('8 of 8 windows of 30 min give S.');
    expect(track.reasons[1]).toMatch(
      /^S went up from about 2 % to 3\.7 % at 2026-03-12 08:30 \(90 % interval /,
    );
    expect(shares[0]).toBe(0);
    expect(shares.at(-1)).toBe(1);
  });

  it('keeps a window without numbers with its reasons', () => {
    const track = trackStiction(repaired(), { window: part });
    const [sticks, good] = track.windows;
    expect(sticks!.S).not.toBeNull();
    expect(good!.S).toBeNull();
    expect(good!.refused.length).toBeGreaterThan(0);
    expect(track.change.says).toBe('cannot tell');
    expect(track.reasons).toEqual([
      '1 of 2 windows of 15 min give S.',
      'Fewer than 6 are too few to tell whether S changes.',
    ]);
  });

  it('says why nothing can be had of a loop that stands still', () => {
    const { windows } = trackStiction(still(), { window: 450 });
    for (const { S, refused } of windows) {
      expect(S).toBeNull();
      expect(refused.join(' ')).toMatch(/\w/);
    }
  });

  it('takes a twelfth of the record where nothing is asked for', () => {
    const { window, windows } = trackStiction(still());
    expect([window, windows.length]).toEqual([75, 12]);
  });

  it('refuses windows that make no sense', () => {
    const record = still();
    for (const window of [0, -5, 1, Number.NaN, 5000]) {
      expect(() => trackStiction(record, { window }), `${window}`).toThrow(WrongUse);
    }
    expect(() => trackStiction(record, { step: 5 } as never)).toThrow('has no option "step"');
  });
});
