/**
 * A long demo record: a flow loop whose valve sticks a little until its packing is tightened, and more from then on.
 * For S and J over time.
 */
import { type LoopRun, simulateLoop } from '../../src/process/closed-loop';
import { textbookStem } from '../../src/valve/stem';
import type { SteppableValve } from '../../src/valve/steppable-valve';
import type { ExportedLoop } from './export';

const runIn = 1800;

export const TIGHTENED_VALVE: ExportedLoop & {
  readonly name: string;
  readonly story: string;
  readonly seed: number;
  readonly samples: number;
  /** s after the start of the record. */
  readonly tightenedAt: number;
  /** S and J with which the stem was set up, %. */
  readonly before: { readonly S: number; readonly J: number };
  readonly after: { readonly S: number; readonly J: number };
  readonly pvRange: { readonly low: number; readonly high: number };
  readonly pvUnit: string;
} = {
  name: '31-FC-117-over-half-a-shift',
  tag: '31-FC-117',
  story: 'Seal water flow; the packing of its valve is tightened 2.5 hours after the start.',
  samplePeriod: 2,
  samples: 7200,
  start: '2026-03-12T06:00:00Z',
  logsTravel: false,
  pvDecimals: 2,
  seed: 117,
  tightenedAt: 9000,
  before: { S: 2, J: 0.9 },
  after: { S: 3.6, J: 1.6 },
  pvRange: { low: 0, high: 60 },
  pvUnit: 'm3/h',
};

export function makeTightenedValve(): { readonly demo: ExportedLoop; readonly run: LoopRun } {
  const { samples, samplePeriod, seed, before, after, tightenedAt } = TIGHTENED_VALVE;
  const run = simulateLoop({
    samples,
    runIn,
    scanPeriod: samplePeriod,
    setPoint: (time) => (time < -1700 ? 30 : 33),
    controller: { gain: 0.8, integralTime: 6, bias: 48 },
    valve: tightened(before, after, runIn + tightenedAt),
    process: { gain: 0.6, lags: [4], deadTime: 1, restInput: 48, restOutput: 30 },
    outputDisturbances: [{ kind: 'ima', spread: 0.015, theta: 0.5, every: samplePeriod, seed: seed + 1 }],
    noise: 0.04,
    seed,
    pvStep: 0.01,
    opStep: 0.01,
  });
  return { demo: TIGHTENED_VALVE, run };
}

interface Friction {
  readonly S: number;
  readonly J: number;
}

/** A stem that takes on other friction after so many seconds, where it stands then. */
function tightened(before: Friction, after: Friction, at: number): SteppableValve {
  let stem = textbookStem({ ...before, actuatorLag: 0.4, startOp: 48 });
  let time = 0;
  return {
    get travel() {
      return stem.travel;
    },
    advance(op, step) {
      if (time < at && time + step >= at) {
        stem = textbookStem({ ...after, actuatorLag: 0.4, startOp: op, startTravel: stem.travel });
      }
      time += step;
      return stem.advance(op, step);
    },
  };
}
