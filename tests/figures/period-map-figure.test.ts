import { describe, expect, it } from 'vitest';
import { periodMapFigure } from '../../src/figures/period-map-figure';
import { largeUnit, madeUnit } from '../audit/made-unit';
import { expectSound, traceOf } from './findings-fixture';

interface Layout {
  xaxis: { range: number[]; tickvals: number[]; ticktext: string[] };
  yaxis: { ticktext: string[]; range: number[] };
  shapes: { y0: number; y1: number }[];
  annotations: { text: string }[];
}

const unit = madeUnit();
const periodOf = (loop: string): number =>
  unit.ranked.find(({ assessment }) => assessment.loop === loop)!.assessment.oscillation.period!;

describe('periodMapFigure', () => {
  it('has a row for each cycling loop, groups together with their source first, at the periods found', () => {
    const figure = periodMapFigure(unit);
    expectSound(figure);
    const { yaxis, shapes, xaxis } = figure.layout as unknown as Layout;
    expect(yaxis.ticktext).toEqual(['<b>31-FC-201</b>', '31-LC-203', '31-PC-202', '31-PC-231']);
    expect(traceOf(figure, 'stiction')).toMatchObject({ y: [0] });
    expect(traceOf(figure, 'stiction').x[0]).toBeCloseTo(periodOf('31-FC-201'), 2);
    expect(traceOf(figure, 'tight-tuning')).toMatchObject({ y: [3] });
    expect(traceOf(figure, 'tight-tuning').x[0]).toBeCloseTo(periodOf('31-PC-231'), 2);
    expect(traceOf(figure, 'likely source of a shared cycle')).toMatchObject({ y: [0] });
    // The ground of the group is under its three rows and no other.
    expect(shapes).toHaveLength(1);
    const covered = [0, 1, 2, 3].filter((row) => row > shapes[0]!.y0 && row < shapes[0]!.y1);
    expect(covered).toEqual([0, 1, 2]);
    expect(figure.caption).toContain('likely source 31-FC-201');
    const [from, to] = xaxis.range.map((power) => 10 ** power);
    for (const at of [...xaxis.tickvals, 37, 60]) expect(at > from! && at < to!).toBe(true);
    expect(xaxis.ticktext).toContain('1 min');
  });

  it('keeps to the first of the ranking where more cycle than can be read, whole groups, and stamps how many are left', () => {
    const large = largeUnit(180);
    const figure = periodMapFigure(large)!;
    expectSound(figure);
    const { yaxis, annotations, shapes } = figure.layout as unknown as Layout;
    expect(yaxis.ticktext).toHaveLength(100);
    expect(shapes).toHaveLength(30);
    expect(annotations.map(({ text }) => text).join()).toContain('20 more loops cycle');
    // Too tall to be seen at once: the periods stand above as well, at powers of ten on the logarithmic axis.
    const minute = annotations.find(({ text }) => text === '1 min') as { x: number } | undefined;
    expect(minute?.x).toBeCloseTo(Math.log10(60), 6);
  });

  it('keeps short periods as exact as long ones, and marks a single period on its axis', () => {
    const at = (periods: readonly number[]): Layout & { x: number[] } => {
      const ranked = periods.map((period, i) => {
        const { assessment, ...rest } = unit.ranked[i]!;
        const oscillation = { ...assessment.oscillation, period };
        const cause = { ...assessment.cause, verdict: 'stiction' as const };
        return { ...rest, group: null, assessment: { ...assessment, oscillation, cause } };
      });
      const figure = periodMapFigure({ ...unit, ranked })!;
      expectSound(figure);
      return { ...(figure.layout as unknown as Layout), x: traceOf(figure, 'stiction').x };
    };
    expect(at([12.34, 40_000]).x).toEqual([12.34, 40_000]);
    expect(at([136.8]).xaxis).toMatchObject({ tickvals: [136.8], ticktext: ['2.28 min'] });
  });

  it('shortens a long tag, and shows it as it stands', () => {
    const ranked = unit.ranked.map((one) => ({
      ...one,
      group: null,
      assessment: { ...one.assessment, loop: `${one.assessment.loop} <march/long-name.csv>` },
    }));
    const { yaxis } = periodMapFigure({ ...unit, ranked })!.layout as unknown as Layout;
    expect(yaxis.ticktext).toContain('31-FC-201 &lt;march/…');
  });

  it('is left out where no loop cycles', () => {
    const healthy = unit.ranked.filter(({ assessment }) => assessment.oscillation.period === null);
    expect(periodMapFigure({ ...unit, ranked: healthy })).toBeNull();
  });
});
