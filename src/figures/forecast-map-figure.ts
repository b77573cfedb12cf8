/** The cycle over controller gain and integral time: PV swing as colour, period and swing in each place. */
import { duration } from '../assessment/make-answer-card';
import type { ForecastResult, MapPlace } from '../forecast/forecast';
import { notToLoad } from '../forecast/forecast-card';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName, plainText } from './layout';
import { fontSize, misfitScale, palette } from './palette';
import { plain, short } from './plain-numbers';

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
      ? [
          {
            type: 'rect',
            x0: column - 0.5,
            x1: column + 0.5,
            y0: row - 0.5,
            y1: row + 0.5,
            line: { color: palette.ink, width: 2.5 },
          },
        ]
      : [];
  const place = (i: number, k: number): MapPlace => map[i]![k]!;
  return makeFigure({
    id: 'forecast-map',
    title: `${loop}: the cycle over controller settings`,
    caption: `In each place the period, ${minutes ? 'min' : 's'}, above the PV swing${pvUnit === '' ? '' : `, ${pvUnit}`}; the darker, the smaller the swing. The frame is today. It goes on at ${goingOn.length} of ${stable.length} stable places${margins.length > 0 ? `; their gain margins are from ${short(Math.min(...margins), 2)} to ${short(Math.max(...margins), 2)}` : ''}. "no cycle" may also mean that the valve moves so seldom that the cycle is not told from drift.`,
    alt: `Map of the forecast cycle of ${loop} over gain and integral time: it goes on at ${goingOn.length} of ${stable.length} stable settings.`,
    caveats: [notToLoad],
    legend: false,
    data: [
      {
        type: 'heatmap',
        x: gains.map((_, k) => k),
        y: times.map((_, i) => i),
        z: map.map((line) => line.map(({ pvSwing }) => (pvSwing === null ? null : plain([pvSwing])[0]))),
        text: map.map((line) => line.map(told)),
        customdata: map.map((line, i) =>
          line.map((_, k) => {
            const { gain, integralTime, gainMargin } = place(i, k);
            return `gain ${short(gain)}, integral time ${duration(integralTime)}<br>gain margin ${gainMargin === null ? 'any' : short(gainMargin, 2)}`;
          }),
        ),
        texttemplate: '%{text}',
        textfont: { size: fontSize.small - 1, color: palette.ink },
        hovertemplate: '%{customdata}<extra></extra>',
        colorscale: misfitScale,
        showscale: false,
        xgap: 2,
        ygap: 2,
        hoverongaps: false,
      },
    ],
    annotations: [
      panelName('integral time', 'y'),
      // A place without a swing has no colour, and its words would not be drawn with the others.
      ...map.flatMap((line, i) =>
        line.flatMap((one, k) =>
          one.pvSwing === null
            ? [
                {
                  x: k,
                  y: i,
                  text: told(one),
                  showarrow: false,
                  font: { size: fontSize.small - 1, color: palette.faint },
                },
              ]
            : [],
        ),
      ),
    ],
    layout: {
      shapes: here,
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
