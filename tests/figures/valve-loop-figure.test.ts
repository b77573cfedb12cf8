import { describe, expect, it } from 'vitest';
import { valveLoopFigure } from '../../src/figures/valve-loop-figure';
import { expectSound, fixtureFindings, J, S, traceOf } from './findings-fixture';

const textOf = (figure: { layout: object }): string =>
  (figure.layout as { annotations: { text: string }[] }).annotations.map(({ text }) => text).join('\n');

describe('valveLoopFigure', () => {
  it('draws the loop with S and J as dimensions of their own length', () => {
    const figure = valveLoopFigure(fixtureFindings());
    expectSound(figure);
    const dimensions = (figure.data as { mode: string; x: number[]; y: number[] }[]).filter(
      ({ mode }) => mode === 'lines+markers',
    );
    expect(dimensions).toHaveLength(2);
    expect(dimensions[0]!.x[1]! - dimensions[0]!.x[0]!).toBeCloseTo(S, 3);
    expect(dimensions[1]!.y[1]! - dimensions[1]!.y[0]!).toBeCloseTo(J, 3);
    const interval = traceOf(figure, '90 % interval');
    expect(interval.x[1]! - interval.x[0]!).toBeCloseTo(0.6, 3);
    expect(textOf(figure)).toContain('3.20 % (2.90 to 3.50)');
  });

  it('lies on the travel that the fitted element makes', () => {
    const findings = fixtureFindings();
    const loop = traceOf(valveLoopFigure(findings)!, 'fitted valve');
    const { modelTravel } = findings.stiction.fit!;
    const settled = modelTravel.subarray(200);
    expect(Math.max(...loop.y)).toBeCloseTo(Math.max(...settled), 0);
    expect(Math.min(...loop.y)).toBeCloseTo(Math.min(...settled), 0);
  });

  it('says that J is not resolved instead of giving it', () => {
    const figure = valveLoopFigure(fixtureFindings({ jumpResolved: false }))!;
    expect(textOf(figure)).toContain('<b>slip jump J</b><br>not resolved');
    expect(figure.alt).toContain('slip jump J not resolved');
  });

  it('quotes no number of a fit whose numbers are withheld', () => {
    const figure = valveLoopFigure(fixtureFindings({ fit: 'refused' }));
    expectSound(figure);
    expect(textOf(figure)).toContain('No numbers to quote');
    expect(textOf(figure) + figure.alt).not.toMatch(/3\.2|2\.9|1\.1/);
  });

  it('is left out where nothing was fitted', () => {
    expect(valveLoopFigure(fixtureFindings({ fit: 'none' }))).toBeNull();
  });
});
