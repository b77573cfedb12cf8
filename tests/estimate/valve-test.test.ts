import { describe, expect, it } from 'vitest';
import type { ProcessSettings } from '../../src/estimate/process-fit';
import { type Reconstruction, reconstructTravel } from '../../src/estimate/reconstruct-travel';
import type { ValveTest } from '../../src/estimate/stiction-fit';
import { findLine, testValve } from '../../src/estimate/valve-test';
import type { LoopRecord } from '../../src/record/loop-record';
import { createTwoParameterValve } from '../../src/valve/two-parameter-steps';
import { expectClose } from '../closeness';
import { wave } from '../oscillation/waves';
import { flowLoop, levelLoop, processSettings } from './loops';

interface Scene {
  readonly record: LoopRecord;
  readonly settings: ProcessSettings;
  readonly found: Reconstruction;
  readonly line: ReturnType<typeof findLine>;
}

/** A loop whose cycle has about `period` samples, with the travel as stage 1 has it. */
function sceneOf(record: LoopRecord, period: number, change: Partial<ProcessSettings> = {}): Scene {
  const settings = processSettings({ period, samplePeriod: record.samplePeriod, ...change });
  const [found] = reconstructTravel(record.pv, record.op, settings)!;
  return { record, settings, found, line: findLine(record.op, period) };
}

const tested = ({ record, found, settings, line }: Scene): ValveTest =>
  testValve(record.pv, record.op, found, settings, line);

describe('findLine', () => {
  it('finds the frequency of a steady sine between the bins of the spectrum, and calls it coherent', () => {
    for (const period of [37.3, 61.8, 150]) {
      const op = wave('sine', 2000, period, { noise: 0.1, seed: 3 }).map((value) => 50 + 4 * value);
      // The period stated is off by a few per cent, as one from zero crossings may be.
      const { frequency, share, coherent } = findLine(op, 1.05 * period);
      expectClose(frequency, 1 / period, { absolute: 0.05 / 2000 }, `frequency for period ${period}`);
      expect(share).toBeGreaterThan(0.9);
      expect(share).toBeLessThanOrEqual(1);
      expect(coherent).toBe(true);
    }
  });

  it('does not call a cycle coherent that wanders in period, nor noise', () => {
    const wandering = wave('sine', 2000, 50, { wander: 0.15, seed: 5 });
    expect(findLine(wandering, 50).coherent).toBe(false);
    const noise = wave('sine', 2000, 50, { noise: 20, seed: 6 });
    expect(findLine(noise, 50).coherent).toBe(false);
  });

  it('does not mind where the signal stands or how large it is', () => {
    const op = wave('sine', 1500, 41, { noise: 0.2, wander: 0.05, seed: 8 });
    const one = findLine(op, 41);
    const other = findLine(
      op.map((value) => 30 + 7 * value),
      41,
    );
    expectClose(other.frequency, one.frequency, { relative: 1e-6 });
    expectClose(other.share, one.share, { absolute: 1e-6 });
  });
});

describe('testValve', () => {
  const samples = 900;
  const sticky = sceneOf(
    flowLoop({ valve: createTwoParameterValve({ S: 3.4, J: 1.6, start: 52 }), samples }),
    101,
  );
  const stickyTest = tested(sticky);

  it('finds a sticking valve far better than a straight line and than dead band alone', () => {
    expect(stickyTest.tOverLine).toBeGreaterThan(5);
    expect(stickyTest.tOverDeadBand).toBeGreaterThan(3);
    expect(stickyTest.blocksForValve / stickyTest.blocks).toBeGreaterThan(0.9);
    expect(stickyTest.gainOverLine).toBeGreaterThan(0);
  });

  it('finds no valve in a linear loop that an outside sine shakes, and takes the steady line out', () => {
    const sine = { kind: 'sine', amplitude: 3, period: 60 } as const;
    const scene = sceneOf(flowLoop({ samples, loop: { outputDisturbances: [sine] } }), 60);
    expect(scene.line.coherent).toBe(true);
    const { tOverLine, tWithoutLine } = tested(scene);
    expect(Math.min(tOverLine, tWithoutLine!)).toBeLessThan(3);
  });

  it('takes a line out only when it is told that OP carries one', () => {
    const { line } = sticky;
    expect(tested({ ...sticky, line: { ...line, coherent: false } }).tWithoutLine).toBeNull();
    // The sticking valve keeps its lead with line and harmonics gone: its slips are no sum of five sines.
    expect(tested({ ...sticky, line: { ...line, coherent: true } }).tWithoutLine).toBeGreaterThan(3);
  });

  it('prefers a valve with dead band alone to one with a jump where there is no jump', () => {
    const record = levelLoop({ valve: createTwoParameterValve({ S: 3, J: 0, start: 48 }), samples: 1200 });
    const test = tested(sceneOf(record, 95, { integrating: true, sign: -1 }));
    expect(test.tOverLine).toBeGreaterThan(2);
    expect(test.tOverDeadBand).toBeLessThan(2);
  });

  it('does not depend on the unit of PV', () => {
    const { record, found } = sticky;
    const scaled = { ...record, pv: record.pv.map((value) => 8 * value) };
    const other = tested({ ...sticky, record: scaled, found: { ...found, gain: 8 * found.gain } });
    expectClose(other.tOverLine, stickyTest.tOverLine, { relative: 1e-6 });
    expectClose(other.tOverDeadBand, stickyTest.tOverDeadBand, { relative: 1e-6 });
    expect(other.blocksForValve).toBe(stickyTest.blocksForValve);
  });
});
