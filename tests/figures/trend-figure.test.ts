import { describe, expect, it } from 'vitest';
import type { Findings } from '../../src/assessment/findings';
import { trendFigure } from '../../src/figures/trend-figure';
import { expectSound, fixtureFindings, traceOf } from './findings-fixture';

const names = (findings: Findings) =>
  (trendFigure(findings).data as { name: string }[]).map(({ name }) => name);

describe('trendFigure', () => {
  const findings = fixtureFindings();
  const figure = trendFigure(findings);

  it('shows PV, SP and OP over clock time, with every peak kept', () => {
    expectSound(figure);
    const pv = traceOf<string>(figure, 'PV');
    expect(pv.x[0]).toBe('2031-03-05 06:00:00');
    expect(Math.max(...pv.y)).toBeCloseTo(Math.max(...findings.record.pv), 2);
    expect(Math.min(...pv.y)).toBeCloseTo(Math.min(...findings.record.pv), 2);
    expect(traceOf<string>(figure, 'OP').yaxis).toBe('y2');
  });

  it('marks each slip on OP at its moment, up and down apart', () => {
    const slips = findings.stiction.fit!.slips;
    const up = traceOf<string>(figure, 'slip up');
    const down = traceOf<string>(figure, 'slip down');
    expect(up.x.length + down.x.length).toBe(slips.length);
    const first = slips.find((slip) => slip.size > 0)!;
    expect(Date.parse(`${up.x[0]}Z`) - Date.parse('2031-03-05T06:00Z')).toBe(1000 * first.time);
    expect(up.y[0]).toBeCloseTo(findings.record.op[first.sample]!, 2);
    expect(figure.caption).toContain(`${slips.length} slips of the fitted valve are marked`);
  });

  it('marks only the first slip after each reversal where there are very many', () => {
    const fit = findings.stiction.fit!;
    const many = Array.from({ length: 900 }, (_, i) => ({
      sample: i,
      time: i,
      size: Math.floor(i / 6) % 2 === 0 ? 0.5 : -0.5,
    }));
    const crowded = trendFigure({
      ...findings,
      stiction: { ...findings.stiction, fit: { ...fit, slips: many } },
    });
    expect(traceOf<string>(crowded, 'slip up').x).toHaveLength(75);
    expect(traceOf<string>(crowded, 'slip down').x).toHaveLength(75);
    expect(crowded.caption).toContain('Of 900 slips of the fitted valve 150 are marked');
  });

  it('marks none where numbers are withheld or the valve is not accused, and says why', () => {
    const withheld = fixtureFindings({ fit: 'refused' });
    expect(names(withheld)).not.toContain('slip up');
    expect(trendFigure(withheld).caption).toContain('the fit gives no numbers');
    const tuning = fixtureFindings({ verdict: 'tight-tuning' });
    expect(names(tuning)).not.toContain('slip up');
    expect(trendFigure(tuning).caption).toContain('the valve is not accused');
  });

  it('adds measured travel and leaves out a set point that was not logged', () => {
    expect(names(fixtureFindings({ measuredTravel: true }))).toContain('measured travel');
    expect(names(fixtureFindings({ setPointLogged: false }))).not.toContain('SP');
  });

  it('stamps a verdict of cannot-tell on the picture', () => {
    expect(JSON.stringify(trendFigure(fixtureFindings({ verdict: 'cannot-tell' })).layout)).toContain(
      'cannot-tell: The record was compressed',
    );
  });

  it('says what sticking looks like in a loop of its kind', () => {
    const level = { ...findings, record: { ...findings.record, response: 'integrating' as const } };
    expect(figure.caption).toContain('PV holds');
    expect(trendFigure(level).caption).toContain('straight ramps');
  });
});
