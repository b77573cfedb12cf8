/** Picks stretches of a record for plots of one signal against another, and draws them with time as colour. */
import type { Cycle } from '../oscillation/cycle';
import type { RecordClock } from './clock';
import { colourAt, fontSize, lineWidth, palette, timeScale } from './palette';
import { plain } from './plain-numbers';

/** Samples `from` to `to` (both drawn), every `step`-th of them. */
export interface Stretch {
  readonly from: number;
  readonly to: number;
  readonly step: number;
}

/** Points drawn of each stretch. */
const pointsEach = 110;

/**
 * Stretches spread evenly over the record, at most `most` of them (default 18, which the eye still tells apart). A
 * record of up to about 2000 samples is shown whole, cut into stretches that touch; of a longer one each stretch is a
 * cycle and a bit, so that the loops stay apart.
 */
export function timeStretches(samples: number, samplePeriod: number, cycle: Cycle, most = 18): Stretch[] {
  const count = Math.max(1, Math.min(most, Math.floor(samples / 8)));
  const share = (samples - 1) / count;
  const wanted =
    samples <= count * pointsEach
      ? share
      : Math.min(share, Math.max(pointsEach, (1.1 * (cycle.period ?? 0)) / samplePeriod));
  const stretches: Stretch[] = [];
  for (let i = 0; i < count; i++) {
    const from = Math.round(i * share + (share - wanted) / 2);
    const to = Math.min(samples - 1, Math.round(from + wanted));
    stretches.push({ from, to, step: Math.max(1, Math.ceil((to - from) / pointsEach)) });
  }
  return stretches;
}

/** Whether the stretches leave out part of the record. */
export function leavesOut(stretches: readonly Stretch[]): boolean {
  return stretches.some(
    ({ to, step }, i) => step > 1 || (i + 1 < stretches.length && to < stretches[i + 1].from),
  );
}

export function indicesOf({ from, to, step }: Stretch): number[] {
  const indices: number[] = [];
  for (let i = from; i <= to; i += step) indices.push(i);
  return indices;
}

/** The traces of `y` against `x`, light for early and dark for late, and the colour bar that says which is which. */
export function timeColoured(
  x: Float64Array,
  y: Float64Array,
  stretches: readonly Stretch[],
  clock: RecordClock,
  samplePeriod: number,
): { traces: object[]; coloraxis: object } {
  const last = (x.length - 1) * samplePeriod;
  const traces: object[] = stretches.map((stretch) => {
    const indices = indicesOf(stretch);
    const middle = ((stretch.from + stretch.to) / 2) * samplePeriod;
    return {
      type: 'scatter',
      mode: 'lines',
      x: plain(x, indices),
      y: plain(y, indices),
      line: { color: colourAt(timeScale, last > 0 ? middle / last : 0), width: lineWidth.signal },
      name: `${clock.text(stretch.from * samplePeriod)} to ${clock.text(stretch.to * samplePeriod)}`,
      hovertemplate: '%{y:.4g} at %{x:.4g}<extra>%{fullData.name}</extra>',
      showlegend: false,
    };
  });
  // A trace without a visible point carries the colour bar.
  traces.push({
    type: 'scatter',
    mode: 'markers',
    x: [null],
    y: [null],
    marker: { color: [0], coloraxis: 'coloraxis' },
    hoverinfo: 'skip',
    showlegend: false,
  });
  const marks = [0, last / 2, last];
  return {
    traces,
    coloraxis: {
      cmin: 0,
      cmax: last > 0 ? last : 1,
      colorscale: timeScale,
      colorbar: {
        orientation: 'h',
        x: 0,
        xanchor: 'left',
        y: 0,
        yref: 'container',
        yanchor: 'bottom',
        ypad: 4,
        thickness: 10,
        len: 1,
        outlinewidth: 0,
        tickvals: marks,
        ticktext: marks.map((mark) => clock.text(mark)),
        tickfont: { size: fontSize.small, color: palette.ink },
        ticks: '',
        title: { text: clock.title, side: 'top', font: { size: fontSize.small } },
      },
    },
  };
}
