/** The cycle of OP in two views: autocorrelation over the lag, and power over the period. */
import type { Findings } from '../assessment/findings';
import { duration } from '../assessment/make-answer-card';
import { recordCaveats } from './caveats';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName } from './layout';
import { fontSize, lineWidth, palette } from './palette';
import { plain, short } from './plain-numbers';
import { thin } from './thin';

/** Periods of the autocorrelation shown: enough to see whether it dies away. */
const periodsShown = 8;

export function cycleFigure(findings: Findings): Figure {
  const { record, opCycle } = findings;
  const { period, others } = opCycle;
  const { lag, value } = opCycle.autocorrelation;
  const until = period === null ? Number.POSITIVE_INFINITY : periodsShown * period;
  let shown = lag.length;
  while (shown > 1 && lag[shown - 1] > until) shown--;
  const lags = thin(value.subarray(0, shown));
  const power = powerOverPeriod(opCycle.spectrum.frequency, opCycle.spectrum.power);
  const inMinutes = (period ?? lag[shown - 1] ?? 0) > 100;
  const scale = inMinutes ? 1 / 60 : 1;
  const unit = inMinutes ? 'min' : 's';

  const regular =
    opCycle.regularity === null ? '' : ` Regularity ${short(opCycle.regularity)} (above 1 is regular).`;
  const more = others.length === 0 ? '' : ` Further periods: ${others.map(duration).join(', ')}.`;
  const annotations: object[] = [
    panelName('autocorrelation of OP', 'y'),
    panelName('power of OP, share of the largest', 'y2'),
  ];
  const shapes: object[] = [];
  if (period !== null) {
    annotations.push(periodLabel(period * scale, 'x', 'y', `period ${duration(period)}`));
    annotations.push(periodLabel(Math.log10(period * scale), 'x2', 'y2', duration(period)));
    shapes.push(
      periodLine(period * scale, 'x', 'y', 'solid'),
      periodLine(period * scale, 'x2', 'y2', 'solid'),
    );
    for (const other of others) shapes.push(periodLine(other * scale, 'x2', 'y2', 'dot'));
  }
  return makeFigure({
    id: 'cycle',
    title: `${record.loop}: is there a cycle?`,
    caption: `${opCycle.why}${regular}${more} Above, a cycle that repeats shows as a wave that hardly dies away; below, as one tall narrow peak at its period.`,
    alt: `Autocorrelation and spectrum of OP of ${record.loop}. ${period === null ? 'No cycle is called.' : `Period ${duration(period)}, ${opCycle.cycles} cycles.`}${more}`,
    caveats: recordCaveats(findings),
    data: [
      {
        type: 'scatter',
        mode: 'lines',
        x: plain(
          Float64Array.from(lag, (seconds) => seconds * scale),
          lags,
        ),
        y: plain(value, lags),
        line: { color: palette.op, width: lineWidth.signal },
        hovertemplate: `%{y:.2f} at %{x:.4g} ${unit}<extra></extra>`,
      },
      {
        type: 'scatter',
        mode: 'lines',
        xaxis: 'x2',
        yaxis: 'y2',
        x: plain(power.period.map((seconds) => seconds * scale)),
        y: plain(power.share),
        line: { color: palette.op, width: lineWidth.signal },
        fill: 'tozeroy',
        fillcolor: 'rgba(156,61,20,0.15)',
        hovertemplate: `%{y:.2f} at %{x:.4g} ${unit}<extra></extra>`,
      },
    ],
    annotations,
    layout: {
      xaxis: axis({ anchor: 'y', title: axisTitle(`lag, ${unit}`), rangemode: 'tozero' }),
      xaxis2: axis({
        anchor: 'y2',
        type: 'log',
        title: axisTitle(`period, ${unit} (log scale)`),
        dtick: 'D2',
      }),
      yaxis: axis({ domain: [0.62, 1], range: [-1.05, 1.05], zeroline: true, zerolinecolor: palette.grid }),
      yaxis2: axis({ anchor: 'x2', domain: [0, 0.36], range: [0, 1.12] }),
      shapes,
    },
    height: 520,
    legend: false,
  });
}

/** Power by period, longest last, the highest in each of 300 steps of the log period, as a share of the largest. */
function powerOverPeriod(
  frequency: Float64Array,
  power: Float64Array,
): { period: number[]; share: number[] } {
  const steps = 300;
  const first = frequency.findIndex((value) => value > 0);
  if (first < 0) return { period: [], share: [] };
  const longest = Math.log(1 / frequency[first]);
  const shortest = Math.log(1 / frequency[frequency.length - 1]);
  const best = new Int32Array(steps).fill(-1);
  let largest = 0;
  for (let i = first; i < frequency.length; i++) {
    const place = (Math.log(1 / frequency[i]) - shortest) / (longest - shortest || 1);
    const step = Math.min(steps - 1, Math.floor(place * steps));
    if (best[step] < 0 || power[i] > power[best[step]]) best[step] = i;
    largest = Math.max(largest, power[i]);
  }
  const kept = Array.from(best.filter((i) => i >= 0));
  return {
    period: kept.map((i) => 1 / frequency[i]),
    share: kept.map((i) => (largest > 0 ? power[i] / largest : 0)),
  };
}

function periodLine(x: number, xref: string, y: string, dash: string): object {
  return {
    type: 'line',
    xref,
    yref: `${y} domain`,
    x0: x,
    x1: x,
    y0: 0,
    y1: 1,
    line: { color: palette.ink, width: lineWidth.thin, dash },
  };
}

function periodLabel(x: number, xref: string, y: string, text: string): object {
  return {
    x,
    y: 1,
    xref,
    yref: `${y} domain`,
    xanchor: 'left',
    yanchor: 'top',
    xshift: 3,
    showarrow: false,
    text,
    font: { size: fontSize.small, color: palette.ink },
    bgcolor: 'rgba(255,255,255,0.8)',
  };
}
