/** The cycle of OP in two views: autocorrelation over the lag, and power over the period. */
import type { Findings } from '../assessment/findings';
import { duration } from '../assessment/make-answer-card';
import { recordCaveats } from './caveats';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName } from './layout';
import { lineWidth, palette } from './palette';
import { plain } from './plain-numbers';
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

  const more = others.length === 0 ? '' : ` Further periods (dotted): ${others.map(duration).join(', ')}.`;
  const named = period === null ? '' : `; line: ${duration(period)}`;
  const shapes: object[] = [];
  if (period !== null) {
    shapes.push(
      periodLine(period * scale, 'x', 'y', 'solid'),
      periodLine(period * scale, 'x2', 'y2', 'solid'),
    );
  }
  for (const other of others) shapes.push(periodLine(other * scale, 'x2', 'y2', 'dot'));
  return makeFigure({
    id: 'cycle',
    title: `${record.loop}: is there a cycle?`,
    caption: `${opCycle.why}${more} Above, a cycle that repeats shows as a wave that hardly dies away; below, as one tall narrow peak at its period.`,
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
    annotations: [
      panelName(`autocorrelation of OP${named}`, 'y'),
      panelName(`power of OP, share of the largest${named}`, 'y2'),
    ],
    layout: {
      xaxis: axis({ anchor: 'y', title: axisTitle(`lag, ${unit}`), rangemode: 'tozero' }),
      xaxis2: axis({
        anchor: 'y2',
        type: 'log',
        title: axisTitle(`period, ${unit} (log scale)`),
        ...decades(power.period, scale),
      }),
      yaxis: axis({ domain: [0.6, 1], range: [-1.05, 1.05], zeroline: true, zerolinecolor: palette.grid }),
      yaxis2: axis({ anchor: 'x2', domain: [0, 0.4], range: [0, 1.12] }),
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

/** Ticks at 1 and 3 of every decade, written out. */
function decades(periods: readonly number[], scale: number): object {
  const tickvals: number[] = [];
  const last = scale * Math.max(...periods, 1);
  for (
    let decade = 10 ** Math.floor(Math.log10(scale * Math.min(...periods, 1)));
    decade <= last;
    decade *= 10
  ) {
    tickvals.push(Number(decade.toPrecision(1)), Number((3 * decade).toPrecision(1)));
  }
  return { tickvals, ticktext: tickvals.map(String) };
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
