/** Period and PV swing of the cycle now, at other settings and after repair, each with its band. */
import { duration } from '../assessment/make-answer-card';
import type { CycleForecast, ForecastResult, SettingForecast } from '../forecast/forecast';
import { notToLoad } from '../forecast/forecast-card';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName, plainText, withUnit } from './layout';
import { fontSize, palette } from './palette';
import { plain, short } from './plain-numbers';

/** null when the forecast was refused. */
export function forecastFigure(result: ForecastResult): Figure | null {
  const { forecast, loop, pvUnit } = result;
  if (forecast === null) return null;
  const { record, now, others, withoutIntegral, integralDeadBand, repaired } = forecast;
  const rows: { name: string; of: CycleForecast }[] = [
    { name: 'today, simulated', of: now },
    ...others.map((other) => ({ name: settingName(other), of: other })),
    ...(withoutIntegral ? [{ name: 'no integral action', of: withoutIntegral }] : []),
    ...(integralDeadBand
      ? [{ name: `integral dead band ${short(integralDeadBand.width, 2)}`, of: integralDeadBand }]
      : []),
    { name: 'valve repaired', of: repaired },
  ];
  const minutes = record.period >= 120;
  const perUnit = minutes ? 60 : 1;
  const longest = Math.max(...rows.map(({ of }) => of.period?.high ?? 0)) / perUnit;
  const largest = Math.max(...rows.map(({ of }) => of.pvSwing.high), record.pvSwing);
  const points = (
    kept: readonly (typeof rows)[number][],
    x: (of: CycleForecast) => { value: number; low: number; high: number },
    place: { xaxis: string; yaxis: string },
    look: { name: string; color: string; symbol: string; legend: boolean },
    unit: string,
  ): object => ({
    type: 'scatter',
    mode: 'markers',
    name: look.name,
    showlegend: look.legend,
    ...place,
    x: plain(kept.map(({ of }) => x(of).value)),
    y: kept.map((row) => rows.indexOf(row)),
    customdata: kept.map(({ name }) => plainText(name)),
    error_x: {
      type: 'data',
      symmetric: false,
      array: plain(kept.map(({ of }) => x(of).high - x(of).value)),
      arrayminus: plain(kept.map(({ of }) => x(of).value - x(of).low)),
      color: look.color,
      thickness: 2,
      width: 4,
    },
    marker: { symbol: look.symbol, size: 9, color: look.color, line: { color: look.color, width: 2 } },
    hovertemplate: `%{x:.3g} ${plainText(unit)}<extra>%{customdata}</extra>`,
  });
  const cycling = rows.filter(({ of }) => of.cycles);
  const quiet = rows.filter(({ of }) => !of.cycles);
  const bottom = { xaxis: 'x2', yaxis: 'y2' };
  const goesOn = { name: 'goes on cycling', color: palette.op, symbol: 'circle' };
  const ends = { name: 'no cycle: what noise and drift leave', color: palette.pv, symbol: 'circle-open' };
  const swing = (of: CycleForecast): CycleForecast['pvSwing'] => of.pvSwing;
  const today = (x: number, xref: string, yref: string): object => ({
    type: 'line',
    xref,
    yref: `${yref} domain`,
    x0: x,
    x1: x,
    y0: 0,
    y1: 1,
    line: { color: palette.faint, width: 1, dash: '4px,4px' },
    layer: 'below',
  });
  const timeUnit = minutes ? 'min' : 's';
  return makeFigure({
    id: 'forecast',
    title: `${loop}: what each change would do`,
    caption: `Simulated with the fitted valve and process; bars are 90 % bands, the dashed line is the record of today. Where nothing cycles there is no period, and PV's movement within ${duration(record.period)} is shown. ${notToLoad}`,
    alt: `Forecast for ${loop}: ${rows.map(({ name, of }) => `${name} ${of.period ? duration(of.period.value) : 'no cycle'}, PV ${short(of.pvSwing.value)} ${pvUnit}`).join('; ')}.`,
    caveats: [notToLoad, 'Forecast from operating data, not a test.'],
    data: [
      points(
        cycling,
        (of) => scaled(of.period!, perUnit),
        { xaxis: 'x', yaxis: 'y' },
        { ...goesOn, legend: true },
        timeUnit,
      ),
      points(cycling, swing, bottom, { ...goesOn, legend: false }, pvUnit),
      points(quiet, swing, bottom, { ...ends, legend: true }, pvUnit),
    ],
    annotations: [
      panelName(`period, ${timeUnit}`, 'y'),
      panelName(withUnit('PV swing', pvUnit), 'y2'),
      ...rows.flatMap(({ name }, i) => [rowName(name, i, 'y'), rowName(name, i, 'y2')]),
    ],
    layout: {
      shapes: [today(record.period / perUnit, 'x', 'y'), today(record.pvSwing, 'x2', 'y2')],
      xaxis: axis({ anchor: 'y', range: plain([0, 1.05 * longest]) }),
      xaxis2: axis({
        anchor: 'y2',
        title: axisTitle(withUnit('peak to peak', pvUnit)),
        range: plain([0, 1.05 * largest]),
      }),
      yaxis: axis({ domain: [0.56, 1], ...places(rows.length) }),
      yaxis2: axis({ anchor: 'x2', domain: [0, 0.44], ...places(rows.length) }),
    },
    height: 130 + 72 * rows.length,
  });
}

function settingName({ gain, integralTime }: SettingForecast): string {
  return `gain ${short(gain)}, ${integralTime === null ? 'no integral' : duration(integralTime)}`;
}

/** Rows from top to bottom; their names stand in the plot, so that a small screen has room for the bars. */
function places(count: number): object {
  return { range: [count - 0.5, -0.8], showticklabels: false, ticks: '', showgrid: false, tickvals: [] };
}

function rowName(name: string, row: number, y: string): object {
  return {
    xref: 'paper',
    yref: y,
    x: 0,
    y: row,
    xanchor: 'left',
    yanchor: 'bottom',
    xshift: 3,
    yshift: 5,
    showarrow: false,
    text: plainText(name),
    font: { size: fontSize.small, color: palette.ink },
  };
}

function scaled(
  { value, low, high }: { value: number; low: number; high: number },
  by: number,
): { value: number; low: number; high: number } {
  return { value: value / by, low: low / by, high: high / by };
}
