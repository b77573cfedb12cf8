/**
 * src/field-test against facts from outside the project. Each check names its source; "value from memory" marks what was
 * recalled and not read.
 */
import { unit } from 'mathjs';
import { describe, expect, it } from 'vitest';
import { readValveTest } from '../../src/field-test/read-valve-test';
import { stribeckFriction } from '../../src/valve/friction-law';
import { TEXTBOOK_VALVE } from '../../src/valve/stem';
import { expectClose } from '../closeness';
import { benchRecord, testRecord } from '../field-test/records';
import { bench, ramps } from '../field-test/strokes';

describe('T63 and T86 (ANSI/ISA-75.25.01: 63.2 % = 1 - 1/e, 86.5 % = 1 - 1/e^2 of the change; value from memory)', () => {
  it('of an exact first-order response are dead time plus one and two time constants', () => {
    const [at, dead, T, dt] = [100, 2, 5, 0.1];
    const op = Float64Array.from({ length: 800 }, (_, k) => (k < at ? 50 : 60));
    const travel = op.map((_, k) => {
      const since = (k - at) * dt - dead;
      return since <= 0 ? 50 : 60 - 10 * Math.exp(-since / T);
    });
    const [step] = readValveTest(testRecord({ op, travel, samplePeriod: dt })).reading.steps;
    // Straight lines between samples 0.1 s apart are off by far less than a hundredth of a second.
    expectClose(step!.T63!.value, dead + T, { absolute: 0.005 }, 'T63');
    expectClose(step!.T86!.value, dead + 2 * T, { absolute: 0.005 }, 'T86');
    // The first movement is seen at 2 % of the change: a fiftieth of T later.
    expectClose(step!.deadTime!.value, dead + 0.02 * T, { absolute: 0.02 }, 'dead time');
    expectClose(step!.overshoot!.value, 0, { absolute: 0.01 }, 'overshoot');
  });
});

/** Command and output of a constructed device, each level held for 20 samples. */
function constructed(levels: readonly number[], output: (u: number, i: number) => number) {
  const outputs = levels.map(output);
  const each = 20;
  const at = (values: readonly number[]) =>
    Float64Array.from({ length: each * levels.length }, (_, k) => values[Math.floor(k / each)]!);
  return testRecord({ op: at(levels), travel: at(outputs), samplePeriod: 1 });
}

/** A staircase from 50 up, down and up again in steps of `size`. */
const staircase = (size: number, count: number): number[] => {
  const up = Array.from({ length: count }, (_, i) => 50 + i * size);
  return [...up, ...[...up].reverse().slice(1), ...up.slice(1)];
};

/** Pure dead band: the output keeps its place until the command has gone so far past it (ISA-51.1). */
function play(width: number): (u: number) => number {
  let y = 50;
  return (u) => {
    if (u > y + width / 2) y = u - width / 2;
    else if (u < y - width / 2) y = u + width / 2;
    return y;
  };
}

describe('dead band and resolution by their definitions (ISA-51.1, ANSI/ISA-75.25.01; definitions from memory)', () => {
  it('dead band: the range on reversal without a change of output, bracketed to a step', () => {
    for (const [width, size] of [
      [1.3, 0.2],
      [0.75, 0.1],
      [2.1, 0.5],
    ]) {
      const device = play(width!);
      const { reading } = readValveTest(constructed(staircase(size!, 25), device), { kind: 'step' });
      // The last step that does not move it and the first one that does enclose the width.
      const one = reading.deadBand!;
      expectClose(one.value, width!, { absolute: size! / 2 + 1e-9 }, `width ${width}, steps of ${size}`);
      expect(one.low).toBeLessThanOrEqual(width!);
      expect(one.high).toBeGreaterThanOrEqual(width!);
    }
  });

  it('resolution: an output that moves in quanta needs so much command in one direction', () => {
    // It follows the command down to the next quantum below (up) and so on: moves come every 0.8 %.
    const { reading } = readValveTest(
      constructed(staircase(0.2, 30), (u) => 0.8 * Math.round(u / 0.8 + 1e-9)),
      { kind: 'step' },
    );
    expectClose(reading.resolution!.value, 0.8, { absolute: 0.2 });
    expect(reading.resolution!.low).toBeLessThanOrEqual(0.8);
    expect(reading.resolution!.high).toBeGreaterThanOrEqual(0.8);
  });

  it('hysteresis is what the separation of the traverses has beyond the dead band (ISA-51.1, IEC 61298-2)', () => {
    // One play of 1 %: the ways up and down are the dead band apart, and nothing is left.
    const { at, seconds } = ramps(
      [50, 60, 40, 60, 40].map((op) => ({ op, rate: 0.1 })),
      5,
    );
    const op = Float64Array.from({ length: Math.floor(2 * seconds) }, (_, k) => at(k / 2));
    const one = play(1);
    const plain = readValveTest(testRecord({ op, travel: op.map(one), samplePeriod: 0.5 })).reading;
    expectClose(plain.deadBand!.value, 1, { absolute: 0.03 });
    expectClose(plain.hysteresis!.value, 0, { absolute: 0.03 });
    // Half of a play of 1 % and half of one of 3 %: it begins to move after 1 %, and the ways are 2 % apart.
    const [narrow, wide] = [play(1), play(3)];
    const both = readValveTest(
      testRecord({ op, travel: op.map((u) => (narrow(u) + wide(u)) / 2), samplePeriod: 0.5 }),
    ).reading;
    // Half of it moves first, which makes the bend less sharp.
    expectClose(both.deadBand!.value, 1, { absolute: 0.15 });
    expectClose(both.hysteresis!.value, 1, { absolute: 0.12 });
  });
});

describe('textbook valve (Kayihan, Doyle 2000, CEP 8:799-812; values from memory) in a slow simulated stroke', () => {
  it('shows S = (Fs + Fc)/span and J = (Fs - Fc)/span with a twentieth of its friction, and its own spring', () => {
    const { spring, stroke, mass, viscous, stribeckSpeed } = TEXTBOOK_VALVE;
    const span = spring * stroke;
    const Fs = TEXTBOOK_VALVE.static / 20;
    const Fc = TEXTBOOK_VALVE.coulomb / 20;
    const friction = stribeckFriction({ static: Fs, coulomb: Fc, viscous, stribeckSpeed });
    const area = 0.06452;
    const { at, seconds } = ramps(
      [50, 60, 40, 60, 40].map((op) => ({ op, rate: 0.02 })),
      5,
    );
    const valve = { spring, stroke, mass, area, friction, actuatorLag: 0, benchLow: 0.2 };
    const logged = bench(valve, at, seconds, 1, 0.005, 11);
    const { reading, friction: found } = readValveTest(benchRecord(logged), {
      area: '645.2 cm2',
      stroke: '101.6 mm',
    });
    const S = (100 * (Fs + Fc)) / span;
    const J = (100 * (Fs - Fc)) / span;
    expectClose(reading.deadBand!.value, S, { absolute: 0.05 }, 'dead band');
    expectClose(reading.S!.value, S, { absolute: 0.05 }, 'S');
    expectClose(reading.J!.value, J, { absolute: 0.03 }, 'J');
    expectClose(found!.springRate!.value, spring / 1000, { relative: 0.005 }, 'spring rate, N/mm');
    expectClose(found!.standing.force!.value, Fs, { relative: 0.03 }, 'standing friction');
    expectClose(found!.moving.force!.value, Fc, { relative: 0.03 }, 'moving friction');
    // 12 psi of spring range (3-15 psi on this diaphragm is the spring's force over the stroke: arithmetic).
    expectClose(
      found!.springRange.value,
      unit(12, 'psi').toNumber('bar'),
      { relative: 0.005 },
      'spring range',
    );
  });

  it('gives the same forces whatever unit the pressure is in (mathjs as the reference)', () => {
    const { spring, stroke, mass } = TEXTBOOK_VALVE;
    const friction = stribeckFriction({ static: 80, coulomb: 60, viscous: 612.9 });
    const { at, seconds } = ramps(
      [50, 60, 40, 60].map((op) => ({ op, rate: 0.1 })),
      5,
    );
    const logged = bench(
      { spring, stroke, mass, area: 0.0645, friction, actuatorLag: 0.2, benchLow: 0.2 },
      at,
      seconds,
      0.5,
      0.01,
      12,
    );
    const inBar = readValveTest(benchRecord(logged), { area: '645 cm2', stroke: '101.6 mm' });
    const psi = unit(1, 'bar').toNumber('psi');
    const inPsi = readValveTest(
      benchRecord(
        { ...logged, pressure: logged.pressure.map((value) => psi * value) },
        { pressureUnit: 'psi' },
      ),
      { area: '0.0645 m2', stroke: '0.1016 m' },
    );
    const forces = [inBar, inPsi].map(({ friction: found }) => found!.frictionBand.force!.value);
    expectClose(forces[1]!, forces[0]!, { relative: 1e-6 });
    expectClose(inPsi.friction!.springRate!.value, inBar.friction!.springRate!.value, { relative: 1e-6 });
  });
});
