import { describe, expect, it } from 'vitest';
import {
  measuredFriction,
  relayFriction,
  stepDownFriction,
  stribeckFriction,
} from '../../src/valve/friction-law';

describe('friction laws', () => {
  it('a relay holds and resists with the same force, viscous friction adds to it', () => {
    expect(relayFriction({ coulomb: 7 }).breakaway).toBe(7);
    expect(relayFriction({ coulomb: 7 }).sliding(3)).toBe(7);
    expect(relayFriction({ coulomb: 7, viscous: 2 }).sliding(3)).toBe(13);
  });

  it('a step-down drops from static to Coulomb friction at once', () => {
    const law = stepDownFriction({ static: 10, coulomb: 6, viscous: 1 });
    expect(law.breakaway).toBe(10);
    expect(law.sliding(1e-12)).toBeCloseTo(6, 10);
    expect(law.sliding(2)).toBe(8);
  });

  it('the Stribeck curve starts at static friction and has lost 1 - 1/e of the excess at its speed', () => {
    const law = stribeckFriction({ static: 10, coulomb: 6, viscous: 0, stribeckSpeed: 0.5 });
    expect(law.breakaway).toBe(10);
    expect(law.sliding(0)).toBe(10);
    expect(law.sliding(0.5)).toBeCloseTo(6 + 4 / Math.E, 12);
    expect(law.sliding(50)).toBe(6);
  });

  it('a measured law goes through its points and on beyond the last', () => {
    const law = measuredFriction([
      { speed: 0, force: 9 },
      { speed: 1, force: 5 },
      { speed: 3, force: 7 },
    ]);
    expect(law.breakaway).toBe(9);
    expect(law.sliding(0.5)).toBe(7);
    expect(law.sliding(2)).toBe(6);
    expect(law.sliding(5)).toBe(9);
    const falling = measuredFriction([
      { speed: 0, force: 9 },
      { speed: 1, force: 5 },
    ]);
    expect(falling.sliding(4)).toBe(5);
  });

  it('says what is wrong with a law that cannot be', () => {
    expect(() => stepDownFriction({ static: 1, coulomb: 2 })).toThrow(/below Coulomb friction/);
    expect(() => relayFriction({ coulomb: -1 })).toThrow(/"coulomb" must be a number of 0 or more/);
    expect(() => stribeckFriction({ stribeckSpeed: 0 })).toThrow(/Stribeck speed must be above 0/);
    expect(() => measuredFriction([{ speed: 0, force: 1 }])).toThrow(/at least two points/);
    expect(() =>
      measuredFriction([
        { speed: 0.1, force: 1 },
        { speed: 0.2, force: 1 },
      ]),
    ).toThrow(/start at speed 0/);
    expect(() => relayFriction({ colomb: 1 } as object)).toThrow(/no option "colomb"/);
  });
});
