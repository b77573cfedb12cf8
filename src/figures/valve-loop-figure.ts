/** The fitted valve's own loop, travel against OP, with dead band and slip jump drawn in as dimensions. */
import type { Findings } from '../assessment/findings';
import { withInterval } from '../assessment/make-answer-card';
import { fitCaveats } from './caveats';
import { dimension } from './dimension';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName } from './layout';
import { fontSize, lineWidth, palette } from './palette';
import { padded, plain, short } from './plain-numbers';
import { drawnSwing, smallestJump, travelOffset, valveLoop } from './valve-loop';

/** null when nothing could be fitted. */
export function valveLoopFigure(findings: Findings): Figure | null {
  const { record, stiction } = findings;
  const fit = stiction.drawn;
  if (fit === null) return null;
  const S = fit.S.value;
  const J = Math.min(fit.jumpDrawn, S);
  const { low, high, enlarged, around } = drawnSwing(findings, S);
  const offset = travelOffset(record.op, fit.modelTravel);
  const loop = valveLoop(fit.model, S, J, low, high);
  const travel = loop.y.map((value) => value + offset);
  const turn = loop.x.indexOf(Math.max(...loop.x));
  const right = loop.x[turn];
  const top = travel[turn];
  const left = loop.x[0];
  const bottom = travel[0];
  const height = Math.max(top - bottom, S / 20);
  const width = right - left;

  const quoted = stiction.fit !== null;
  const sText = quoted ? withInterval({ ...fit.S, unit: '%' }) : 'numbers withheld';
  const jText = !quoted ? 'numbers withheld' : fit.J ? withInterval({ ...fit.J, unit: '%' }) : 'not resolved';
  const above = top + 0.16 * height;
  const jumpAt = left + S;
  const beside = jumpAt + 0.05 * width;
  const jumpShown = J > smallestJump * width;
  const data: object[] = [
    {
      type: 'scatter',
      mode: 'lines',
      name: fit.travelSource === 'measured' ? 'measured travel' : 'travel, reconstructed',
      x: plain(record.op, around),
      y: plain(fit.travel, around),
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
    const jump = fit.J && jumpShown ? [bottom + fit.J.low, bottom + fit.J.high] : [];
    data.push({
      type: 'scatter',
      mode: 'lines',
      name: '90 % interval',
      x: plain([right - fit.S.high, right - fit.S.low, Number.NaN, ...jump.map(() => beside)]),
      y: plain([above, above, Number.NaN, ...jump]),
      line: { color: palette.model, width: 9 },
      opacity: 0.5,
      hoverinfo: 'skip',
    });
  }
  data.push(dimension([right - S, right], [above, above], [-90, 90]));
  if (jumpShown) data.push(dimension([beside, beside], [bottom, bottom + J], [180, 0]));
  const annotations: object[] = [
    panelName('travel, %', 'y'),
    label(right, top + 0.2 * height, 'dead band S', sText, 'right', 'bottom'),
    label(
      beside,
      bottom - 0.04 * height,
      'slip jump J',
      jText,
      beside > (left + right) / 2 ? 'right' : 'left',
      'top',
    ),
  ];
  const swing = short(right - left);
  const drawnFor = enlarged
    ? `an OP swing of ${swing} %, a little more than S, as the usual one would not move this valve`
    : `a usual OP swing of ${swing} %`;
  return makeFigure({
    id: 'valve-loop',
    title: `${record.loop}: the fitted valve`,
    caption: `Travel against OP of the fitted valve, drawn for ${drawnFor}; behind it the ${fit.travelSource} travel of the cycles around. After a reversal OP must move by the dead band S before the stem moves, and then it jumps by J.`,
    alt: `Loop of the fitted valve of ${record.loop} (${fit.model}): dead band S ${sText}, slip jump J ${jText}.`,
    caveats: fitCaveats(findings),
    data,
    annotations,
    layout: {
      xaxis: axis({ title: axisTitle('OP, % of span'), range: padded(left, right, 0.12, 0.12) }),
      yaxis: axis({ range: padded(bottom, bottom + height, 0.3, 0.46) }),
    },
    width: 460,
    height: 460,
  });
}

function label(x: number, y: number, name: string, value: string, xanchor: string, yanchor: string): object {
  return {
    x,
    y,
    xref: 'x',
    yref: 'y',
    xanchor,
    yanchor,
    align: xanchor,
    showarrow: false,
    text: `<b>${name}</b><br>${value}`,
    font: { size: fontSize.small, color: palette.ink },
    bgcolor: 'rgba(255,255,255,0.8)',
  };
}
