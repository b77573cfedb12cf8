/** S and J of a valve along the calendar, window by window, with the change of S where one is shown. */

import type { StictionTrack, StictionWindow } from '../audit/track-stiction';
import type { Estimate } from '../estimate/stiction-fit';
import { clockFrom, type RecordClock } from './clock';
import type { Figure } from './figure';
import { axis, makeFigure, panelName, timeAxis } from './layout';
import { lineWidth, palette } from './palette';
import { padded, plain } from './plain-numbers';

export function stictionOverTimeFigure(track: StictionTrack): Figure {
  const { loop, start, windows, change, reasons } = track;
  const seconds = windows[windows.length - 1]!.to;
  const clock = clockFrom(start, seconds);
  const withS = windows.filter(({ S }) => S !== null);
  const withJ = windows.filter(({ J }) => J !== null);
  const refused = windows.filter(({ S }) => S === null);
  const ends = windows.flatMap(({ S, J }) => [S, J].flatMap((one) => (one ? [one.low, one.high] : [])));
  const highest = Math.max(0, ...ends) || 1;

  const data: object[] = [
    estimates('S', withS, ({ S }) => S!, clock, palette.op, 'circle'),
    estimates('J', withJ, ({ J }) => J!, clock, palette.travel, 'diamond-open'),
  ];
  if (refused.length > 0) {
    data.push({
      type: 'scatter',
      mode: 'markers',
      name: 'no numbers',
      x: refused.map((window) => clock.at(middle(window))),
      y: refused.map(() => 0),
      customdata: refused.map(({ refused: [first] }) => first ?? ''),
      marker: { symbol: 'x-thin', size: 8, line: { color: palette.faint, width: 2 } },
      hovertemplate: 'no numbers at %{x}: %{customdata}<extra></extra>',
    });
  }
  const course = courseOf(track);
  if (course.length > 0) {
    data.push({
      type: 'scatter',
      mode: 'lines',
      name: change.since === null ? 'mean of S' : 'course of S',
      x: course.map(({ at }) => clock.at(at)),
      y: plain(course.map(({ value }) => value)),
      line: { color: palette.model, width: lineWidth.strong },
      hoverinfo: 'skip',
    });
  }
  const told = reasons.join(' ');
  return makeFigure({
    id: 'stiction-over-time',
    title: `${loop}: S and J over time`,
    caption: `Each point is one window of the record, fitted on its own, with its 90 % interval. ${change.since === null ? '' : 'The band is the 90 % interval of the moment of the change. '}${told}`,
    alt: `S and J of ${loop} in ${windows.length} windows from ${clock.at(0)} to ${clock.at(seconds)}. ${told}`,
    caveats: [
      ...(change.says === 'cannot tell'
        ? [`Too few windows give S to tell whether it changes (${withS.length} of ${windows.length}).`]
        : []),
      'A change of load, tuning or logging can move S as well. Estimates from operating data, not a test of the valve.',
    ],
    data,
    annotations: [panelName('S and J, % of OP span', 'y')],
    layout: {
      xaxis: { ...timeAxis(clock, 'y'), range: [clock.at(-0.03 * seconds), clock.at(1.03 * seconds)] },
      yaxis: axis({ range: padded(0, highest, 0.06, 0.06) }),
      shapes: change.since === null ? [] : [band(change.since, clock)],
    },
    height: 360,
  });
}

const middle = ({ from, to }: StictionWindow): number => (from + to) / 2;

function estimates(
  name: string,
  windows: readonly StictionWindow[],
  of: (window: StictionWindow) => Estimate,
  clock: RecordClock,
  color: string,
  symbol: string,
): object {
  const all = windows.map(of);
  return {
    type: 'scatter',
    mode: 'markers',
    name,
    x: windows.map((window) => clock.at(middle(window))),
    y: plain(all.map(({ value }) => value)),
    error_y: {
      type: 'data',
      symmetric: false,
      array: plain(all.map(({ value, high }) => high - value)),
      arrayminus: plain(all.map(({ value, low }) => value - low)),
      color,
      thickness: lineWidth.thin,
      width: 3,
    },
    marker: { symbol, size: 7, color },
    hovertemplate: `%{y:.3g} % at %{x}<extra>${name}</extra>`,
  };
}

/** Corners of what the change says of S. */
function courseOf({ change, windows }: StictionTrack): { readonly at: number; readonly value: number }[] {
  const { before, after, since, shape } = change;
  if (before === null || after === null) return [];
  const withS = windows.filter(({ S }) => S !== null);
  const first = withS[0]!.from;
  // A slope is fitted to the middles of the windows and reaches its last level there.
  const last = shape === 'slope' ? middle(withS[withS.length - 1]!) : withS[withS.length - 1]!.to;
  if (since === null) {
    return [
      { at: first, value: before },
      { at: last, value: before },
    ];
  }
  return [
    { at: first, value: before },
    { at: since.value, value: before },
    ...(shape === 'step' ? [{ at: since.value, value: after }] : []),
    { at: last, value: after },
  ];
}

function band({ low, high }: { readonly low: number; readonly high: number }, clock: RecordClock): object {
  return {
    type: 'rect',
    xref: 'x',
    x0: clock.at(low),
    x1: clock.at(high),
    yref: 'paper',
    y0: 0,
    y1: 1,
    fillcolor: palette.stampGround,
    line: { color: palette.stampEdge, width: 1, dash: 'dot' },
    layer: 'below',
  };
}
