import { describe, expect, it } from 'vitest';
import { cycleFigure } from '../../src/figures/cycle-figure';
import { expectSound, fixtureFindings, period } from './findings-fixture';

interface Lines {
  shapes: { xref: string; x0: number; line: { dash: string } }[];
}

describe('cycleFigure', () => {
  const findings = fixtureFindings();
  const figure = cycleFigure(findings);

  it('marks the period in both views, and further periods dotted', () => {
    expectSound(figure);
    const { shapes } = figure.layout as Lines;
    expect(shapes.filter(({ line }) => line.dash === 'solid').map(({ x0 }) => x0)).toEqual([period, period]);
    expect(shapes.filter(({ line }) => line.dash === 'dot').map(({ x0 }) => x0)).toEqual([620]);
    expect(figure.caption).toContain('Further periods (dotted): 10.3 min');
  });

  it('shows power over the period with its peak at the period, as a share of the largest', () => {
    const [correlation, power] = figure.data as { x: number[]; y: number[] }[];
    const peak = power!.x[power!.y.indexOf(Math.max(...power!.y))]!;
    expect(Math.abs(peak - period)).toBeLessThan(3);
    expect(Math.max(...power!.y)).toBe(1);
    expect([...power!.x].sort((a, b) => a - b)).toEqual(power!.x);
    expect(Math.max(...correlation!.x)).toBeLessThanOrEqual(8 * period);
  });

  it('turns to minutes for a slow cycle', () => {
    const slow = { ...findings.opCycle, period: 600, others: [] };
    const { shapes } = cycleFigure({ ...findings, opCycle: slow }).layout as Lines;
    expect(shapes[0]!.x0).toBe(10);
  });

  it('draws what there is where no cycle is called', () => {
    const empty = new Float64Array(0);
    const none = {
      ...findings.opCycle,
      present: false,
      period: null,
      others: [],
      why: 'OP does not move.',
      autocorrelation: { lag: empty, value: empty },
      spectrum: { frequency: empty, power: empty },
    };
    const flat = cycleFigure({ ...findings, opCycle: none });
    expectSound(flat);
    expect((flat.layout as Lines).shapes).toEqual([]);
    expect(flat.alt).toContain('No cycle is called');
  });
});
