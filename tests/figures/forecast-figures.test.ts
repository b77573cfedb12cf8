/** The figures, cards and tables of forecasts and comparisons, on the demo loop. */
import { beforeAll, describe, expect, it } from 'vitest';
import { assessLoop } from '../../src/assessment/assess-loop';
import type { Findings } from '../../src/assessment/findings';
import { forecastFigure } from '../../src/figures/forecast-figure';
import { forecastMapFigure } from '../../src/figures/forecast-map-figure';
import { forecastTrendFigure } from '../../src/figures/forecast-trend-figure';
import { repairComparisonFigure } from '../../src/figures/repair-comparison-figure';
import { compareAssessments } from '../../src/forecast/compare-assessments';
import type { ForecastResult } from '../../src/forecast/forecast';
import { forecastCard, notToLoad } from '../../src/forecast/forecast-card';
import { forecastCycle } from '../../src/forecast/forecast-cycle';
import { frictionInForce } from '../../src/forecast/friction-in-force';
import { comparisonTable, forceTable, forecastTable } from '../../src/notebook/forecast-tables';
import { readLoop } from '../../src/record/read-loop';
import type { Table } from '../../src/report/table';
import { expectSound, traceOf } from './findings-fixture';

const read = (name: string): Findings =>
  assessLoop(readLoop(`data/${name}.csv`, { pvRange: { low: 0, high: 120 }, pvUnit: 'm3/h' }));
let before: Findings;
let after: Findings;
let result: ForecastResult;
let refused: ForecastResult;
beforeAll(() => {
  before = read('31-FC-104');
  after = read('31-FC-104-after-repair');
  const few = { rivals: 10, mapGains: [0.5, 1, 40], mapIntegralTimes: [1, 2] };
  result = forecastCycle(before, few);
  refused = forecastCycle(before, { ...few, largestMiss: 1e-6 });
});

const stamp = (figure: { layout: object }): string =>
  JSON.stringify((figure.layout as { annotations: object[] }).annotations);

describe('the figure of forecasts', () => {
  it('shows every setting with its band, and what is left where nothing cycles', () => {
    const figure = forecastFigure(result);
    expectSound(figure);
    const { now, others, repaired } = result.forecast!;
    const cycling = traceOf(figure, 'goes on cycling');
    const periods = [now, ...others].map(({ period }) => period!.value / 60);
    cycling.x.slice(0, periods.length).forEach((x, i) => {
      expect(x).toBeCloseTo(periods[i]!, 2);
    });
    const quiet = traceOf(figure, 'no cycle: what noise and drift leave');
    expect(quiet.x.at(-1)).toBeCloseTo(repaired.pvSwing.value, 3);
    expect(stamp(figure)).toContain('Not settings to load');
  });
});

describe('the map', () => {
  it('tells period and swing in each place, names what is not stable, and frames today', () => {
    const figure = forecastMapFigure(result);
    expectSound(figure);
    const [{ text }] = figure.data as [{ text: string[] }];
    expect(text).toHaveLength(6);
    expect(text.filter((words) => words === 'not<br>stable')).toHaveLength(2);
    const today = result.forecast!.map[0]![1]!;
    expect(Number(text[1]!.split('<br>')[0])).toBeCloseTo(today.period! / 60, 0);
    const frame = (figure.layout as { shapes: { x0: number; y0: number; line: { width: number } }[] }).shapes;
    expect(frame.filter(({ line }) => line.width > 0)).toMatchObject([{ x0: 0.5, y0: -0.5 }]);
    expect(stamp(figure)).toContain('Not settings to load');
  });
});

describe('the trend', () => {
  it('draws record and simulations over as long', () => {
    const figure = forecastTrendFigure(result, before.record);
    expectSound(figure);
    const ends = ['record', 'simulated today', 'simulated, valve repaired'].map(
      (name) => traceOf(figure, name).x.at(-1)!,
    );
    for (const end of ends) expect(end).toBeCloseTo(ends[0]!, 1);
  });
});

describe('where the forecast was refused', () => {
  it('there are no figures, and the card says why', () => {
    expect(forecastFigure(refused)).toBeNull();
    expect(forecastMapFigure(refused)).toBeNull();
    expect(forecastTrendFigure(refused, before.record)).toBeNull();
    const card = forecastCard(refused);
    expect(card.headline).toBe('No forecast for 31-FC-104.');
    expect(card.lead).toBe(refused.refused[0]);
    expect(forecastTable(refused).columns[0]!.values).toEqual([]);
  });
});

describe('the card of a forecast', () => {
  it('says first whether retuning ends the cycle, and marks every setting as not to be loaded', () => {
    const card = forecastCard(result);
    expect(card.headline).toBe('Retuning does not end the cycle of 31-FC-104; a repaired valve does.');
    const settings = card.figures.filter(({ label }) => label.startsWith('Gain'));
    expect(settings).toHaveLength(3);
    for (const { note } of settings) expect(note).toBe(notToLoad);
    expect(card.cautions).toEqual(result.cautions);
  });
});

const column = (table: Table, name: string): readonly unknown[] =>
  table.columns.find((candidate) => candidate.name === name)!.values;

describe('tables', () => {
  it('give every forecast a row', () => {
    const table = forecastTable(result);
    const { others } = result.forecast!;
    expect(column(table, 'what')).toEqual([
      'today',
      ...others.map(() => 'other setting'),
      'no integral action',
      expect.stringMatching(/^integral dead band/),
      'valve at S = 0 %, J = 0 %',
    ]);
    expect(column(table, 'period').at(-1)).toBe('none');
  });

  it('give friction as force and pressure', () => {
    const options = { S: 4, J: 1, springRate: '52.5 kN/m', stroke: '0.1 m', area: '645 cm2' };
    const table = forceTable(frictionInForce({ ...options, packingFriction: '60 N' }));
    expect(column(table, 'force').join(' ')).toContain('210.00 N');
    expect(column(table, 'what')).toContain('friction at rest');
    expect(column(forceTable(frictionInForce({ ...options, J: null })), 'force')).toContain('not resolved');
  });

  it('and a figure show both records of a comparison', () => {
    const comparison = compareAssessments(before, after);
    const figure = repairComparisonFigure(comparison, before, after);
    expectSound(figure);
    expect(figure.caption).toContain(comparison.inWords);
    expect(column(comparisonTable(comparison), 'what')).toEqual(comparison.rows.map(({ what }) => what));
    const unproven = compareAssessments(before, { ...after, record: { ...after.record, sp: null } });
    expect(unproven.answer).toBe('cycle-gone');
    expect(stamp(repairComparisonFigure(unproven, before, after))).toContain('not shown repaired');
  });
});
