/** PV and set point before and after work on the valve, on one scale. */
import type { Findings } from '../assessment/findings';
import { duration } from '../assessment/make-answer-card';
import type { RepairComparison } from '../forecast/compare-assessments';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName, withUnit } from './layout';
import { lineWidth, palette } from './palette';
import { extent, padded, plain, short } from './plain-numbers';
import { thin } from './thin';

export function repairComparisonFigure(
  comparison: RepairComparison,
  before: Findings,
  after: Findings,
): Figure {
  const { loop, inWords } = comparison;
  const { pvUnit } = before.record;
  const ranges = [before, after].map(({ record }) => extent(record.pv));
  const low = Math.min(...ranges.map((range) => range.low));
  const high = Math.max(...ranges.map((range) => range.high));
  const shown = ({ record }: Findings, y: string): object[] => {
    const line = (values: Float64Array, name: string, color: string, width: number): object => {
      const kept = thin(values);
      return {
        type: 'scatter',
        mode: 'lines',
        name,
        showlegend: y === 'y',
        yaxis: y,
        x: plain(kept.map((k) => (k * record.samplePeriod) / 60)),
        y: plain(values, kept),
        line: { color, width },
        hovertemplate: '%{y:.4g}<extra></extra>',
      };
    };
    return [
      ...(record.sp ? [line(record.sp, 'SP', palette.setPoint, lineWidth.signal)] : []),
      line(record.pv, 'PV', palette.pv, lineWidth.signal),
    ];
  };
  const length = ({ record }: Findings): number => record.pv.length * record.samplePeriod;
  return makeFigure({
    id: 'repair-comparison',
    title: `${loop}: before and after`,
    caption: `PV and set point of both records on one scale: ${duration(length(before))} before, ${duration(length(after))} after. ${inWords}`,
    alt: `PV of ${loop} before and after work on its valve: from ${short(ranges[0]!.high - ranges[0]!.low)} to ${short(ranges[1]!.high - ranges[1]!.low)} ${pvUnit} from end to end, set-point moves included.`,
    caveats: comparison.answer === 'repaired' ? [] : [inWords],
    data: [...shown(before, 'y'), ...shown(after, 'y2')],
    annotations: [
      panelName(withUnit(`before, ${before.record.start.slice(0, 10)}: PV`, pvUnit), 'y'),
      panelName(withUnit(`after, ${after.record.start.slice(0, 10)}: PV`, pvUnit), 'y2'),
    ],
    layout: {
      xaxis: axis({ anchor: 'y2', title: axisTitle('min since the start of each record') }),
      yaxis: axis({ domain: [0.56, 1], range: padded(low, high, 0.05, 0.05) }),
      yaxis2: axis({ domain: [0, 0.44], range: padded(low, high, 0.05, 0.05) }),
    },
    height: 460,
  });
}
