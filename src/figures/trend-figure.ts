/** SP, PV and OP over clock time, with the moments marked at which the fitted valve broke loose. */
import type { Findings } from '../assessment/findings';
import { duration } from '../assessment/make-answer-card';
import type { Slip } from '../estimate/stiction-fit';
import { recordCaveats } from './caveats';
import { type RecordClock, recordClock } from './clock';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName } from './layout';
import { lineWidth, palette } from './palette';
import { extent, plain, short } from './plain-numbers';
import { thin } from './thin';

/** Slips marked; of more, the largest. */
const mostSlips = 400;

export function trendFigure(findings: Findings): Figure {
  const { record, stiction } = findings;
  const { samplePeriod, pv, sp, op, travel } = record;
  const clock = recordClock(record);
  const seconds = (pv.length - 1) * samplePeriod;
  const slips = [...(stiction.drawn?.slips ?? [])]
    .sort((a, b) => Math.abs(b.size) - Math.abs(a.size))
    .slice(0, mostSlips)
    .sort((a, b) => a.sample - b.sample);

  const data: object[] = [];
  if (sp) data.push(signalTrace('SP', sp, 'y', palette.setPoint, clock, samplePeriod, 'dash'));
  data.push(signalTrace('PV', pv, 'y', palette.pv, clock, samplePeriod, 'solid'));
  if (travel)
    data.push(signalTrace('measured travel', travel, 'y2', palette.travel, clock, samplePeriod, 'dot'));
  data.push(signalTrace('OP', op, 'y2', palette.op, clock, samplePeriod, 'solid'));
  const opens = slips.filter((slip) => slip.size > 0);
  const closes = slips.filter((slip) => slip.size < 0);
  if (opens.length > 0) data.push(slipTrace('slip up', opens, op, clock, 'triangle-up'));
  if (closes.length > 0) data.push(slipTrace('slip down', closes, op, clock, 'triangle-down'));

  const unit = record.pvUnit === '' ? '' : `, ${record.pvUnit}`;
  const pvExtent = extent(pv);
  const opExtent = extent(op);
  const found = stiction.drawn?.slips.length ?? 0;
  const marked =
    found === 0
      ? 'No slips are marked.'
      : found > mostSlips
        ? `The ${mostSlips} largest of ${found} slips of the fitted valve are marked on OP.`
        : `${found} slips of the fitted valve are marked on OP.`;
  return makeFigure({
    id: 'trend',
    title: `${record.loop}: the record`,
    caption: `PV${sp ? ' and SP' : ''} above, OP${travel ? ' and measured travel' : ''} below. ${marked} Where the assembly sticks, OP creeps on while PV holds, and PV moves only after a slip.`,
    alt: `Trend of ${record.loop} over ${duration(seconds)} from ${clock.text(0)}: PV from ${short(pvExtent.low)} to ${short(pvExtent.high)}${unit === '' ? '' : ` ${record.pvUnit}`}, OP from ${short(opExtent.low)} to ${short(opExtent.high)} %, ${found} slips.`,
    caveats: recordCaveats(findings),
    data,
    annotations: [
      panelName(`PV${sp ? ' and SP' : ''}${unit}`, 'y'),
      panelName(travel ? 'OP, % of span; travel, %' : 'OP, % of span', 'y2'),
    ],
    layout: {
      xaxis: axis({ type: 'date', anchor: 'y2', title: axisTitle(clock.title), hoverformat: '%H:%M:%S' }),
      yaxis: axis({ domain: [0.53, 1] }),
      yaxis2: axis({ domain: [0, 0.43] }),
    },
    height: 500,
  });
}

function signalTrace(
  name: string,
  values: Float64Array,
  yaxis: string,
  color: string,
  clock: RecordClock,
  samplePeriod: number,
  dash: string,
): object {
  const indices = thin(values);
  return {
    type: 'scatter',
    mode: 'lines',
    name,
    yaxis,
    x: indices.map((i) => clock.at(i * samplePeriod)),
    y: plain(values, indices),
    line: { color, width: lineWidth.signal, dash },
    hovertemplate: `%{y:.4g} at %{x}<extra>${name}</extra>`,
  };
}

function slipTrace(
  name: string,
  slips: readonly Slip[],
  op: Float64Array,
  clock: RecordClock,
  symbol: string,
): object {
  return {
    type: 'scatter',
    mode: 'markers',
    name,
    yaxis: 'y2',
    x: slips.map((slip) => clock.at(slip.time)),
    y: plain(
      op,
      slips.map((slip) => slip.sample),
    ),
    customdata: slips.map((slip) => Number(slip.size.toPrecision(3))),
    marker: { symbol, size: 7, color: palette.paper, line: { color: palette.ink, width: 1.2 } },
    hovertemplate: 'travel %{customdata:+.3g} % at %{x}<extra>slip</extra>',
  };
}
