import { describe, expect, it } from 'vitest';
import { travelFigure } from '../../src/figures/travel-figure';
import { expectSound, fixtureFindings, traceOf } from './findings-fixture';

describe('travelFigure', () => {
  it('draws measured travel against OP beside the line of a perfect valve', () => {
    const findings = fixtureFindings({ measuredTravel: true });
    const figure = travelFigure(findings);
    expectSound(figure);
    const perfect = traceOf(figure, 'travel = OP');
    expect(perfect.x).toEqual(perfect.y);
    const first = (figure.data as { y: number[] }[])[1]!;
    expect(first.y[0]).toBeCloseTo(findings.record.travel![0]!, 2);
  });

  it('is left out where travel was not logged', () => {
    expect(travelFigure(fixtureFindings())).toBeNull();
  });
});
