/** Responses of a step test laid over each other as shares of their change, with dead time, T63 and T86 drawn in. */
import { withInterval } from '../assessment/make-answer-card';
import type { ValveTestFindings } from '../field-test/read-valve-test';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName } from './layout';
import { fontSize, lineWidth, palette } from './palette';
import { plain, short } from './plain-numbers';

/** Steps drawn at most, the largest changes first. */
const most = 6;
/** Times of T86 that are drawn. */
const shown = 4;

/** null where no step gave a time. */
export function testResponseFigure(findings: ValveTestFindings): Figure | null {
  const { record, step } = findings;
  if (!step) return null;
  const signal = record.travel ?? record.pv!;
  const timed = step.steps
    .map((one, i) => ({
      one,
      ...step.levels[i]!,
      until: step.steps[i + 1]?.time ?? Number.POSITIVE_INFINITY,
    }))
    .filter(({ one }) => one.T63 !== null && one.T86 !== null)
    .sort((a, b) => Math.abs(b.after - b.before) - Math.abs(a.after - a.before))
    .slice(0, most);
  if (timed.length === 0) return null;
  const { samplePeriod } = record;
  const longest = Math.max(...timed.map(({ one }) => one.T86!.high), 5 * samplePeriod);
  const samples = Math.ceil((shown * longest) / samplePeriod);
  const data: object[] = timed.map(({ one, before, after, until }) => {
    const at = Math.round(one.time / samplePeriod);
    const last = Math.min(signal.length, at + samples, Math.round(until / samplePeriod));
    const indices = Array.from({ length: last - at + 2 }, (_, i) => at - 2 + i).filter(
      (k) => k >= 0 && k < signal.length,
    );
    return {
      type: 'scatter',
      mode: 'lines+markers',
      name: `${short(one.from, 4)} to ${short(one.to, 4)} %`,
      x: plain(indices.map((k) => (k - at) * samplePeriod)),
      y: plain(indices.map((k) => (100 * (signal[k]! - before)) / (after - before))),
      line: { color: palette.travel, width: lineWidth.thin },
      marker: { color: palette.travel, size: 4 },
      opacity: 0.6,
      hovertemplate: '%{y:.3g} % after %{x:.3g} s<extra></extra>',
    };
  });
  const { T63, T86 } = step.overall;
  const level = (share: number): object => ({
    type: 'line',
    xref: 'paper',
    yref: 'y',
    x0: 0,
    x1: 1,
    y0: share,
    y1: share,
    line: { color: palette.faint, width: 1, dash: 'dot' },
  });
  const marks = [
    { share: 63.2, time: T63, label: 'T63' },
    { share: 86.5, time: T86, label: 'T86' },
  ].flatMap(({ share, time, label }) => (time ? [{ share, time, label }] : []));
  data.push({
    type: 'scatter',
    mode: 'markers',
    name: 'T63 and T86, mean',
    x: plain(marks.map(({ time }) => time.value)),
    y: plain(marks.map(({ share }) => share)),
    error_x: {
      type: 'data',
      symmetric: false,
      array: plain(marks.map(({ time }) => time.high - time.value)),
      arrayminus: plain(marks.map(({ time }) => time.value - time.low)),
      color: palette.ink,
      thickness: 1.4,
    },
    marker: { symbol: 'diamond', size: 9, color: palette.model, line: { color: palette.ink, width: 1 } },
    hovertemplate: '%{x:.3g} s<extra></extra>',
  });
  const said = marks.map(({ label, time }) => `${label} ${withInterval(time)}`).join(', ');
  return makeFigure({
    id: 'test-response',
    title: `${record.loop}: response to steps`,
    caption: `The ${timed.length} largest changes of ${step.watched} as shares of what they came to; the times count from the first sample that shows the new command. ${said}, means over all steps that gave a time, with 90 % intervals.`,
    alt: `Step responses of ${record.loop}: ${said}.`,
    caveats:
      longest <= 5 * samplePeriod
        ? ['The response is hardly slower than the sampling, so that times are bounds.']
        : [],
    data,
    annotations: [
      panelName('share of the lasting change, %', 'y'),
      ...marks.map(({ share, label }) => ({
        xref: 'paper',
        yref: 'y',
        x: 1,
        y: share,
        xanchor: 'right',
        yanchor: 'bottom',
        showarrow: false,
        text: `${label}: ${share} %`,
        font: { size: fontSize.small, color: palette.faint },
      })),
    ],
    layout: {
      xaxis: axis({ title: axisTitle('time since the step, s') }),
      yaxis: axis({}),
      shapes: [level(63.2), level(86.5)],
    },
    legend: false,
    height: 360,
  });
}
