import { describe, expect, it } from 'vitest';
import { WrongUse } from '../../src/errors';
import { type FitOptions, fitStiction } from '../../src/estimate/fit-stiction';
import type { StictionFit, StictionResult } from '../../src/estimate/stiction-fit';
import type { LoopRecord } from '../../src/record/loop-record';
import { seededRandom } from '../../src/signal/random';
import { textbookStem } from '../../src/valve/stem';
import { createTwoParameterValve } from '../../src/valve/two-parameter-steps';
import { expectClose } from '../closeness';
import { flowLoop, levelLoop, numbersOf } from './loops';

const sticky = flowLoop({ valve: createTwoParameterValve({ S: 3.4, J: 1.6, start: 52 }), samples: 1300 });
const found = fitStiction(sticky);

function fitOf(result: StictionResult): StictionFit {
  expect(result.refused).toEqual([]);
  expect(result.fit).not.toBeNull();
  return result.fit!;
}

/** Every reason is one or more whole sentences that say something of their own. */
function expectSentences(texts: readonly string[]): void {
  for (const text of texts) {
    expect(text).toMatch(/^[A-Z].*\.$/);
    expect(text.length).toBeGreaterThan(20);
    expect(text).not.toMatch(/undefined|NaN|null|Infinity/);
  }
  expect(new Set(texts).size).toBe(texts.length);
}

describe('fitStiction on a sticking flow valve', () => {
  it('gives S of the valve, the true value inside its interval', () => {
    const { S } = fitOf(found);
    expectClose(S.value, 3.4, { relative: 0.05 });
    expect(S.low).toBeLessThan(3.4);
    expect(S.high).toBeGreaterThan(3.4);
    expect(S.low).toBeLessThan(S.value);
    expect(S.high).toBeGreaterThan(S.value);
  });

  it('gives J with the true value inside its interval, or says that it is not resolved', () => {
    const { J, notes, jumpDrawn, S } = fitOf(found);
    if (J === null) expect(notes.map(({ code }) => code)).toContain('jump-not-resolved');
    else {
      expect(J.low).toBeLessThanOrEqual(1.6);
      expect(J.high).toBeGreaterThanOrEqual(1.6);
    }
    expect(jumpDrawn).toBeGreaterThanOrEqual(0);
    expect(jumpDrawn).toBeLessThanOrEqual(S.value);
  });

  it('gives travel, its model and PV for each sample, all finite, and shares between 0 and 1', () => {
    const { travel, modelTravel, simulatedPv, explains, explainsPv, travelSource } = fitOf(found);
    expect(travelSource).toBe('reconstructed');
    for (const values of [travel, modelTravel, simulatedPv]) {
      expect(values.length).toBe(sticky.op.length);
      expect(values.every(Number.isFinite)).toBe(true);
    }
    for (const share of [explains, explainsPv]) expect(share > 0.5 && share <= 1).toBe(true);
  });

  it('marks the slips in order, with times and sizes that the travel shows', () => {
    const { slips, travel } = fitOf(found);
    expect(slips.length).toBeGreaterThan(10);
    slips.forEach(({ sample, time, size }, i) => {
      if (i > 0) expect(sample).toBeGreaterThan(slips[i - 1].sample);
      expect(time).toBeCloseTo(sample * sticky.samplePeriod, 9);
      expect(Math.sign(size)).toBe(Math.sign(travel[sample] - travel[sample - 1]));
    });
  });

  it('tells the process that it found, with the sign of the gain', () => {
    const { process } = fitOf(found);
    expect(process!.response).toBe('self-regulating');
    expect(process!.gain).toBeGreaterThan(0);
    expect(process!.lag!).toBeGreaterThanOrEqual(0);
    expect(process!.deadTime).toBeGreaterThan(0);
  });

  it('gives the same answer each time and leaves the record alone', () => {
    const before = numbersOf(sticky);
    const again = fitStiction(Object.freeze({ ...sticky }), Object.freeze({}));
    expect(JSON.stringify(again)).toBe(JSON.stringify(found));
    expect(numbersOf(sticky)).toEqual(before);
  });

  it('says that the dead time was fitted', () => {
    expect(fitOf(found).notes.map(({ code }) => code)).toContain('dead-time-fitted');
  });
});

describe('what is stated to fitStiction', () => {
  const short: LoopRecord = flowLoop({
    valve: createTwoParameterValve({ S: 3, J: 3, start: 52 }),
    samples: 700,
  });

  it('keeps a stated dead time, to the sample, and then does not call it fitted', () => {
    for (const deadTime of [1, 3]) {
      const { drawn } = fitStiction(short, { deadTime });
      expectClose(drawn!.process!.deadTime, deadTime, { absolute: 0.5 }, `dead time ${deadTime} s`);
      expect(drawn!.notes.map(({ code }) => code)).not.toContain('dead-time-fitted');
    }
  });

  it('keeps near a stated process gain, and a true one does not spoil S', () => {
    const fit = fitOf(fitStiction(short, { processGain: 1.1 }));
    expectClose(fit.process!.gain, 1.1, { relative: 0.2 }, 'gain');
    expectClose(fit.S.value, 3, { relative: 0.06 }, 'S');
    expect(fit.S.high).toBeGreaterThan(2.99);
    // Travel is a square wave here: only the gain tells J, and now it does.
    expect(fit.J === null || fit.J.high >= 2.99, `J up to ${fit.J?.high}`).toBe(true);
  });

  it('is not sure of J below what it is where travel is a square wave and no gain is stated', () => {
    const { J } = fitOf(fitStiction(short));
    expect(J === null || J.high >= 2.99, `J up to ${J?.high}`).toBe(true);
  });

  const level = levelLoop({ valve: createTwoParameterValve({ S: 3, J: 1, start: 48 }), samples: 700 });

  it('takes the response as stated', () => {
    const { process, notes } = fitStiction(level).drawn!;
    expect(process).toMatchObject({ response: 'integrating', lag: null });
    expect(process!.gain).toBeLessThan(0);
    expect(notes.map(({ code }) => code)).not.toContain('response-from-data');
  });

  it('with no response stated tells it from the data and says so, or gives no numbers', () => {
    const { fit, drawn } = fitStiction(level, { response: 'unknown' });
    const { text } = drawn!.notes.find(({ code }) => code === 'response-from-data')!;
    expect(text).toContain(drawn!.process!.response);
    if (fit) expect(fit.process!.response).toBe('integrating');
  });

  it('refuses options it does not know, and dead times and gains that cannot be', () => {
    expect(() => fitStiction(sticky, { deadtime: 3 } as FitOptions)).toThrow(WrongUse);
    expect(() => fitStiction(sticky, { deadtime: 3 } as FitOptions)).toThrow(/deadtime.*deadTime/);
    for (const deadTime of [-1, Number.NaN]) {
      expect(() => fitStiction(sticky, { deadTime })).toThrow(/dead time/);
    }
    for (const processGain of [0, Number.NaN]) {
      expect(() => fitStiction(sticky, { processGain })).toThrow(/process gain/);
    }
  });
});

describe('fitStiction with measured travel', () => {
  const valve = () => textbookStem({ S: 3.4, J: 1.6, actuatorLag: 0.3, startOp: 52 });
  const drift = {
    outputDisturbances: [{ kind: 'ima', spread: 0.1, theta: 0.4, every: 1, seed: 4 }],
  } as const;
  const random = seededRandom(4);
  const logged = flowLoop({ valve: valve(), travelLogged: true, loop: drift });
  const noisy = { ...logged, travel: logged.travel!.map((value) => value + 0.05 * random.normal()) };
  const fit = fitOf(fitStiction(noisy));

  it('fits the element to it instead of a reconstruction, and gives both S and J', () => {
    expect(fit.travelSource).toBe('measured');
    expect(Array.from(fit.travel)).toEqual(Array.from(noisy.travel));
    expectClose(fit.S.value, 3.4, { relative: 0.06 });
    expectClose(fit.J!.value, 1.6, { absolute: 0.1 * 3.4 });
    expect(fit.explains).toBeGreaterThan(0.9);
  });

  it('does not believe PV over it: another PV leaves S and J nearly where they were', () => {
    const other = flowLoop({ valve: valve(), loop: drift, noise: 0.4, seed: 9 });
    const { drawn } = fitStiction({ ...noisy, pv: other.pv });
    expectClose(drawn!.S.value, fit.S.value, { relative: 1e-9 });
    expectClose(drawn!.jumpDrawn, fit.jumpDrawn, { relative: 1e-9 });
  });
});

describe('what fitStiction refuses', () => {
  it('a loop that a straight line explains as well', () => {
    const linear = flowLoop({
      loop: { outputDisturbances: [{ kind: 'sine', amplitude: 3, period: 60 }] },
      samples: 800,
    });
    const { fit, refused, drawn } = fitStiction(linear);
    expect(fit).toBeNull();
    expect(drawn).not.toBeNull();
    expectSentences(refused);
    expect(refused.join(' ')).toMatch(/straight line/);
  });

  it('an OP that stands still', () => {
    const { fit, drawn, test, refused } = fitStiction({
      ...sticky,
      op: new Float64Array(sticky.op.length).fill(50),
    });
    expect([fit, drawn, test]).toEqual([null, null, null]);
    expectSentences(refused);
    expect(refused.join(' ')).toMatch(/OP stands still/);
  });

  it('a record with too few reversals', () => {
    const samples = 400;
    const cut = (values: Float64Array): Float64Array => values.slice(0, samples);
    const { fit, refused } = fitStiction({
      ...sticky,
      pv: cut(sticky.pv),
      sp: cut(sticky.sp!),
      op: cut(sticky.op),
    });
    expect(fit).toBeNull();
    expectSentences(refused);
    expect(refused.join(' ')).toMatch(/reversals/);
  });

  it('an OP whose noise hides the reversals', () => {
    const random = seededRandom(12);
    const { fit, refused } = fitStiction({
      ...sticky,
      sp: null,
      op: sticky.op.map((value) => value + 1.2 * random.normal()),
    });
    expect(fit).toBeNull();
    expectSentences(refused);
    // By its noise, or because a straight line then does as well.
    expect(refused.join(' ')).toMatch(/noise|straight line/i);
  });

  it('what the fitness of the record forbids, in its words', () => {
    const { fit, refused } = fitStiction(sticky, {
      fitness: {
        checks: [
          {
            code: 'made-up',
            title: 'a check that fails',
            value: 1,
            unit: '',
            limit: 'none',
            source: 'own choice: for this test',
            passed: false,
            forbids: ['numbers'],
            text: 'This check fails on purpose.',
          },
        ],
        allows: { cycle: true, cause: true, numbers: false },
        recordToAskFor: 'Ask for more.',
      },
    });
    expect(fit).toBeNull();
    expect(refused).toContain('This check fails on purpose.');
  });
});
