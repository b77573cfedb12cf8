/**
 * src/estimate against facts from outside the project: published loops whose valve is the published element itself, and
 * the textbook valve. Each check names its source; "value from memory" marks what was recalled and not read.
 */
import { describe, expect, it } from 'vitest';
import { describeTravel } from '../../src/estimate/describe-travel';
import { fitStiction } from '../../src/estimate/fit-stiction';
import { type LoopOptions, simulateLoop } from '../../src/process/closed-loop';
import { seededRandom } from '../../src/signal/random';
import { TEXTBOOK_VALVE, textbookStem } from '../../src/valve/stem';
import { runValve } from '../../src/valve/steppable-valve';
import { createTwoParameterValve } from '../../src/valve/two-parameter-steps';
import { expectClose } from '../closeness';
import { record } from '../evidence/loops';

/**
 * Choudhury, Thornhill, Shah 2005, Control Eng. Practice 13:641-658: plants, tunings and S from memory; J is ours, as the
 * published pairs were not remembered for certain. Scan periods and noise are ours too: two per cent of the PV swing.
 */
const published: Record<'concentration' | 'level', { S: number; noise: number; loop: LoopOptions }> = {
  concentration: {
    S: 5,
    noise: 0.06,
    loop: {
      samples: 2400,
      runIn: 1200,
      scanPeriod: 1,
      setPoint: (time) => (time < -1190 ? 0 : 10),
      controller: { gain: 0.2, integralTime: 10, low: -1000, high: 1000, bias: 40 },
      process: { gain: 3, lags: [10], deadTime: 10, restInput: 40 },
    },
  },
  level: {
    S: 3,
    noise: 0.04,
    loop: {
      samples: 2000,
      runIn: 400,
      scanPeriod: 0.5,
      setPoint: (time) => (time < -390 ? 0 : 10),
      controller: { gain: 0.4, integralTime: 2, low: -1000, high: 1000, bias: 40 },
      process: { response: 'integrating', gain: 1, restInput: 40 },
    },
  },
};

describe('the published loops with the two-parameter element inside', () => {
  for (const [name, jumps] of [
    ['concentration', [2, 3.5, 5]],
    ['level', [1, 3]],
  ] as const) {
    for (const J of jumps) {
      const { S, noise, loop } = published[name];
      it(`${name}: S = ${S} within a few per cent, J = ${J} within its interval or not resolved`, () => {
        const { op, pv, sp } = simulateLoop({
          ...loop,
          stepsPerScan: 1,
          valve: createTwoParameterValve({ S, J, start: 40 }),
          noise: noise * J,
          seed: 5,
        });
        const response = name === 'level' ? 'integrating' : 'self-regulating';
        const samplePeriod = loop.scanPeriod!;
        const logged = record({ op, pv, sp, response, service: 'other', samplePeriod });
        // A concentration loop this slow trades S against dead time; its dead time is published, so it is stated.
        const deadTime = name === 'concentration' ? 10 : null;
        const { fit, refused } = fitStiction(logged, { deadTime });
        expect(refused).toEqual([]);
        expectClose(fit!.S.value, S, { relative: 0.06 }, 'S');
        expect(fit!.S.low).toBeLessThanOrEqual(S);
        expect(fit!.S.high).toBeGreaterThanOrEqual(S);
        if (fit!.J === null) {
          expect(fit!.notes.map(({ code }) => code)).toContain('jump-not-resolved');
        } else {
          const said = `J ${fit!.J.value} (${fit!.J.low} to ${fit!.J.high})`;
          expect(fit!.J.low, said).toBeLessThanOrEqual(J);
          // J = S stands at the very end of what J may be.
          expect(fit!.J.high, said).toBeGreaterThanOrEqual(0.999 * J);
        }
      });
    }
  }
});

describe('textbook valve (Kayihan, Doyle 2000, Control Eng. Practice 8:799-812; values from memory), friction scaled down', () => {
  const newtonPerPercent = (TEXTBOOK_VALVE.spring * TEXTBOOK_VALVE.stroke) / 100;
  const random = seededRandom(31);

  // Shares of its static and of its Coulomb friction. With one share for both J is 0.09 S and hardly shows in a stroke.
  for (const [staticShare, coulombShare, resolvedJ] of [
    [0.03, 0.015, 0.03],
    [0.05, 0.015, 0.03],
    [0.08, 0.04, 0.03],
    [0.05, 0.05, 0.1],
  ]) {
    const Fs = staticShare * TEXTBOOK_VALVE.static;
    const Fc = coulombShare * TEXTBOOK_VALVE.coulomb;
    const S = (Fs + Fc) / newtonPerPercent;
    const J = (Fs - Fc) / newtonPerPercent;
    it(`a slow stroke with travel measured shows S = (Fs + Fc)/span = ${S.toFixed(2)} %, J = (Fs - Fc)/span = ${J.toFixed(2)} %`, () => {
      // Up and down by a little more than twice S, at a tenth of the Stribeck speed of 0.25 % a second at most.
      const op = Float64Array.from(
        { length: 4000 },
        (_, k) => 50 + 2.2 * S * (2 * Math.abs(((k / 800) % 1) - 0.5) - 0.5),
      );
      const travel = runValve(textbookStem({ S, J, startOp: op[0] }), op, 1).map(
        (value) => value + 0.02 * random.normal(),
      );
      const found = describeTravel(op, travel, { near: null, largest: 2.2 * S });
      expect(found.explains).toBeGreaterThan(0.97);
      expectClose(found.S, S, { relative: 0.03 }, 'S');
      expectClose(found.J, J, { absolute: resolvedJ * S }, 'J');
    });
  }
});
