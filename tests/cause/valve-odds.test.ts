import { describe, expect, it } from 'vitest';
import {
  decisiveT,
  signNames,
  type ValveSigns,
  valveProbability,
  valveSigns,
} from '../../src/cause/valve-odds';
import type { ValveTest } from '../../src/estimate/stiction-fit';
import { findCycle } from '../../src/oscillation/find-cycle';
import { expectClose } from '../closeness';

const test: ValveTest = {
  blocks: 16,
  blocksForValve: 12,
  gainOverLine: 100,
  tOverLine: 5,
  gainOverDeadBand: 20,
  tOverDeadBand: 2,
  tWithoutLine: null,
};
const fit = { S: { value: 2, low: 1.8, high: 2.2, unit: '%' }, explains: 0.9 };
const wave = (shape: (phase: number) => number) =>
  findCycle(
    Float64Array.from({ length: 1200 }, (_, k) => shape((2 * Math.PI * k) / 60)),
    1,
  );
const sine = wave(Math.sin);
const square = wave((phase) => Math.sign(Math.sin(phase + 0.01)));
const nothing = findCycle(new Float64Array(1200), 1);

describe('valveSigns', () => {
  it('reads what is weighed off the record, each within its range', () => {
    const signs = valveSigns(square, square, test, fit);
    expect(signs).toMatchObject({ lead: 1, blocks: 0.75, cycles: 1, explains: 0.9, sine: 0 });
    expectClose(signs.size, Math.log10(2), { absolute: 1e-12 });
    const far = { ...test, tOverLine: 400 };
    expect(valveSigns(sine, sine, far, { ...fit, S: { ...fit.S, value: 1e-9 } })).toMatchObject({
      lead: 3,
      size: -1,
    });
  });

  it('tells a sine and a square from the odd harmonics of PV: a square has 0.146 of its power there', () => {
    expect(valveSigns(sine, sine, test, fit)).toMatchObject({ sine: -2, square: 0 });
    const { square: squareness, regularity } = valveSigns(square, square, test, fit);
    expectClose(squareness / regularity, Math.log10(1.46), { absolute: 0.02 });
  });

  it('looks at no shape and no regularity where nothing cycles', () => {
    expect(valveSigns(nothing, nothing, test, fit)).toMatchObject({
      cycles: 0,
      regularity: 0,
      sine: 0,
      square: 0,
    });
  });

  it('takes the lower t where a steady line was taken out', () => {
    expect(decisiveT(test)).toBe(5);
    expect(decisiveT({ ...test, tWithoutLine: 1 })).toBe(1);
    expect(decisiveT({ ...test, tWithoutLine: 9 })).toBe(5);
  });
});

describe('valveProbability', () => {
  const middle: ValveSigns = {
    lead: 1,
    blocks: 0.7,
    cycles: 1,
    regularity: 1,
    size: 0,
    explains: 0.9,
    sine: -0.5,
    square: 0,
  };

  it('grows with what speaks for a valve and falls with what speaks for something outside', () => {
    const by = (change: Partial<ValveSigns>): number => valveProbability({ ...middle, ...change });
    for (const name of signNames) {
      const grows = name !== 'regularity' && name !== 'square';
      const more = by({ [name]: middle[name] + 0.1 });
      expect(more > by({}), name).toBe(grows);
      expect(more > 0 && more < 1).toBe(true);
    }
  });
});
