import { describe, expect, it } from 'vitest';
import { relayFriction, stepDownFriction, stribeckFriction } from '../../src/valve/friction-law';
import {
  createStem,
  simulateStem,
  TEXTBOOK_VALVE,
  textbookFriction,
  textbookStem,
} from '../../src/valve/stem';
import { runValve } from '../../src/valve/steppable-valve';

const newtonPerPercent = (TEXTBOOK_VALVE.spring * TEXTBOOK_VALVE.stroke) / 100;

/** Up from 50 %, down again and back, at `rate` % a sample. */
function stroke(rate: number, reach: number): Float64Array {
  const quarter = Math.round(reach / rate);
  return Float64Array.from({ length: 4 * quarter + 1 }, (_, k) => {
    const way = k <= quarter ? k : k <= 3 * quarter ? 2 * quarter - k : k - 4 * quarter;
    return 50 + way * rate;
  });
}

describe('stem', () => {
  it('follows OP when there is no friction', () => {
    const op = Object.freeze([50, 60, 55, 55]) as number[];
    const travel = simulateStem(Float64Array.from(op), 1);
    for (const [k, value] of op.entries()) expect(travel[k]).toBeCloseTo(value, 6);
  });

  it('moves behind the actuator lag as a first-order lag does', () => {
    const travel = simulateStem(
      Float64Array.from({ length: 4 }, (_, k) => (k === 0 ? 40 : 50)),
      2,
      {
        actuatorLag: 5,
      },
    );
    // The mass and the viscous friction add 12 ms to the lag of 5 s.
    for (let k = 1; k < 4; k++) expect(travel[k]).toBeCloseTo(50 - 10 * Math.exp((-2 * k) / 5), 1);
  });

  it('stays where it is to the last digit while the drive is below the breakaway force', () => {
    const valve = textbookStem({ S: 4, J: 1, startOp: 50 });
    const travel = runValve(valve, Float64Array.from([51, 52.4, 48, 50.3, 47.6, 52.5]), 1);
    expect([...travel]).toEqual([50, 50, 50, 50, 50, 50]);
    expect(valve.advance(52.51, 1)).toBeCloseTo(51.01, 1);
  });

  it('slips by static minus Coulomb friction and ends at OP minus Coulomb friction', () => {
    const friction = stepDownFriction({ static: 300, coulomb: 200, viscous: 612.9 });
    const travel = simulateStem(Float64Array.from([50, 50 + 300 / newtonPerPercent + 1e-6]), 1, { friction });
    expect(travel[1] - 50).toBeCloseTo(100 / newtonPerPercent, 3);
  });

  it('has dead band without a jump for a relay, in which case travel lags OP by half the dead band', () => {
    const friction = relayFriction({ coulomb: newtonPerPercent, viscous: 612.9 });
    const op = stroke(0.1, 5);
    const travel = simulateStem(op, 1, { friction });
    expect(travel[50]).toBeCloseTo(54, 2);
    expect(travel[150]).toBeCloseTo(46, 2);
    const steps = travel.slice(1).map((value, k) => Math.abs(value - travel[k]));
    expect(Math.max(...steps)).toBeLessThan(0.101);
  });

  it('gives the same answer whatever the length of the calls', () => {
    const fine = textbookStem({ S: 3, J: 0.8, actuatorLag: 1 });
    const coarse = textbookStem({ S: 3, J: 0.8, actuatorLag: 1 });
    let largest = 0;
    for (const op of stroke(0.3, 6)) {
      for (let i = 0; i < 10; i++) fine.advance(op, 0.1);
      largest = Math.max(largest, Math.abs(coarse.advance(op, 1) - fine.travel));
    }
    expect(largest).toBeLessThan(0.005);
  });

  it('loses motion in the linkage on reversal', () => {
    const op = stroke(0.5, 5);
    const travel = simulateStem(op, 1, { backlash: 2 });
    expect(travel[10]).toBeCloseTo(54, 2);
    expect(travel[13]).toBeCloseTo(54, 2);
    expect(travel[16]).toBeCloseTo(53, 2);
    expect(travel[30]).toBeCloseTo(46, 2);
  });

  it('rings at its natural frequency when hardly damped and loses a fixed swing per half cycle to a relay', () => {
    // Coulomb friction takes 2 Fc/k from the swing in each half cycle (any text on vibration).
    const friction = relayFriction({ coulomb: 1 * newtonPerPercent });
    const stem = createStem({ friction, startOp: 50, startTravel: 42 });
    const half = Math.PI * Math.sqrt(TEXTBOOK_VALVE.mass / TEXTBOOK_VALVE.spring);
    expect(stem.advance(50, half)).toBeCloseTo(56, 2);
    expect(stem.advance(50, half)).toBeCloseTo(46, 2);
    expect(stem.advance(50, half)).toBeCloseTo(52, 2);
    expect(stem.advance(50, half)).toBeCloseTo(50, 1);
    const rest = stem.advance(50, 1);
    expect(stem.advance(50, 100)).toBe(rest);
  });

  it('agrees with a brute-force integration of the Stribeck curve in steps of two microseconds', () => {
    const friction = stribeckFriction({ static: 200, coulomb: 120, viscous: 612.9, stribeckSpeed: 2.54e-4 });
    const from = 50;
    const to = 50 + 201 / newtonPerPercent;
    const travel = createStem({ friction, startOp: from }).advance(to, 0.03);
    let x = 0;
    let v = 0;
    const h = 2e-6;
    for (let t = 0; t < 0.03; t += h) {
      const force = 201 - TEXTBOOK_VALVE.spring * x - friction.sliding(Math.max(0, v));
      v = Math.max(0, v + (h * force) / TEXTBOOK_VALVE.mass);
      x += h * v;
    }
    expect(travel).toBeCloseTo(50 + (100 * x) / TEXTBOOK_VALVE.stroke, 2);
  });

  it('stays finite and quick when OP stops within a rounding error of the breakaway force', () => {
    const friction = relayFriction({ coulomb: 0.3 * newtonPerPercent, viscous: 612.9 });
    const stem = createStem({ friction, actuatorLag: 1, startOp: 50 });
    for (let k = 0; k < 200; k++) stem.advance(50.3 + (k - 100) * 1e-15, 1);
    expect(stem.travel).toBeCloseTo(50, 6);
    expect(stem.advance(60, 60)).toBeCloseTo(59.7, 6);
  });

  it('refuses what cannot be', () => {
    expect(() => createStem({ mass: 0 })).toThrow(/mass must be above 0/);
    expect(() => createStem({ backlash: -1 })).toThrow(/backlash must be 0 or more/);
    expect(() => createStem({ springs: 1 } as object)).toThrow(/no option "springs"/);
    expect(() => createStem().advance(Number.NaN, 1)).toThrow(/finite OP/);
    expect(() => createStem().advance(50, 0)).toThrow(/time above 0 s/);
    expect(() => textbookFriction(1, 2)).toThrow(/0 <= J <= S/);
    expect(() => runValve(createStem(), new Float64Array(1), 0)).toThrow(/sample period must be above 0/);
  });
});
