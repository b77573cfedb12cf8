import { describe, expect, it } from 'vitest';
import { misfitFigure } from '../../src/figures/misfit-figure';
import { expectSound, fixtureFindings, J, S, traceOf } from './findings-fixture';

describe('misfitFigure', () => {
  it('draws the map, the best pair and the intervals', () => {
    const findings = fixtureFindings();
    const figure = misfitFigure(findings);
    expectSound(figure);
    const { map } = findings.stiction.fit!;
    const contour = figure.data[0] as { z: (number | null)[][]; x: number[]; y: number[] };
    expect(contour.z).toHaveLength(map.J.length);
    expect(contour.z[0]).toHaveLength(map.S.length);
    expect(contour.z[20]![0]).toBeNull();
    expect(traceOf(figure, 'best pair')).toMatchObject({ x: [S], y: [J] });
    const box = traceOf(figure, '90 % intervals of S and J');
    expect([Math.min(...box.x), Math.max(...box.x), Math.min(...box.y), Math.max(...box.y)]).toEqual([
      2.9, 3.5, 0.75, 1.45,
    ]);
  });

  it('opens the box over all J where J is not resolved', () => {
    const box = traceOf(
      misfitFigure(fixtureFindings({ jumpResolved: false }))!,
      '90 % interval of S; J not resolved',
    );
    expect(Math.min(...box.y)).toBe(0);
    expect(Math.max(...box.y)).toBeCloseTo(2.4, 9);
  });

  it('draws contours at round values between best and worst', () => {
    const { contours } = misfitFigure(fixtureFindings())!.data[0] as {
      contours: { start: number; end: number; size: number };
    };
    expect([1, 2, 5]).toContain(
      Number((contours.size / 10 ** Math.floor(Math.log10(contours.size))).toFixed(6)),
    );
    expect((contours.end - contours.start) / contours.size).toBeLessThan(12);
    expect(contours.start).toBeGreaterThanOrEqual(0.12);
    expect(contours.end).toBeLessThanOrEqual(1);
  });

  it('gives neither numbers nor box where they are withheld, and nothing without a fit', () => {
    const figure = misfitFigure(fixtureFindings({ fit: 'refused' }));
    expectSound(figure);
    expect(figure.data).toHaveLength(2);
    expect(figure.alt).toContain('withheld');
    expect(misfitFigure(fixtureFindings({ fit: 'none' }))).toBeNull();
  });
});
