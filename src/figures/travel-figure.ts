/** Measured travel against OP: the valve itself, with nothing in between. */
import type { Findings } from '../assessment/findings';
import { recordCaveats } from './caveats';
import { recordClock } from './clock';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName } from './layout';
import { lineWidth, palette } from './palette';
import { extent, padded, plain, short } from './plain-numbers';
import { stretchesInWords, timeColoured, timeStretches } from './time-stretches';

/** null when travel was not logged. */
export function travelFigure(findings: Findings): Figure | null {
  const { record, opCycle } = findings;
  const { travel, op, samplePeriod } = record;
  if (!travel) return null;
  const clock = recordClock(record);
  const stretches = timeStretches(op.length, samplePeriod, opCycle);
  const traces = timeColoured(op, travel, stretches, clock, samplePeriod);
  const range = extent(op);
  const travelRange = extent(travel);
  const shown = stretchesInWords(stretches);
  return makeFigure({
    id: 'travel-plot',
    title: `${record.loop}: travel against OP`,
    caption: `${shown} A free valve runs up and down the same line; level runs are OP moving without the valve, and their length on a reversal is the dead band.`,
    alt: `Measured travel of ${record.loop} against OP with time as colour: travel from ${short(travelRange.low)} to ${short(travelRange.high)} %, OP from ${short(range.low)} to ${short(range.high)} %.`,
    caveats: recordCaveats(findings),
    data: [
      {
        type: 'scatter',
        mode: 'lines',
        name: 'travel = OP',
        x: plain([range.low, range.high]),
        y: plain([range.low, range.high]),
        line: { color: palette.setPoint, width: lineWidth.thin, dash: 'dash' },
        hoverinfo: 'skip',
        showlegend: false,
      },
      ...traces,
    ],
    annotations: [panelName('measured travel, %   (dashed: travel = OP)', 'y')],
    layout: {
      xaxis: axis({ title: axisTitle('OP, % of span'), range: padded(range.low, range.high, 0.03, 0.03) }),
      yaxis: axis({ range: padded(travelRange.low, travelRange.high, 0.15, 0.15) }),
    },
    width: 460,
    height: 460,
  });
}
