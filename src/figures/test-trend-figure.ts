/** What was done in a valve test and what came of it, over time; the stretch or the moments that were read are marked. */
import { duration } from '../assessment/make-answer-card';
import type { ValveTestFindings } from '../field-test/read-valve-test';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName, withUnit } from './layout';
import { lineWidth, palette } from './palette';
import { extent, plain, short } from './plain-numbers';
import { thin } from './thin';

/** A record longer than this is drawn in minutes, s. */
const inMinutes = 300;

export function testTrendFigure(findings: ValveTestFindings): Figure {
  const { record, reading, hold, step, stroke } = findings;
  const { op, travel, pv, samplePeriod } = record;
  const seconds = (op.length - 1) * samplePeriod;
  const unit = seconds > inMinutes ? 60 : 1;
  const at = (sample: number): number => (sample * samplePeriod) / unit;
  const line = (name: string, values: Float64Array, yaxis: string, color: string): object => {
    const indices = thin(values);
    return {
      type: 'scatter',
      mode: 'lines',
      name,
      yaxis,
      x: plain(indices.map(at)),
      y: plain(values, indices),
      line: { color, width: lineWidth.signal },
      hovertemplate: `%{y:.4g}<extra>${name}</extra>`,
    };
  };
  // PV has a panel of its own where it is what was watched, or where there is no travel.
  const lower = pv !== null && (hold !== null || travel === null);
  const data: object[] = [line('command', op, 'y', palette.op)];
  if (travel) data.push(line('measured travel', travel, 'y', palette.travel));
  if (lower) data.push(line('PV', pv, 'y2', palette.pv));
  const moments = [
    ...(stroke?.motion.legs ?? []).flatMap(({ moves }) => moves ?? []),
    ...(step?.steps ?? []).filter(({ moved }) => moved).map(({ time }) => Math.round(time / samplePeriod)),
  ];
  if (moments.length > 0 && travel) {
    data.push({
      type: 'scatter',
      mode: 'markers',
      name: stroke ? 'breaks loose' : 'step that moved it',
      x: plain(moments.map(at)),
      y: plain(travel, moments),
      marker: { symbol: 'circle', size: 7, color: palette.paper, line: { color: palette.ink, width: 1.2 } },
      hovertemplate: '%{y:.4g} %<extra></extra>',
    });
  }
  const shapes = hold
    ? [
        {
          type: 'rect',
          xref: 'x',
          yref: 'paper',
          x0: at(hold.from),
          x1: at(hold.to - 1),
          y0: 0,
          y1: 1,
          fillcolor: palette.stampGround,
          opacity: 0.7,
          line: { width: 0 },
          layer: 'below',
        },
      ]
    : [];
  const what = hold
    ? 'The shaded stretch is the hold; the swing of PV in it, its first period left out, is compared with the swing before.'
    : stroke
      ? 'Circles: where the stem breaks loose after each turn of the command.'
      : 'Circles: steps that moved the valve beyond what noise explains.';
  const watched = extent(travel ?? pv ?? op);
  return makeFigure({
    id: `test-trend-${reading.kind}`,
    title: `${record.loop}: the ${reading.kind} test`,
    caption: `Command${travel ? ' and measured travel' : ''}${lower ? ' above, PV below' : ''}. ${what}`,
    alt: `Trend of the ${reading.kind} test of ${record.loop} over ${duration(seconds)}: command from ${short(extent(op).low)} to ${short(extent(op).high)} %, ${travel ? 'travel' : 'PV'} from ${short(watched.low)} to ${short(watched.high)}.`,
    caveats: [],
    data,
    annotations: [
      panelName(travel ? 'command, % of span; travel, %' : 'command, % of span', 'y'),
      ...(lower ? [panelName(withUnit('PV', record.pvUnit), 'y2')] : []),
    ],
    layout: {
      xaxis: axis({
        anchor: lower ? 'y2' : 'y',
        title: axisTitle(`time since the start, ${unit === 60 ? 'min' : 's'}`),
      }),
      yaxis: axis({ domain: lower ? [0.56, 1] : [0, 1] }),
      ...(lower ? { yaxis2: axis({ domain: [0, 0.42] }) } : {}),
      shapes,
    },
    height: lower ? 460 : 340,
  });
}
