/** Picks stretches of a record for plots of one signal against another, and draws them with time as colour. */
import type { Cycle } from '../oscillation/cycle';
import type { RecordClock } from './clock';
import { colourAt, lineWidth, timeScale } from './palette';
import { plain } from './plain-numbers';

/** Samples `from` to `to` (both drawn), every `step`-th of them. */
export interface Stretch {
  readonly from: number;
  readonly to: number;
  readonly step: number;
}

/** Curves that the eye still tells apart, and points drawn of each. */
const mostStretches = 18;
const pointsEach = 110;

/**
 * Stretches spread evenly over the record. A record of up to about 2000 samples is shown whole, cut into stretches
 * that touch; of a longer one each stretch is a cycle and a bit, so that the loops stay apart.
 */
export function timeStretches(samples: number, samplePeriod: number, cycle: Cycle): Stretch[] {
  const count = Math.max(1, Math.min(mostStretches, Math.floor(samples / 8)));
  const share = (samples - 1) / count;
  const wanted =
    samples <= count * pointsEach
      ? share
      : Math.min(share, Math.max(pointsEach, (1.1 * (cycle.period ?? 0)) / samplePeriod));
  const between = count > 1 ? (samples - 1 - wanted) / (count - 1) : 0;
  const stretches: Stretch[] = [];
  for (let i = 0; i < count; i++) {
    const from = Math.round(i * between);
    const to = Math.min(samples - 1, Math.round(i * between + wanted));
    stretches.push({ from, to, step: Math.max(1, Math.ceil((to - from) / pointsEach)) });
  }
  return stretches;
}

/** What the stretches show, for a caption. */
export function stretchesInWords(stretches: readonly Stretch[]): string {
  const whole = stretches.every(({ to, step }, i) => step === 1 && !(to < stretches[i + 1]?.from));
  return whole
    ? 'Early in the record light, late dark.'
    : `${stretches.length} stretches spread over the record, early light, late dark.`;
}

function indicesOf({ from, to, step }: Stretch): number[] {
  const indices: number[] = [];
  for (let i = from; i <= to; i += step) indices.push(i);
  return indices;
}

/**
 * The traces of `y` against `x`, light for early and dark for late. The first, the middle and the last stand in the
 * legend with their clock times, which keeps its place on screens of any width better than a bar of colours.
 */
export function timeColoured(
  x: Float64Array,
  y: Float64Array,
  stretches: readonly Stretch[],
  clock: RecordClock,
  samplePeriod: number,
): object[] {
  const last = stretches.length - 1;
  const named = [0, Math.round(last / 2), last];
  return stretches.map((stretch, i) => {
    const indices = indicesOf(stretch);
    const time = clock.text(stretch.from * samplePeriod);
    return {
      type: 'scatter',
      mode: 'lines',
      x: plain(x, indices),
      y: plain(y, indices),
      line: { color: colourAt(timeScale, last > 0 ? i / last : 0), width: lineWidth.signal },
      name: i === 0 ? `early, ${time}` : i === last ? `late, ${time}` : time,
      showlegend: named.includes(i),
      hovertemplate: `%{y:.4g} at %{x:.4g}<extra>${time}</extra>`,
    };
  });
}
