/** The fitted valve's own loop, travel against OP, with dead band and slip jump drawn in as dimensions. */
import type { Findings } from '../assessment/findings';
import { withInterval } from '../assessment/make-answer-card';
import type { ValveModel } from '../valve/two-parameter';
import { fitCaveats } from './caveats';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName } from './layout';
import { fontSize, lineWidth, palette } from './palette';
import { plain, short } from './plain-numbers';
import { indicesOf, timeStretches } from './time-stretches';

/** A jump smaller than this share of the swing is drawn as none: its dimension would be two arrow heads. */
const smallestJump = 0.02;

/** null when nothing could be fitted. */
export function valveLoopFigure(findings: Findings): Figure | null {
  const { record, opCycle, stiction } = findings;
  const fit = stiction.drawn;
  if (fit === null) return null;
  const S = fit.S.value;
  const J = Math.min(fit.jumpDrawn, S);
  const { low, high, enlarged } = drawnSwing(record.op, opCycle.amplitude, S);
  const offset = travelOffset(record.op, fit.modelTravel);
  const loop = valveLoop(fit.model, S, J, low, high);
  const travel = loop.y.map((value) => value + offset);
  const turn = loop.x.indexOf(Math.max(...loop.x));
  const right = loop.x[turn];
  const top = travel[turn];
  const left = loop.x[0];
  const bottom = travel[0];
  const height = Math.max(top - bottom, S / 4);
  const width = right - left;

  const stretches = timeStretches(record.op.length, record.samplePeriod, opCycle, 8);
  const indices = stretches.flatMap((stretch) => [...indicesOf(stretch), Number.NaN]);
  const quoted = stiction.fit !== null;
  const sText = quoted ? withInterval(fit.S) : 'numbers withheld';
  const jText = !quoted ? 'numbers withheld' : fit.J ? withInterval(fit.J) : 'not resolved';
  const above = top + 0.16 * height;
  const data: object[] = [
    {
      type: 'scatter',
      mode: 'lines',
      name: fit.travelSource === 'measured' ? 'measured travel' : 'travel, reconstructed',
      x: plain(record.op, indices),
      y: plain(fit.travel, indices),
      line: { color: palette.travel, width: lineWidth.thin },
      opacity: 0.35,
      hovertemplate: '%{y:.4g} at OP %{x:.4g}<extra></extra>',
    },
    {
      type: 'scatter',
      mode: 'lines',
      name: 'fitted valve',
      x: plain(loop.x),
      y: plain(travel),
      line: { color: palette.model, width: lineWidth.strong },
      hovertemplate: '%{y:.4g} at OP %{x:.4g}<extra>fitted valve</extra>',
    },
  ];
  if (quoted) {
    data.push({
      type: 'scatter',
      mode: 'lines',
      name: '90 % interval of S',
      x: plain([right - fit.S.high, right - fit.S.low]),
      y: plain([above, above]),
      line: { color: palette.model, width: 9 },
      opacity: 0.5,
      hoverinfo: 'skip',
    });
  }
  const annotations: object[] = [
    panelName('travel, %', 'y'),
    dimension(right - S, above, right, above),
    label(right - S / 2, top + 0.21 * height, `<b>dead band S</b>  ${sText}`, 'center', 'bottom'),
  ];
  const jumpAt = left + S;
  const beside = jumpAt + 0.05 * width;
  if (J > smallestJump * width) annotations.push(dimension(beside, bottom, beside, bottom + J));
  annotations.push(
    label(
      beside,
      bottom - 0.05 * height,
      `<b>slip jump J</b>  ${jText}`,
      anchorFor(beside, left, right),
      'top',
    ),
  );

  const drawnFor = enlarged
    ? `an OP swing of ${short(right - left)} %, enlarged because the usual swing would not move this valve`
    : `the usual OP swing of about ${short(right - left)} %`;
  return makeFigure({
    id: 'valve-loop',
    title: `${record.loop}: the fitted valve`,
    caption: `Travel against OP of the fitted valve, drawn for ${drawnFor}; behind it the ${fit.travelSource} travel. After a reversal OP must move by the dead band S before the stem moves, and then it jumps by J.`,
    alt: `Loop of the fitted valve of ${record.loop} (${fit.model}): dead band S ${sText}, slip jump J ${jText}.`,
    caveats: fitCaveats(findings),
    data,
    annotations,
    layout: {
      xaxis: axis({ title: axisTitle('OP, % of span'), range: paddedRange(left, right, 0.12, 0.12) }),
      yaxis: axis({ range: paddedRange(bottom, bottom + height, 0.28, 0.42) }),
    },
    width: 460,
    height: 460,
  });
}

/** The ends of the OP swing to draw: the usual swing of the record, but enough to move the valve. */
function drawnSwing(
  op: Float64Array,
  amplitude: number | null,
  S: number,
): { low: number; high: number; enlarged: boolean } {
  const sorted = Float64Array.from(op).sort();
  const quantile = (share: number): number => sorted[Math.round(share * (sorted.length - 1))];
  const usual = amplitude === null ? quantile(0.95) - quantile(0.05) : 2 * amplitude;
  const swing = Math.max(usual, 1.15 * S);
  const middle = quantile(0.5);
  return { low: middle - swing / 2, high: middle + swing / 2, enlarged: swing > usual };
}

/** Travel of the model lies within (S + J)/2 of OP on either side; the middle of that band is the offset between them. */
function travelOffset(op: Float64Array, modelTravel: Float64Array): number {
  let lowest = Number.POSITIVE_INFINITY;
  let highest = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < op.length; i++) {
    const apart = modelTravel[i] - op[i];
    lowest = Math.min(lowest, apart);
    highest = Math.max(highest, apart);
  }
  return (lowest + highest) / 2;
}

/**
 * Corners of the closed loop that the two-parameter element runs through while OP goes from `low` to about `high` and
 * back, starting at the lower turn. With `sticks-again` OP turns right after a slip, so `high` moves by up to J/2.
 */
export function valveLoop(
  model: ValveModel,
  S: number,
  J: number,
  low: number,
  high: number,
): { x: number[]; y: number[] } {
  const behind = (S - J) / 2;
  const steps = model === 'sticks-again' && J > smallestJump * (high - low);
  const slips = steps ? Math.max(0, Math.round((high - low - S) / J)) : 0;
  const turn = steps ? low + S + slips * J : high;
  const x = [low, low + S, low + S];
  const y = [low + behind, low + behind, low + behind + J];
  for (let slip = 1; slip <= slips; slip++) {
    x.push(low + S + slip * J, low + S + slip * J);
    y.push(low + behind + slip * J, low + behind + (slip + 1) * J);
  }
  if (!steps) {
    x.push(turn);
    y.push(turn - behind);
  }
  // The way down is the way up turned about the middle of the loop.
  const corners = x.length;
  for (let i = 0; i < corners; i++) {
    x.push(low + turn - x[i]);
    y.push(low + turn - y[i]);
  }
  return { x, y };
}

/** A dimension line with an arrow head at either end, in the units of the axes. */
function dimension(fromX: number, fromY: number, toX: number, toY: number): object {
  return {
    x: toX,
    y: toY,
    ax: fromX,
    ay: fromY,
    xref: 'x',
    yref: 'y',
    axref: 'x',
    ayref: 'y',
    showarrow: true,
    arrowside: 'end+start',
    arrowhead: 2,
    startarrowhead: 2,
    arrowsize: 0.9,
    startarrowsize: 0.9,
    arrowwidth: 1.4,
    arrowcolor: palette.ink,
    text: '',
  };
}

function label(x: number, y: number, text: string, xanchor: string, yanchor: string): object {
  return {
    x,
    y,
    xref: 'x',
    yref: 'y',
    xanchor,
    yanchor,
    showarrow: false,
    text,
    font: { size: fontSize.small, color: palette.ink },
    bgcolor: 'rgba(255,255,255,0.8)',
  };
}

/** Keeps a label inside the plot: from a place in the right third it runs to the left. */
function anchorFor(x: number, left: number, right: number): string {
  const place = (x - left) / (right - left);
  return place > 0.66 ? 'right' : place < 0.33 ? 'left' : 'center';
}

function paddedRange(low: number, high: number, below: number, above: number): number[] {
  const size = high - low;
  return plain([low - below * size, high + above * size]) as number[];
}
