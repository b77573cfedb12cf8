/** PV against OP with time as colour: the shape of the cycle, and whether it stays the same over the record. */
import type { Findings } from '../assessment/findings';
import { recordCaveats } from './caveats';
import { recordClock } from './clock';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName, withUnit } from './layout';
import { extent, padded, short } from './plain-numbers';
import { stretchesInWords, timeColoured, timeStretches } from './time-stretches';

export function phaseFigure(findings: Findings): Figure {
  const { record, opCycle, assessment } = findings;
  const clock = recordClock(record);
  const stretches = timeStretches(record.op.length, record.samplePeriod, opCycle);
  const traces = timeColoured(record.op, record.pv, stretches, clock, record.samplePeriod);
  const shown = stretchesInWords(stretches);
  const { pvSwing, opSwing } = assessment.severity;
  const range = extent(record.op);
  const lookFor =
    record.response === 'integrating'
      ? 'An integrating process rounds this plot off whatever the valve does; the loop of travel against OP tells more.'
      : 'Flat runs joined by steep ones, in loops that lie on each other, speak for an assembly that holds and then jumps; a smooth ellipse or a cloud does not.';
  return makeFigure({
    id: 'phase-plot',
    title: `${record.loop}: PV against OP`,
    caption: `${shown} ${lookFor}`,
    alt: `PV of ${record.loop} against OP with time as colour, median swing ${`${short(pvSwing)} ${record.pvUnit}`.trim()} of PV and ${short(opSwing)} % of OP.`,
    caveats: recordCaveats(findings),
    data: traces,
    annotations: [panelName(withUnit('PV', record.pvUnit), 'y')],
    layout: {
      xaxis: axis({ title: axisTitle('OP, % of span'), range: padded(range.low, range.high, 0.03, 0.03) }),
      yaxis: axis({}),
    },
    width: 460,
    height: 460,
  });
}
