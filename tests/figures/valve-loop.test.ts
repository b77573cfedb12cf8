import { describe, expect, it } from 'vitest';
import { drawnSwing, travelOffset, valveLoop } from '../../src/figures/valve-loop';
import { twoParameterValve } from '../../src/valve/two-parameter';
import { fixtureFindings, J, S } from './findings-fixture';

/** Travel of the published element while OP sweeps from low to high and back, fine enough to place a jump to 0.001. */
function swept(
  model: 'slides-on' | 'sticks-again',
  low: number,
  high: number,
  S: number,
  J: number,
  start: number,
) {
  const steps = Math.round((high - low) / 0.001);
  const up = Array.from({ length: steps + 1 }, (_, i) => low + ((high - low) * i) / steps);
  const round = [...up, ...up.slice(0, -1).reverse()];
  const op = Float64Array.from([...round, ...round.slice(1)]);
  const travel = twoParameterValve(op, { S, J, model, tolerance: 0, start });
  return { op: op.subarray(round.length - 1), travel: travel.subarray(round.length - 1) };
}

/** Distance of a point to the nearest edge of the polygon. */
function distance(x: number, y: number, loop: { x: number[]; y: number[] }): number {
  let least = Number.POSITIVE_INFINITY;
  for (let i = 1; i < loop.x.length; i++) {
    const [dx, dy] = [loop.x[i]! - loop.x[i - 1]!, loop.y[i]! - loop.y[i - 1]!];
    const along = ((x - loop.x[i - 1]!) * dx + (y - loop.y[i - 1]!) * dy) / (dx * dx + dy * dy || 1);
    const t = Math.min(1, Math.max(0, along));
    least = Math.min(least, Math.hypot(x - loop.x[i - 1]! - t * dx, y - loop.y[i - 1]! - t * dy));
  }
  return least;
}

describe('valveLoop', () => {
  // The published element (Choudhury et al. 2005; He et al. 2007), walked sample by sample, is the reference.
  it.each([
    ['slides-on', 40, 46, 3.2, 1.1],
    ['slides-on', 40, 46, 3.2, 0],
    ['slides-on', 40, 43.3, 3.2, 3.2],
    ['sticks-again', 40, 46.5, 3.2, 1.1],
    ['sticks-again', 40, 44.1, 2, 1],
  ] as const)('is the path of the %s element from %d to %d for S %d and J %d', (model, low, high, s, j) => {
    const loop = valveLoop(model, s, j, low, high);
    const turn = Math.max(...loop.x);
    expect(Math.abs(turn - high)).toBeLessThanOrEqual(model === 'slides-on' ? 1e-9 : j / 2 + 1e-9);
    // A slip comes up to a step of 0.001 late, and that adds up over a sweep of several: OP goes a little further.
    const late = model === 'sticks-again' ? 0.005 : 0;
    const { op, travel } = swept(model, low - late, turn + late, s, j, loop.y[0]!);
    for (let i = 0; i < op.length; i += 7) expect(distance(op[i]!, travel[i]!, loop)).toBeLessThan(0.015);
  });

  it('is closed, S wide where it is stuck after a turn and J high where it jumps', () => {
    const loop = valveLoop('slides-on', 3, 1, 10, 20);
    expect([loop.x[0], loop.y[0]]).toEqual([loop.x.at(-1), loop.y.at(-1)]);
    expect(loop.x[1]! - loop.x[0]!).toBeCloseTo(3, 12);
    expect(loop.y[2]! - loop.y[1]!).toBeCloseTo(1, 12);
  });
});

describe('drawnSwing', () => {
  it('takes the ends of OP in the most usual cycle', () => {
    const findings = fixtureFindings();
    const single = [
      { from: 0, to: 96, amplitude: 9 },
      { from: 960, to: 1056, amplitude: 3.01 },
    ];
    const swing = drawnSwing({ ...findings, opCycle: { ...findings.opCycle, single } }, S);
    expect(swing.low).toBeCloseTo(43, 0);
    expect(swing.high).toBeCloseTo(49, 0);
    expect(swing.enlarged).toBe(false);
    expect(swing.around[0]).toBe(960 - 2 * 96);
    expect(swing.around.at(-1)).toBe(1056 + 2 * 96);
  });

  it('opens a swing too small to move the valve, and says so', () => {
    const { low, high, enlarged } = drawnSwing(fixtureFindings(), 20);
    expect(high - low).toBeCloseTo(1.03 * 20, 9);
    expect(enlarged).toBe(true);
  });
});

describe('travelOffset', () => {
  it('finds what was added to the travel of the element', () => {
    const { op } = fixtureFindings().record;
    const travel = twoParameterValve(op, { S, J }).map((value) => value - 7.5);
    expect(travelOffset(op, travel)).toBeCloseTo(-7.5, 1);
  });
});
