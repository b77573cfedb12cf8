/** One planned test: OP over time inside the band that was stated, and where PV is expected and stopped. */
import { duration } from '../assessment/make-answer-card';
import type { PlannedTest, ValveTestPlan } from '../field-test/valve-test-plan';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName, withUnit } from './layout';
import { lineWidth, palette } from './palette';
import { padded, plain, short } from './plain-numbers';

export function testPlanFigure(plan: ValveTestPlan, test: PlannedTest): Figure {
  const { limits, loop, pvUnit, basis } = plan;
  const points: { time: number; op: number }[] = [{ time: 0, op: test.startOp }];
  for (const { op, rate, hold } of test.moves) {
    const last = points[points.length - 1]!;
    const begins = last.time + (rate === null ? 0 : Math.abs(op - last.op) / rate);
    points.push({ time: begins, op }, { time: begins + hold, op });
  }
  const seconds = points[points.length - 1]!.time;
  const line = (values: readonly number[], y: string, color: string, dash: string, name: string): object => ({
    type: 'scatter',
    mode: 'lines',
    name,
    yaxis: y,
    x: plain([0, seconds / 60]),
    y: plain(values),
    line: { color, width: lineWidth.thin, dash },
    hoverinfo: 'skip',
  });
  const level = (
    value: number,
    y: string,
    color: string,
    dash: string,
    name: string,
    first: boolean,
  ): object => ({
    ...line([value, value], y, color, dash, name),
    showlegend: first,
  });
  const { opBand, pvBand } = limits;
  const data: object[] = [
    {
      type: 'scatter',
      mode: 'lines',
      name: 'OP, proposed',
      x: plain(points.map(({ time }) => time / 60)),
      y: plain(points.map(({ op }) => op)),
      line: { color: palette.op, width: lineWidth.signal },
      hovertemplate: '%{y:.4g} % at %{x:.3g} min<extra></extra>',
    },
    level(opBand.low, 'y', palette.ink, 'solid', 'band as stated', true),
    level(opBand.high, 'y', palette.ink, 'solid', 'band as stated', false),
    level(pvBand.low, 'y2', palette.ink, 'solid', 'band as stated', false),
    level(pvBand.high, 'y2', palette.ink, 'solid', 'band as stated', false),
    level(test.stopPv.low, 'y2', palette.model, 'dash', 'stop', true),
    level(test.stopPv.high, 'y2', palette.model, 'dash', 'stop', false),
    level(test.expectedPv.low, 'y2', palette.pv, 'dot', 'PV expected within', true),
    level(test.expectedPv.high, 'y2', palette.pv, 'dot', 'PV expected within', false),
    level(basis.pv, 'y2', palette.pv, 'solid', 'PV now', true),
  ];
  return makeFigure({
    id: `test-plan-${test.kind}`,
    title: `${loop}: proposed ${test.kind} test`,
    caption: `${test.title}. OP as proposed above, inside the band that was stated; below, where PV is expected to stay and where the test is stopped. ${duration(seconds)} in manual.`,
    alt: `Proposal for ${loop}: ${test.title}; PV expected within ${short(test.expectedPv.low)} to ${short(test.expectedPv.high)} ${pvUnit}, stop at ${short(test.stopPv.low)} or ${short(test.stopPv.high)} ${pvUnit}.`,
    caveats: [`${plan.standing[0]!.toUpperCase()}${plan.standing.slice(1)}. Authorised people decide.`],
    data,
    annotations: [panelName('OP, % of span', 'y'), panelName(withUnit('PV', pvUnit), 'y2')],
    layout: {
      xaxis: axis({ anchor: 'y2', title: axisTitle('time in manual, min') }),
      yaxis: axis({ domain: [0.54, 1], range: padded(opBand.low, opBand.high, 0.06, 0.06) }),
      yaxis2: axis({ domain: [0, 0.42], range: padded(pvBand.low, pvBand.high, 0.06, 0.06) }),
    },
    height: 440,
  });
}
