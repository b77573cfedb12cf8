/** The cycle over controller gain and integral time: PV swing as colour, period and swing in each place. */
import { duration } from '../assessment/make-answer-card';
import type { ForecastResult, MapPlace } from '../forecast/forecast';
import { notToLoad } from '../forecast/forecast-card';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName, plainText } from './layout';
import { colourAt, fontSize, misfitScale, palette } from './palette';
import { extent, short } from './plain-numbers';

/** null when the forecast was refused, or the controller has no integral action. */
export function forecastMapFigure(result: ForecastResult): Figure | null {
  const { forecast, loop, pvUnit } = result;
  if (forecast === null || forecast.map.length === 0) return null;
  const { map, now } = forecast;
  const places = map.flat();
  const minutes = forecast.record.period >= 120;
  const gains = map[0]!.map(({ gain }) => plainText(short(gain, 2)));
  const times = map.map((row) => plainText(duration(Number(row[0]!.integralTime.toPrecision(2)))));
  const told = (place: MapPlace): string => {
    if (!place.stable) return 'not<br>stable';
    if (place.period === null || place.pvSwing === null) return 'no<br>cycle';
    return `${short(place.period / (minutes ? 60 : 1), 2)}<br>${short(place.pvSwing, 2)}`;
  };
  const stable = places.filter((place) => place.stable);
  const goingOn = stable.filter(({ cycles }) => cycles);
  const margins = stable.flatMap(({ gainMargin }) => gainMargin ?? []);
  const column = map[0]!.findIndex(({ gain }) => Math.abs(gain / now.gain - 1) < 1e-6);
  const row = map.findIndex(
    (line) => Math.abs(line[0]!.integralTime / (now.integralTime ?? Number.NaN) - 1) < 1e-6,
  );
  const here =
    column >= 0 && row >= 0
      ? [{ ...rectangle(column, row, 0), line: { color: palette.ink, width: 2.5 } }]
      : [];
  const cells = map.flatMap((line, i) => line.map((place, k) => ({ i, k, place })));
  const swings = extent(places.flatMap(({ pvSwing }) => pvSwing ?? []));
  // Rectangles and not a heat map, which needs a canvas where pictures are made without a browser.
  const grounds = cells.flatMap(({ i, k, place: { pvSwing } }) =>
    pvSwing === null
      ? []
      : [
          {
            ...rectangle(k, i, gap),
            line: { width: 0 },
            fillcolor: colourAt(misfitScale, (pvSwing - swings.low) / (swings.high - swings.low || 1)),
            layer: 'below',
          },
        ],
  );
  return makeFigure({
    id: 'forecast-map',
    title: `${loop}: cycle by settings`,
    caption: `In each place the period, ${minutes ? 'min' : 's'}, above the PV swing${pvUnit === '' ? '' : `, ${pvUnit}`}; the darker, the smaller the swing. The frame is today. It goes on at ${goingOn.length} of ${stable.length} stable places${margins.length > 0 ? `; their gain margins are from ${short(Math.min(...margins), 2)} to ${short(Math.max(...margins), 2)}` : ''}. "no cycle" may also mean that the valve moves so seldom that the cycle is not told from drift.`,
    alt: `Map of the forecast cycle of ${loop} over gain and integral time: it goes on at ${goingOn.length} of ${stable.length} stable settings.`,
    caveats: [notToLoad],
    legend: false,
    data: [
      {
        type: 'scatter',
        mode: 'text',
        x: cells.map(({ k }) => k),
        y: cells.map(({ i }) => i),
        text: cells.map(({ place }) => told(place)),
        textfont: { size: fontSize.small - 1, color: palette.ink },
        customdata: cells.map(({ place: { gain, integralTime, gainMargin } }) =>
          plainText(
            `gain ${short(gain)}, integral time ${duration(integralTime)}, gain margin ${gainMargin === null ? 'any' : short(gainMargin, 2)}`,
          ),
        ),
        hovertemplate: '%{customdata}<extra></extra>',
      },
    ],
    annotations: [panelName('integral time', 'y')],
    layout: {
      shapes: [...grounds, ...here],
      xaxis: axis({
        title: axisTitle('controller gain, % of OP per PV unit'),
        tickvals: gains.map((_, k) => k),
        ticktext: gains,
        showgrid: false,
        range: [-0.5, gains.length - 0.5],
      }),
      yaxis: axis({
        tickvals: times.map((_, i) => i),
        ticktext: times,
        showgrid: false,
        range: [times.length - 0.5, -0.5],
      }),
    },
    height: 120 + 46 * map.length,
  });
}

/** Share of a place that stays white at each of its edges. */
const gap = 0.03;

function rectangle(k: number, i: number, inset: number): object {
  const half = 0.5 - inset;
  return { type: 'rect', x0: k - half, x1: k + half, y0: i - half, y1: i + half };
}
