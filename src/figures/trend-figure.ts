/** SP, PV and OP over clock time, with the moments marked at which the fitted valve broke loose. */
import type { Findings } from '../assessment/findings';
import { duration } from '../assessment/make-answer-card';
import type { Slip } from '../estimate/stiction-fit';
import { recordCaveats } from './caveats';
import { type RecordClock, recordClock } from './clock';
import type { Figure } from './figure';
import { axis, makeFigure, panelName, timeAxis, withUnit } from './layout';
import { lineWidth, palette } from './palette';
import { extent, plain, short } from './plain-numbers';
import { thin } from './thin';

/** Slips that can be marked without hiding OP. */
const mostSlips = 200;

export function trendFigure(findings: Findings): Figure {
  const { record } = findings;
  const { samplePeriod, pv, sp, op, travel } = record;
  const clock = recordClock(record);
  const seconds = (pv.length - 1) * samplePeriod;
  const { slips, words } = slipsToMark(findings);

  const data: object[] = [signalTrace('PV', pv, 'y', palette.pv, clock, samplePeriod, 'solid')];
  if (sp) data.push(signalTrace('SP', sp, 'y', palette.setPoint, clock, samplePeriod, 'dash'));
  if (travel)
    data.push(signalTrace('measured travel', travel, 'y2', palette.travel, clock, samplePeriod, 'solid'));
  data.push(signalTrace('OP', op, 'y2', palette.op, clock, samplePeriod, 'solid'));
  const opens = slips.filter((slip) => slip.size > 0);
  const closes = slips.filter((slip) => slip.size < 0);
  if (opens.length > 0) data.push(slipTrace('slip up', opens, op, clock, 'triangle-up'));
  if (closes.length > 0) data.push(slipTrace('slip down', closes, op, clock, 'triangle-down'));

  const pvName = sp ? 'PV and SP' : 'PV';
  const pvExtent = extent(pv);
  const opExtent = extent(op);
  const lookFor =
    record.response === 'integrating'
      ? 'Where the assembly sticks, PV runs in straight ramps that turn only after a slip.'
      : 'Where the assembly sticks, OP creeps on while PV holds, and PV moves only after a slip.';
  return makeFigure({
    id: 'trend',
    title: `${record.loop}: the record`,
    caption: `${pvName} above, OP${travel ? ' and measured travel' : ''} below. ${words} ${lookFor}`,
    alt: `Trend of ${record.loop} over ${duration(seconds)} from ${clock.text(0)}: PV from ${short(pvExtent.low)} to ${`${short(pvExtent.high)} ${record.pvUnit}`.trim()}, OP from ${short(opExtent.low)} to ${short(opExtent.high)} %, ${slips.length} slips marked.`,
    caveats: recordCaveats(findings),
    data,
    annotations: [
      panelName(withUnit(pvName, record.pvUnit), 'y'),
      panelName(travel ? 'OP, % of span; travel, %' : 'OP, % of span', 'y2'),
    ],
    layout: {
      // Room at the ends keeps the first label, the one with the date, inside the figure.
      xaxis: { ...timeAxis(clock, 'y2'), range: [clock.at(-0.03 * seconds), clock.at(1.03 * seconds)] },
      yaxis: axis({ domain: [0.53, 1] }),
      yaxis2: axis({ domain: [0, 0.43] }),
    },
    height: 500,
  });
}

/** Which slips to mark, and a sentence on them: none of a fit whose numbers are withheld or of a valve not accused. */
function slipsToMark({ assessment, stiction }: Findings): { slips: readonly Slip[]; words: string } {
  const { verdict } = assessment.cause;
  if (stiction.fit === null) return { slips: [], words: 'No slips are marked, as the fit gives no numbers.' };
  if (verdict !== 'stiction' && verdict !== 'lost-motion' && verdict !== 'cannot-tell') {
    return { slips: [], words: 'No slips are marked, as the valve is not accused.' };
  }
  const all = stiction.fit.slips;
  if (all.length <= mostSlips)
    return { slips: all, words: `${all.length} slips of the fitted valve are marked on OP.` };
  const first = all.filter((slip, i) => i === 0 || slip.size > 0 !== all[i - 1].size > 0);
  const largest = [...first].sort((a, b) => Math.abs(b.size) - Math.abs(a.size)).slice(0, mostSlips);
  const slips = largest.sort((a, b) => a.sample - b.sample);
  return {
    slips,
    words: `Of ${all.length} slips of the fitted valve ${slips.length} are marked on OP, each the first after a reversal.`,
  };
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
