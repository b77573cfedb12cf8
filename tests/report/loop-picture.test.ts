import { describe, expect, it } from 'vitest';
import { palette } from '../../src/figures/palette';
import { loopPictureSvg } from '../../src/report/loop-picture';

const points = (svg: string, colour: string): [number, number][] =>
  new RegExp(`stroke="${colour}" d="M([^"]+)"`)
    .exec(svg)![1]!
    .split('L')
    .map((pair) => pair.split(' ').map(Number) as [number, number]);

describe('the small picture of a loop', () => {
  const svg = loopPictureSvg({ from: 0, step: 1, pv: [10, 14, 12], op: [3, 3, 3] });

  it('draws PV above OP, each from its lowest to its highest value, left to right', () => {
    const pv = points(svg, palette.pv);
    const op = points(svg, palette.op);
    expect(pv.map(([x]) => x)).toEqual([3, 100, 197]);
    const [low, high, middle] = pv.map(([, y]) => y);
    expect(low).toBeGreaterThan(middle!);
    expect(Math.abs(middle! - (low! + high!) / 2)).toBeLessThanOrEqual(0.11); // places are rounded to 0.1
    expect(Math.max(...pv.map(([, y]) => y))).toBeLessThan(Math.min(...op.map(([, y]) => y)));
    for (const [x, y] of [...pv, ...op]) expect(x >= 0 && x <= 200 && y >= 0 && y <= 60).toBe(true);
  });

  it('draws a dead signal as a level line, and a single point too', () => {
    expect(new Set(points(svg, palette.op).map(([, y]) => y)).size).toBe(1);
    expect(loopPictureSvg({ from: 0, step: 1, pv: [1], op: [2] })).not.toMatch(/NaN|Infinity/);
  });
});
