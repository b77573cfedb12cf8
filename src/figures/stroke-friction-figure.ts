/** Friction against the speed of the stem: the measured points with their intervals, and the laws that were tried on them. */
import { forceAt } from '../field-test/friction-curve';
import type { ValveTestFindings } from '../field-test/read-valve-test';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName } from './layout';
import { lineWidth, palette } from './palette';
import { plain, short } from './plain-numbers';

/** Points along a drawn law. */
const along = 120;

/** null where the curve is not resolved. */
export function strokeFrictionFigure({ record, friction }: ValveTestFindings): Figure | null {
  const curve = friction?.curve;
  if (!curve) return null;
  const { points, chosen } = curve;
  const fastest = Math.max(...points.map(({ speed }) => speed));
  const speeds = Array.from({ length: along }, (_, i) => (fastest * 1.05 * i) / (along - 1));
  const mm = (speed: number): number => 1000 * speed;
  const data: object[] = [
    {
      type: 'scatter',
      mode: 'lines',
      name: chosen.law,
      x: plain(speeds.map(mm)),
      y: plain(speeds.map((speed) => forceAt(chosen, speed))),
      line: { color: palette.model, width: lineWidth.strong },
      hoverinfo: 'skip',
    },
    {
      type: 'scatter',
      mode: 'markers',
      name: 'measured, 90 % interval',
      x: plain(points.map(({ speed }) => mm(speed))),
      y: plain(points.map(({ force }) => force)),
      error_y: {
        type: 'data',
        symmetric: false,
        array: plain(points.map(({ force, high }) => high - force)),
        arrayminus: plain(points.map(({ force, low }) => force - low)),
        color: palette.ink,
        thickness: 1.4,
      },
      marker: { symbol: 'circle', size: 8, color: palette.paper, line: { color: palette.ink, width: 1.4 } },
      hovertemplate: '%{y:.4g} N at %{x:.3g} mm/s<extra></extra>',
    },
  ];
  return makeFigure({
    id: 'stroke-friction',
    title: `${record.loop}: friction against speed`,
    caption: `The point at rest is what it takes to break loose after a reversal; the others are means over strokes at one steady speed, both ways. Drawn: ${chosen.law}, the plainest law that does as well as any tried on these points.`,
    alt: `Friction of ${record.loop} from ${short(points[0]!.force)} N at rest to ${short(points[points.length - 1]!.force)} N at ${short(mm(fastest))} mm/s; law: ${chosen.law}.`,
    caveats: ['Between rest and the slowest stroke nothing was measured.'],
    data,
    annotations: [panelName('friction, N', 'y')],
    layout: {
      xaxis: axis({ title: axisTitle('speed of the stem, mm/s'), rangemode: 'tozero' }),
      yaxis: axis({ rangemode: 'tozero' }),
    },
    height: 360,
  });
}
