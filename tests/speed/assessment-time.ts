/** Times one whole assessment of a made sticky loop in a process of its own: sent a length, it answers with the time. */
import { createHash } from 'node:crypto';
import { assessLoop } from '../../src/assessment/assess-loop';
import { simulateLoop } from '../../src/process/closed-loop';
import type { LoopRecord } from '../../src/record/loop-record';
import { stribeckFriction } from '../../src/valve/friction-law';
import { createStem, TEXTBOOK_VALVE } from '../../src/valve/stem';

export interface AssessmentTime {
  readonly samples: number;
  /** s: by the clock, the first assessment in its process as the command line meets it. */
  readonly seconds: number;
  /** s of processor time, that of Node's own threads included; it says more than the clock on a busy machine. */
  readonly processor: number;
  /** s by step, in their order. */
  readonly steps: Readonly<Record<string, number>>;
  /** Largest memory of the process, MB. */
  readonly memory: number;
}

if (process.send) {
  process.once('message', (samples: number) => {
    process.send?.(timeAssessment(samples), () => process.disconnect());
  });
}

function timeAssessment(samples: number): AssessmentTime {
  const record = stickyLoop(samples);
  const steps: Record<string, number> = {};
  let step: string | null = null;
  const before = process.cpuUsage();
  const start = performance.now();
  let last = start;
  assessLoop(record, {
    onProgress: (name) => {
      const now = performance.now();
      if (step !== null) steps[step] = (now - last) / 1000;
      step = name;
      last = now;
    },
  });
  const { user, system } = process.cpuUsage(before);
  return {
    samples,
    seconds: (last - start) / 1000,
    processor: (user + system) / 1e6,
    steps,
    memory: process.resourceUsage().maxRSS / 1024,
  };
}

/** A flow loop logged each second: stem with S = 3 % and J = 0.9 %, drift, noise, rounded OP; about a cycle a minute. */
function stickyLoop(samples: number): LoopRecord {
  const [S, J] = [3, 0.9];
  const newtonPerPercent = (TEXTBOOK_VALVE.spring * TEXTBOOK_VALVE.stroke) / 100;
  const friction = stribeckFriction({
    static: ((S + J) / 2) * newtonPerPercent,
    coulomb: ((S - J) / 2) * newtonPerPercent,
    viscous: 2 * TEXTBOOK_VALVE.viscous,
    stribeckSpeed: TEXTBOOK_VALVE.stribeckSpeed,
  });
  const { sp, pv, op } = simulateLoop({
    samples,
    runIn: 600,
    setPoint: (time) => (time < -500 ? 50 : 52),
    controller: { form: 'PI', gain: 0.5, integralTime: 4, bias: 50 },
    process: {
      response: 'self-regulating',
      gain: 1.2,
      lags: [5],
      deadTime: 1.5,
      restInput: 50,
      restOutput: 50,
    },
    valve: createStem({ friction, actuatorLag: 0.5 }),
    outputDisturbances: [{ kind: 'ima', spread: 0.03, theta: 0.4, every: 1, seed: 3 }],
    noise: 0.1,
    opStep: 0.025,
  });
  return {
    loop: '31-FC-104',
    service: 'flow',
    response: 'self-regulating',
    source: 'made.csv',
    sha256: createHash('sha256').update(new Uint8Array(op.buffer)).digest('hex'),
    start: '2026-03-04T06:00:00.000Z',
    samplePeriod: 1,
    pv,
    sp,
    op,
    travel: null,
    pvUnit: '%',
    pvRange: { low: 0, high: 100 },
    logging: {
      rows: samples,
      duplicates: 0,
      gaps: 0,
      longestGap: 1,
      manualShare: 0,
      badShare: 0,
      filledShare: 0,
      skew: 0,
      modeLogged: true,
      keptShare: 1,
    },
    notes: [],
  };
}
