/** Writes a unit of any number of flow loops, one file each: a few are simulated, the others are variants of these. */
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { type LoopRun, simulateLoop } from '../../src/process/closed-loop';
import { seededRandom } from '../../src/signal/random';
import { stribeckFriction } from '../../src/valve/friction-law';
import { createStem, TEXTBOOK_VALVE } from '../../src/valve/stem';

/** Loops that are simulated: sticking ones, quiet ones, and some with a cycle from outside. */
const simulated = 12;
const start = Date.UTC(2026, 2, 4, 6);

/** Logged each second. Each variant has its own scale of PV and its own noise on it. */
export function writeMadeUnit(folder: string, loops: number, samples: number): void {
  const runs = Array.from({ length: Math.min(simulated, loops) }, (_, i) => madeLoop(i, samples));
  const stamps = Array.from({ length: samples }, (_, i) => new Date(start + 1000 * i).toISOString());
  for (let loop = 0; loop < loops; loop++) {
    const { sp, pv, op } = runs[loop % runs.length];
    const random = seededRandom(loop + 1);
    const scale = 0.5 + random.uniform();
    const lines = stamps.map((stamp, i) => {
      const value = scale * (pv[i] + 0.02 * random.normal());
      return `${stamp},${(scale * sp[i]).toFixed(3)},${value.toFixed(4)},${op[i].toFixed(3)}`;
    });
    writeFileSync(join(folder, `31-FC-${1000 + loop}.csv`), `time,SP,PV,OP\n${lines.join('\n')}\n`);
  }
}

function madeLoop(variant: number, samples: number): LoopRun {
  const kind = (['sticking', 'sticking', 'quiet', 'shaken'] as const)[variant % 4];
  const S = 1.5 + 0.4 * variant;
  const J = 0.3 * S;
  const newtonPerPercent = (TEXTBOOK_VALVE.spring * TEXTBOOK_VALVE.stroke) / 100;
  const friction = stribeckFriction({
    static: ((S + J) / 2) * newtonPerPercent,
    coulomb: ((S - J) / 2) * newtonPerPercent,
    viscous: 2 * TEXTBOOK_VALVE.viscous,
    stribeckSpeed: TEXTBOOK_VALVE.stribeckSpeed,
  });
  const process = { gain: 1.2, lags: [4 + variant / 3], deadTime: 1.5, restInput: 50, restOutput: 50 };
  return simulateLoop({
    samples,
    runIn: 600,
    setPoint: (time) => (time < -500 ? 50 : 52),
    controller: { form: 'PI', gain: kind === 'sticking' ? 0.5 : 0.3, integralTime: 5, bias: 50 },
    process: { response: 'self-regulating', ...process },
    valve: kind === 'sticking' ? createStem({ friction, actuatorLag: 0.5 }) : null,
    outputDisturbances: [
      { kind: 'ima', spread: 0.03, theta: 0.4, every: 1, seed: variant + 1 },
      ...(kind === 'shaken' ? [{ kind: 'sine', amplitude: 1.5, period: 70 + 5 * variant } as const] : []),
    ],
    noise: 0.1,
    seed: variant + 1,
    opStep: 0.025,
  });
}
