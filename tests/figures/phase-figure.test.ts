import { describe, expect, it } from 'vitest';
import { phaseFigure } from '../../src/figures/phase-figure';
import { expectSound, fixtureFindings } from './findings-fixture';

describe('phaseFigure', () => {
  it('draws PV against OP, the later the darker', () => {
    const findings = fixtureFindings();
    const figure = phaseFigure(findings);
    expectSound(figure);
    const traces = figure.data as { x: number[]; y: number[]; line: { color: string } }[];
    expect(traces[0]!.x[0]).toBeCloseTo(findings.record.op[0]!, 2);
    expect(traces[0]!.y[0]).toBeCloseTo(findings.record.pv[0]!, 2);
    const light = traces.map(({ line }) => Number.parseInt(line.color.slice(3, 5), 16));
    for (let i = 1; i < light.length; i++) expect(light[i]).toBeLessThan(light[i - 1]!);
    expect(figure.alt).toContain('9.8 m3/h of PV and 6 % of OP');
  });

  it('takes a record without a cycle or a unit', () => {
    const findings = fixtureFindings({ samples: 40, fit: 'none' });
    const bare = { ...findings, record: { ...findings.record, pvUnit: '' } };
    expectSound(phaseFigure(bare));
  });

  it('does not read the shape of a self-regulating loop into an integrating one', () => {
    const findings = fixtureFindings();
    const level = { ...findings, record: { ...findings.record, response: 'integrating' as const } };
    expect(phaseFigure(findings).caption).toContain('Flat runs');
    expect(phaseFigure(level).caption).not.toContain('Flat runs');
  });
});
