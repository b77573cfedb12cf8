import { describe, expect, it } from 'vitest';
import { evidenceFigure } from '../../src/figures/evidence-figure';
import { expectSound, fixtureFindings } from './findings-fixture';

interface Marks {
  x: number[];
  y: number[];
  marker: { symbol: string };
}

describe('evidenceFigure', () => {
  it('puts each indicator in the column of what it says, with a shape of its own, under the verdict', () => {
    const figure = evidenceFigure(fixtureFindings());
    expectSound(figure);
    const [against, undecided, stiction, skipped] = figure.data as Marks[];
    expect([against!.x, undecided!.x, stiction!.x, skipped!.x]).toEqual([[0], [1], [2, 2, 2], [3]]);
    expect(new Set(figure.data.map((trace) => (trace as Marks).marker.symbol)).size).toBe(4);
    expect(Math.min(...stiction!.y)).toBeLessThan(Math.min(...against!.y));
    expect(figure.caption).toContain('2 for stiction, 1 against, 1 undecided, 1 skipped');
    const text = JSON.stringify(figure.layout);
    expect(text).toContain('area ratio of half cycles: 1.42');
    expect(text).toContain('Fit: S 3.20 % (2.90 to 3.50)');
  });

  it('puts a verdict that accuses no stiction on the other side, and one that cannot tell in between', () => {
    const verdictColumn = (verdict: 'lost-motion' | 'cannot-tell'): number =>
      (evidenceFigure(fixtureFindings({ verdict }))!.data as Marks[]).findIndex(({ y }) =>
        y.some((at) => at < 0.5),
      );
    expect(verdictColumn('lost-motion')).toBe(0);
    expect(verdictColumn('cannot-tell')).toBe(1);
  });

  it('says where numbers are withheld, and is left out where no indicator was asked', () => {
    expect(JSON.stringify(evidenceFigure(fixtureFindings({ fit: 'refused' })))).toContain('numbers withheld');
    expect(evidenceFigure(fixtureFindings({ evidence: [] }))).toBeNull();
  });
});
