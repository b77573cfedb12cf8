import { describe, expect, it } from 'vitest';
import { fitFigure } from '../../src/figures/fit-figure';
import { expectSound, fixtureFindings, period, traceOf } from './findings-fixture';

describe('fitFigure', () => {
  it('shows eight cycles from the middle, measured and modelled at the same moments', () => {
    const findings = fixtureFindings();
    const figure = fitFigure(findings);
    expectSound(figure);
    const measured = traceOf<string>(figure, 'PV, measured');
    const simulated = traceOf<string>(figure, 'PV, simulated');
    expect(measured.x).toEqual(simulated.x);
    const seconds = measured.x.map(
      (time) => (Date.parse(`${time}Z`) - Date.parse('2031-03-05T06:00Z')) / 1000,
    );
    expect(seconds.at(-1)! - seconds[0]!).toBe(8 * period);
    const first = seconds[0]!;
    expect(simulated.y[0]).toBeCloseTo(findings.stiction.fit!.simulatedPv[first]!, 2);
    expect(figure.caption).toContain("88 % of PV's movement");
    expect(figure.alt).toContain('S 3.20 %');
  });

  it('shows a record of a few cycles whole', () => {
    const figure = fitFigure(fixtureFindings({ samples: 500 }))!;
    expect(traceOf<string>(figure, 'OP').x).toHaveLength(500);
    expect(figure.caption).toContain('The whole record');
  });

  it('quotes no number of a fit whose numbers are withheld, and is left out where there is none', () => {
    const figure = fitFigure(fixtureFindings({ fit: 'refused' }))!;
    expect(figure.alt).not.toContain('S 3.2');
    expect(JSON.stringify(figure.layout)).toContain('No numbers to quote');
    expect(fitFigure(fixtureFindings({ fit: 'none' }))).toBeNull();
  });
});
