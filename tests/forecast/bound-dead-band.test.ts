/** The bound that set-point moves put on the dead band, on the stem of the demo loop with known friction. */
import { describe, expect, it } from 'vitest';
import { DEMO_LOOPS } from '../../data/make/demo-loops';
import { boundDeadBand, type DeadBandBound } from '../../src/forecast/bound-dead-band';
import { simulateLoop } from '../../src/process/closed-loop';
import type { LoopRecord } from '../../src/record/loop-record';
import { textbookStem } from '../../src/valve/stem';

const demo = DEMO_LOOPS.find(({ name }) => name === '31-FC-104-after-repair')!;

function boundOf(S: number, J: number, seed: number, samples = 3600): DeadBandBound {
  const valve = textbookStem({ S, J, actuatorLag: 0.3, startOp: 52 });
  const { sp, pv, op } = simulateLoop({ ...demo.loop(seed), samples, valve });
  const record = { sp, pv, op, samplePeriod: 1 } as unknown as LoopRecord;
  return boundDeadBand(record, { period: 128, integrating: false, sign: 1 });
}

describe('set-point moves', () => {
  it('bound a good valve within 1 %', () => {
    for (const seed of [1, 2]) expect(boundOf(0.1, 0.02, seed).below).toBeLessThanOrEqual(1);
  });

  it.each([
    [1, 0.4],
    [1.5, 0.2],
    [2.5, 1],
  ])('never put S = %f, J = %f below its truth', (S, J) => {
    for (const seed of [1, 2]) {
      const { below } = boundOf(S, J, seed);
      expect(below ?? Number.POSITIVE_INFINITY).toBeGreaterThanOrEqual(S);
    }
  });

  it.each([0.5, 1.5])(
    'never put lost motion of %f percent in an integrating loop below its truth',
    (backlash) => {
      const level = DEMO_LOOPS.find(({ name }) => name === '31-LC-140')!;
      const to = [56, 57, 56, 54, 55, 53.5, 55, 56, 54.5, 55.5];
      const valve = textbookStem({ S: 0.1, J: 0.02, actuatorLag: 1, backlash, startOp: 48 });
      const setPoint = (time: number): number => (time < 0 ? 55 : to[Math.min(9, Math.floor(time / 1080))]!);
      const { sp, pv, op } = simulateLoop({ ...level.loop(3), setPoint, valve });
      const record = { sp, pv, op, samplePeriod: 5 } as unknown as LoopRecord;
      const { below } = boundDeadBand(record, { period: 470, integrating: true, sign: -1 });
      expect(below ?? Number.POSITIVE_INFINITY).toBeGreaterThanOrEqual(backlash + 0.1);
    },
  );

  it('say so when they are too few', () => {
    const found = boundOf(0.1, 0.02, 1, 900);
    expect(found.below).toBeNull();
    expect(found.why).toMatch(/3 set-point moves, 1 of them reversals; at least 8 and 4/);
  });
});
