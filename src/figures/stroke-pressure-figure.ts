/** Actuator pressure against travel of a diagnostic stroke: the spring's line, the bench set on it, the friction band around it. */
import { withInterval } from '../assessment/make-answer-card';
import type { ValveTestFindings } from '../field-test/read-valve-test';
import { dimension } from './dimension';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName } from './layout';
import { fontSize, lineWidth, palette } from './palette';
import { extent, padded, plain, short } from './plain-numbers';
import { thin } from './thin';

/** null without pressure, or where the strokes do not show spring and friction. */
export function strokePressureFigure({ record, friction }: ValveTestFindings): Figure | null {
  const { travel, pressure } = record;
  if (!friction || !travel || !pressure) return null;
  const { line, sense, benchSet, frictionBand, standing, moving, springRate, springRange } = friction;
  const indices = thin(pressure);
  const x = extent(travel);
  const on = (percent: number): number => line.offset + line.slope * percent;
  const y = extent(pressure);
  const middle = (x.low + x.high) / 2;
  const bandAt = middle + 0.25 * (x.high - x.low);
  const off = sense * standing.pressure.value;
  const data: object[] = [
    {
      type: 'scatter',
      mode: 'lines',
      name: 'logged',
      x: plain(travel, indices),
      y: plain(pressure, indices),
      line: { color: palette.travel, width: lineWidth.thin },
      hovertemplate: '%{y:.4g} at %{x:.4g} %<extra></extra>',
    },
    {
      type: 'scatter',
      mode: 'lines',
      name: 'spring',
      x: plain([x.low, x.high]),
      y: [x.low, x.high].map((percent) => Number(on(percent).toPrecision(6))),
      line: { color: palette.model, width: lineWidth.strong },
      hoverinfo: 'skip',
    },
    ...[1, -1].map((side) => ({
      type: 'scatter',
      mode: 'lines',
      name: 'breaks loose',
      showlegend: side > 0,
      x: plain([x.low, x.high]),
      y: [x.low, x.high].map((percent) => Number((on(percent) + side * off).toPrecision(6))),
      line: { color: palette.ink, width: 1, dash: 'dash' },
      hoverinfo: 'skip',
    })),
    dimension(
      [bandAt, bandAt],
      [on(bandAt) - sense * moving.pressure.value, on(bandAt) + off],
      sense > 0 ? [180, 0] : [0, 180],
    ),
  ];
  const band = frictionBand.force ?? frictionBand.pressure;
  const rate = springRate ? `${withInterval(springRate)}` : withInterval(springRange);
  return makeFigure({
    id: 'stroke-pressure',
    title: `${record.loop}: pressure against travel`,
    caption: `The spring's line lies midway between the ways up and down; it would meet 0 and 100 % of travel at ${short(benchSet.closed.value)} and ${short(benchSet.open.value)} ${record.pressureUnit}, the bench set with process forces in it. Friction band ${withInterval(band)}: from moving one way to breaking loose the other way. Spring ${rate}.`,
    alt: `Actuator pressure of ${record.loop} against travel from ${short(x.low)} to ${short(x.high)} %: spring ${rate}, friction band ${withInterval(band)}.`,
    caveats: [],
    data,
    annotations: [
      panelName(`actuator pressure, ${record.pressureUnit}`, 'y'),
      {
        x: bandAt,
        y: on(bandAt) + off,
        xref: 'x',
        yref: 'y',
        xanchor: 'right',
        yanchor: 'bottom',
        showarrow: false,
        text: `<b>friction band</b> ${withInterval(band)}`,
        font: { size: fontSize.small, color: palette.ink },
        bgcolor: 'rgba(255,255,255,0.8)',
      },
    ],
    layout: {
      xaxis: axis({ title: axisTitle('travel, %'), range: padded(x.low, x.high, 0.04, 0.04) }),
      yaxis: axis({ range: padded(y.low, y.high, 0.08, 0.12) }),
    },
    height: 420,
  });
}
