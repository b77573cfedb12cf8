import { describe, expect, it } from 'vitest';
import {
  createBandMisfits,
  createObjective,
  createScratch,
  filterTravel,
  misfitOfPieces,
  type ObjectiveOptions,
  secondTheta,
  simulateProcess,
  whiten,
} from '../../src/estimate/objective';
import { seededRandom } from '../../src/signal/random';
import {
  createTravelPieces,
  type TravelPieces,
  travelFromPieces,
  walkTwoParameter,
} from '../../src/valve/two-parameter';
import { expectAllClose, expectClose } from '../closeness';

const samples = 1400;
/** OP and valve rest from here on, so that nothing is left of the last move when the record ends. */
const restFrom = 600;

const random = seededRandom(5);
const op = new Float64Array(samples);
for (let k = 0, drift = 0; k < samples; k++) {
  drift += 0.02 * random.normal();
  op[k] = k < restFrom ? 50 + 3 * Math.sin(k / 13) + drift + 0.05 * random.normal() : op[k - 1];
}
const noise = new Float64Array(samples).map(() => random.normal());

function elementPieces(S: number, J: number, slidesOn: boolean): TravelPieces {
  const pieces = createTravelPieces(samples);
  walkTwoParameter(op, S, J, slidesOn, 0.02 * S, 0.5, op[0], pieces);
  return pieces;
}

function travelOf(pieces: TravelPieces): Float64Array {
  const travel = new Float64Array(samples);
  travelFromPieces(pieces, op, travel);
  return travel;
}

/** PV that a valve makes through a process, with noise, integrated where the process is. */
function pvOf(travel: Float64Array, integrating: boolean): Float64Array {
  return simulateProcess(travel, { lag: 6, secondLag: 0, delay: 3 }, integrating).map(
    (value, k) => (integrating ? 0.1 : 1.7) * value + 0.2 * noise[k],
  );
}

const anyGain = { gainLow: 0, gainHigh: Number.POSITIVE_INFINITY } as const;

interface Found {
  readonly misfit: number;
  readonly lag: number;
  readonly delay: number;
  readonly gain: number;
}

/** What the search over pieces finds in each band of dead times; `bandOf` gives the band of each. */
function searched(
  pv: Float64Array,
  pieces: TravelPieces,
  options: ObjectiveOptions,
  bandOf: readonly number[] = options.delays.map(() => 0),
): Found[] {
  const objective = createObjective(pv, op, options);
  const best = createBandMisfits(Math.max(...bandOf) + 1);
  const lags = options.lags.map((_, i) => i);
  misfitOfPieces(objective, pieces, op, lags, bandOf, createScratch(options.delays.length), best);
  return Array.from(best.misfit, (misfit, band) => ({
    misfit,
    lag: options.lags[best.lagIndex[band]],
    delay: options.delays[best.delayIndex[band]],
    gain: best.gain[band],
  }));
}

/** Best gain within bounds and its misfit, from the filtered signals themselves. */
function plain(
  pv: Float64Array,
  travel: Float64Array,
  lag: number,
  delay: number,
  { theta, integrating, sign, gainLow, gainHigh }: ObjectiveOptions,
): { gain: number; misfit: number } {
  const x = filterTravel(travel, { lag, secondLag: 0, delay }, theta, integrating);
  const y = whiten(pv, theta, integrating);
  let dot = 0;
  let energy = 0;
  for (let k = 0; k < samples; k++) {
    dot += sign * x[k] * y[k];
    energy += x[k] * x[k];
  }
  const gain = Math.min(Math.max(dot / energy, gainLow), gainHigh);
  let left = 0;
  let power = 0;
  for (let k = 0; k < samples; k++) {
    left += (y[k] - sign * gain * x[k]) ** 2;
    power += y[k] * y[k];
  }
  return { gain, misfit: left / power };
}

describe('whiten', () => {
  it('gives back the shocks of the disturbance that it stands for', () => {
    const theta = 0.7;
    const shocks = noise.map((value, k) => (k === 0 ? 0 : value));
    const drift = new Float64Array(samples);
    for (let k = 1; k < samples; k++) drift[k] = drift[k - 1] + shocks[k] - theta * shocks[k - 1];
    expectAllClose(whiten(drift, theta, false), shocks, { absolute: 1e-9 });

    const twice = new Float64Array(samples);
    const second = secondTheta(theta);
    for (let k = 1; k < samples; k++) twice[k] = twice[k - 1] + drift[k] - second * drift[k - 1];
    expectAllClose(whiten(twice, theta, true), shocks, { absolute: 1e-9 });
  });

  it('does not see where the signal stands, nor its slope when integrating', () => {
    const flat = new Float64Array(50).fill(73);
    expect(Math.max(...whiten(flat, 0.8, false).map(Math.abs))).toBe(0);
    const ramp = Float64Array.from({ length: 400 }, (_, k) => 3 + 0.25 * k);
    expect(Math.abs(whiten(ramp, 0.8, true)[399])).toBeLessThan(1e-9);
  });
});

describe('simulateProcess', () => {
  const step = Float64Array.from({ length: 80 }, (_, k) => (k < 10 ? 40 : 41));

  it('answers a step by 1 - exp(-t/lag) after the dead time, and by its sum when integrating', () => {
    const process = { lag: 5, secondLag: 0, delay: 3 };
    const answer = simulateProcess(step, process, false);
    const want = step.map((_, k) => (k < 13 ? 0 : 1 - Math.exp(-(k - 12) / 5)));
    expectAllClose(answer, want, { absolute: 1e-12 });
    let sum = 0;
    const sums = want.map((value) => {
      sum += value;
      return sum;
    });
    expectAllClose(simulateProcess(step, process, true), sums, { absolute: 1e-9 });
  });

  it('puts two lags in a row in either order', () => {
    const once = simulateProcess(step, { lag: 5, secondLag: 0, delay: 3 }, false);
    const both = simulateProcess(step, { lag: 5, secondLag: 2, delay: 3 }, false);
    const pole = Math.exp(-1 / 2);
    let state = 0;
    const want = once.map((value) => {
      state = pole * state + (1 - pole) * value;
      return state;
    });
    expectAllClose(both, want, { absolute: 1e-12 });
    expectAllClose(simulateProcess(step, { lag: 2, secondLag: 5, delay: 3 }, false), want, {
      absolute: 1e-12,
    });
  });

  it('shares a dead time between whole samples out to both', () => {
    const travel = travelOf(elementPieces(2, 1, true));
    const after = (delay: number): Float64Array =>
      simulateProcess(travel, { lag: 4, secondLag: 1, delay }, false);
    const late = after(3);
    expectAllClose(
      after(2.25),
      after(2).map((value, k) => 0.75 * value + 0.25 * late[k]),
      { absolute: 1e-9 },
    );
  });
});

describe('filterTravel', () => {
  it('is the process followed by the disturbance filter', () => {
    const travel = travelOf(elementPieces(2, 1, true));
    for (const integrating of [false, true]) {
      for (const [secondLag, delay] of [
        [0, 1],
        [3, 2.6],
        [0.4, 7],
      ]) {
        const process = { lag: 6, secondLag, delay };
        expectAllClose(
          filterTravel(travel, process, 0.6, integrating),
          whiten(simulateProcess(travel, process, integrating), 0.6, integrating),
          { absolute: 1e-8 },
          `integrating ${integrating}, delay ${delay}`,
        );
      }
    }
  });
});

describe('misfitOfPieces', () => {
  const lags = [0, 0.5, 3, 20];
  const delays = [1, 4, 11];
  for (const slidesOn of [true, false]) {
    for (const integrating of [false, true]) {
      const variant = slidesOn ? 'slides-on' : 'sticks-again';
      it(`is the sample-by-sample computation: ${variant}, ${integrating ? 'integrating' : 'self-regulating'}`, () => {
        for (const [S, J] of [
          [2, slidesOn ? 0 : 0.3],
          [2.5, 1],
          [3, 3],
        ]) {
          const pieces = elementPieces(S, J, slidesOn);
          const travel = travelOf(pieces);
          const pv = pvOf(travel, integrating);
          for (const theta of [0.3, 0.9]) {
            const shared = { theta, integrating, sign: 1, ...anyGain } as const;
            const least = delays.map(() => 1);
            for (const lag of lags) {
              delays.forEach((delay, d) => {
                const options = { ...shared, lags: [lag], delays: [delay] };
                const want = plain(pv, travel, lag, delay, options);
                const [got] = searched(pv, pieces, options);
                least[d] = Math.min(least[d], want.misfit);
                const where = `S ${S} J ${J} theta ${theta} lag ${lag} delay ${delay}`;
                expectClose(got.misfit, want.misfit, { absolute: 1e-6 }, `misfit, ${where}`);
                expectClose(got.gain, want.gain, { relative: 1e-6 }, `gain, ${where}`);
              });
            }
            const options = { ...shared, lags, delays };
            const all = searched(pv, pieces, options);
            expectClose(all[0].misfit, Math.min(...least), { absolute: 1e-6 }, 'best of all');
            const bands = searched(pv, pieces, options, [0, 0, 1]);
            expectClose(bands[0].misfit, Math.min(least[0], least[1]), { absolute: 1e-6 }, 'short ones');
            expectClose(bands[1].misfit, least[2], { absolute: 1e-6 }, 'long one');
            for (const { misfit, lag, delay } of [...all, ...bands]) {
              const named = plain(pv, travel, lag, delay, options);
              expectClose(
                misfit,
                named.misfit,
                { absolute: 1e-6 },
                'misfit of the lag and dead time it names',
              );
            }
          }
        }
      });
    }
  }

  it('holds where the pole of the lag meets one of the disturbance filter', () => {
    for (const integrating of [false, true]) {
      const theta = 0.8;
      const pieces = elementPieces(2.5, 1, true);
      const travel = travelOf(pieces);
      const pv = pvOf(travel, integrating);
      for (const pole of [theta, theta + 4e-4, theta - 9e-4, secondTheta(theta)]) {
        const lag = -1 / Math.log(pole);
        const options = { theta, integrating, sign: 1, ...anyGain, lags: [lag], delays: [3] } as const;
        const [got] = searched(pv, pieces, options);
        // Poles are kept apart, which changes the misfit by next to nothing.
        expectClose(
          got.misfit,
          plain(pv, travel, lag, 3, options).misfit,
          { absolute: 2e-3 },
          `pole ${pole}`,
        );
      }
    }
  });

  it('finds a process of negative gain by its sign, and nothing with the wrong one', () => {
    const pieces = elementPieces(2.5, 1, true);
    const pv = pvOf(travelOf(pieces), false);
    const falling = pv.map((value) => -value);
    const options = { theta: 0.5, integrating: false, ...anyGain, lags: [6], delays: [3] };
    const rising = searched(pv, pieces, { ...options, sign: 1 });
    expect(searched(falling, pieces, { ...options, sign: -1 })).toEqual(rising);
    expect(searched(falling, pieces, { ...options, sign: 1 })[0]).toMatchObject({ misfit: 1, gain: 0 });
  });

  it('keeps the gain within its bounds and charges what that costs', () => {
    const pieces = elementPieces(2.5, 1, true);
    const travel = travelOf(pieces);
    const pv = pvOf(travel, false);
    const options = { theta: 0.5, integrating: false, sign: 1, lags: [6], delays: [3] } as const;
    const [free] = searched(pv, pieces, { ...options, ...anyGain });
    expectClose(free.gain, 1.7, { relative: 0.05 }, 'free gain');
    for (const [gainLow, gainHigh, want] of [
      [0, 1.2, 1.2],
      [2.1, 9, 2.1],
    ]) {
      const bounded = { ...options, gainLow, gainHigh };
      const [found] = searched(pv, pieces, bounded);
      expect(found.gain).toBe(want);
      expect(found.misfit).toBeGreaterThan(free.misfit);
      expectClose(found.misfit, plain(pv, travel, 6, 3, bounded).misfit, { absolute: 1e-6 });
    }
  });

  it('explains nothing with a valve that does not move', () => {
    const pv = pvOf(travelOf(elementPieces(2.5, 1, true)), false);
    const options = { theta: 0.5, integrating: false, sign: 1, ...anyGain, lags: [6], delays: [3] } as const;
    expect(searched(pv, elementPieces(90, 1, true), options)[0]).toMatchObject({ misfit: 1, gain: 0 });
  });
});
