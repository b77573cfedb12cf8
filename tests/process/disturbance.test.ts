import { describe, expect, it } from 'vitest';
import { disturbanceValues } from '../../src/process/disturbance';

const differences = (values: Float64Array): Float64Array =>
  values.slice(1).map((value, k) => value - values[k]);
const meanSquare = (values: Float64Array): number =>
  values.reduce((sum, value) => sum + value * value, 0) / values.length;

describe('disturbances', () => {
  it('sine and square have the stated amplitude and period', () => {
    const sine = disturbanceValues({ kind: 'sine', amplitude: 3, period: 40 }, 80, 1);
    expect(sine[9]).toBeCloseTo(3, 12);
    expect(sine[49]).toBeCloseTo(3, 12);
    const square = disturbanceValues({ kind: 'square', amplitude: 3, period: 40, phase: 0.01 }, 80, 1);
    expect([square[5], square[25], square[45]]).toEqual([3, -3, 3]);
  });

  it('a random walk gains its spread in one second whatever the step', () => {
    for (const step of [0.25, 1]) {
      const walk = disturbanceValues({ kind: 'random-walk', spread: 2, seed: 5 }, 20000, step);
      expect(meanSquare(differences(walk))).toBeCloseTo(4 * step, 0);
    }
  });

  it('IMA(1,1) steps have the lag-one correlation -theta/(1 + theta^2) (Box and Jenkins, value from memory)', () => {
    const steps = differences(
      disturbanceValues({ kind: 'ima', spread: 1, theta: 0.6, every: 1, seed: 8 }, 40000, 1),
    );
    let cross = 0;
    for (let k = 1; k < steps.length; k++) cross += (steps[k] * steps[k - 1]) / steps.length;
    expect(cross / meanSquare(steps)).toBeCloseTo(-0.6 / 1.36, 1);
  });

  it('an IMA disturbance holds its value between its own steps', () => {
    const values = disturbanceValues({ kind: 'ima', spread: 1, theta: 0, every: 1, seed: 8 }, 12, 0.25);
    expect(values[3]).toBe(values[6]);
    expect(values[7]).not.toBe(values[6]);
  });

  it('a signal from elsewhere runs straight between its values and is held at its end', () => {
    const values = disturbanceValues({ kind: 'signal', values: Float64Array.of(0, 4, 2), every: 2 }, 6, 1);
    expect([...values]).toEqual([2, 4, 3, 2, 2, 2]);
  });

  it('refuses what cannot be', () => {
    for (const [values, every] of [
      [new Float64Array(0), 1],
      [Float64Array.of(1), 0],
    ] as const) {
      expect(() => disturbanceValues({ kind: 'signal', values, every }, 1, 1)).toThrow(/needs values/);
    }
    expect(() => disturbanceValues({ kind: 'sine', amplitude: 1, period: 0 }, 1, 1)).toThrow(
      /period above 0/,
    );
    expect(() => disturbanceValues({ kind: 'ima', spread: 1, theta: 2, every: 1, seed: 1 }, 1, 1)).toThrow(
      /theta from 0 to 1/,
    );
  });
});
