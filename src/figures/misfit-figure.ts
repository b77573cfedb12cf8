/** How well each pair of S and J explains the record, with the best pair and the region that is as good as it. */
import type { Findings } from '../assessment/findings';
import { withInterval } from '../assessment/make-answer-card';
import { fitCaveats } from './caveats';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName } from './layout';
import { fontSize, misfitScale, palette } from './palette';
import { padded, plain, short } from './plain-numbers';

/** null when nothing could be fitted. */
export function misfitFigure(findings: Findings): Figure | null {
  const { record, stiction } = findings;
  const fit = stiction.drawn;
  if (fit === null) return null;
  const { S, J, misfit } = fit.map;
  const tried = misfit.flat().filter((value): value is number => value !== null);
  if (tried.length === 0) return null;
  const lowest = Math.min(...tried);
  const highest = Math.max(...tried);
  const quoted = stiction.fit !== null;
  const largestJ = Math.max(...J);
  const notTried = `M0,0 L${largestJ},${largestJ} L0,${largestJ} Z`;
  const data: object[] = [
    {
      type: 'contour',
      x: plain(S),
      y: plain(J),
      z: misfit.map((row) => row.map((value) => (value === null ? null : Number(value.toFixed(4))))),
      colorscale: misfitScale,
      contours: {
        coloring: 'fill',
        showlines: true,
        showlabels: true,
        labelformat: '.3~p',
        labelfont: { size: fontSize.small, color: palette.ink },
        ...levels(lowest, highest),
      },
      line: { color: palette.paper, width: 0.8 },
      connectgaps: true,
      showscale: false,
      hovertemplate: 'S %{x:.3g} %, J %{y:.3g} %<br>left unexplained %{z:.3f}<extra></extra>',
      showlegend: false,
    },
    {
      type: 'scatter',
      mode: 'markers',
      name: 'best pair',
      x: plain([fit.S.value]),
      y: plain([fit.jumpDrawn]),
      marker: { symbol: 'diamond', size: 12, color: palette.model, line: { color: palette.ink, width: 1.5 } },
      hovertemplate: 'best: S %{x:.3g} %, J %{y:.3g} %<extra></extra>',
    },
  ];
  if (quoted) {
    const low = fit.J?.low ?? 0;
    const high = fit.J?.high ?? Math.min(fit.S.high, largestJ);
    data.push({
      type: 'scatter',
      mode: 'lines',
      name: fit.J ? '90 % intervals of S and J' : '90 % interval of S; J not resolved',
      x: plain([fit.S.low, fit.S.high, fit.S.high, fit.S.low, fit.S.low]),
      y: plain([low, low, high, high, low]),
      line: { color: palette.ink, width: 2, dash: '6px,3px' },
      hoverinfo: 'skip',
    });
  }
  const jText = fit.J ? withInterval(fit.J) : 'not resolved';
  return makeFigure({
    id: 'misfit-map',
    title: `${record.loop}: which S and J fit`,
    caption: `Each place is one pair of dead band S and slip jump J; the lines say what share of the movement it leaves unexplained, the darker the less. Pairs with J above S are not tried. A small dark spot pins both numbers down, a long dark valley says that the record cannot tell pairs along it apart.`,
    alt: `Map of the misfit of ${record.loop} over S and J, from ${short(lowest)} at the best pair to ${short(highest)}. ${quoted ? `S ${withInterval(fit.S)}, J ${jText}.` : 'Numbers are withheld.'}`,
    caveats: fitCaveats(findings),
    data,
    annotations: [panelName('slip jump J, %', 'y')],
    layout: {
      xaxis: axis({
        title: axisTitle('dead band S, % of OP span'),
        range: padded(
          Math.min(...S, quoted ? fit.S.low : fit.S.value),
          Math.max(...S, quoted ? fit.S.high : fit.S.value),
          0,
          0,
        ),
      }),
      yaxis: axis({ range: padded(0, Math.max(...J, quoted ? (fit.J?.high ?? 0) : 0), 0.03, 0.03) }),
      shapes: [
        { type: 'path', path: notTried, fillcolor: palette.paper, line: { width: 0 }, layer: 'above' },
      ],
    },
    height: 500,
  });
}

/** Steps of the contour that put about ten bands between best and worst, at round values. */
function levels(lowest: number, highest: number): object {
  const rough = (highest - lowest) / 10 || 0.1;
  const decade = 10 ** Math.floor(Math.log10(rough));
  const size = decade * ([1, 2, 5].find((step) => step * decade >= rough) ?? 10);
  return { start: Math.ceil(lowest / size) * size, end: Math.floor(highest / size) * size, size };
}
