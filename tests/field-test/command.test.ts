import { describe, expect, it } from 'vitest';
import { commandLegs, commandSteps, kindOf } from '../../src/field-test/command';

const steps = (levels: readonly number[], each: number): Float64Array =>
  Float64Array.from({ length: levels.length * each }, (_, k) => levels[Math.floor(k / each)]!);

describe('a command', () => {
  it('is cut into steps, a change spread over some samples counting as one', () => {
    const op = Float64Array.from([50, 50, 50.4, 50.8, 51, 51, 51, 51, 50, 50, 50, 50]);
    expect(commandSteps(op)).toEqual([
      { at: 2, until: 8, from: 50, to: 51 },
      { at: 8, until: 12, from: 51, to: 50 },
    ]);
  });

  it('is told as hold, step or stroke by what it did', () => {
    expect(kindOf(new Float64Array(50).fill(40))).toBe('hold');
    expect(kindOf(steps([50, 51, 52, 51, 50], 20))).toBe('step');
    const ramp = Float64Array.from({ length: 400 }, (_, k) => 50 + 0.05 * (k < 200 ? k : 400 - k));
    expect(kindOf(ramp)).toBe('stroke');
    const automatic = Float64Array.from({ length: 400 }, (_, k) => 50 + Math.sin(Math.min(k, 200) / 10));
    expect(kindOf(automatic)).toBe('hold');
    // A fine ramp that is logged in coarse steps is a stroke all the same.
    const coarse = steps(
      Array.from({ length: 200 }, (_, i) => 50 + 0.1 * (i < 100 ? i : 200 - i)),
      8,
    );
    expect(kindOf(coarse)).toBe('stroke');
  });

  it('is a hold where it stood still whenever the controller was in manual', () => {
    const op = Float64Array.from({ length: 400 }, (_, k) => 50 + Math.sin(Math.min(k, 320) / 10));
    const automatic = Float64Array.from({ length: 400 }, (_, k) => (k < 320 ? 1 : 0));
    expect(kindOf(op)).not.toBe('hold');
    expect(kindOf(op, automatic)).toBe('hold');
  });

  it('turns and stops where it does', () => {
    const up = Array.from({ length: 21 }, (_, k) => 50 + 0.5 * k);
    const down = Array.from({ length: 40 }, (_, k) => 60 - 0.5 * (k + 1));
    const stop = Array<number>(15).fill(40);
    const further = Array.from({ length: 20 }, (_, k) => 40 - 0.5 * (k + 1));
    const op = Float64Array.from([...up, ...Array<number>(12).fill(60), ...down, ...stop, ...further]);
    const legs = commandLegs(op);
    expect(legs.map(({ direction }) => direction)).toEqual([1, -1, -1]);
    expect(legs.map(({ from, to }) => [op[from], op[to]])).toEqual([
      [50, 60],
      [60, 40],
      [40, 30],
    ]);
  });
});
