/** All indicators at a glance, one row each, under the verdict that weighs them together with the fit. */
import type { Evidence } from '../assessment/assessment';
import type { Findings } from '../assessment/findings';
import { withInterval } from '../assessment/make-answer-card';
import type { Estimate } from '../estimate/stiction-fit';
import { recordCaveats } from './caveats';
import type { Figure } from './figure';
import { makeFigure, plainText, wrapped } from './layout';
import { fontSize, palette } from './palette';
import { short } from './plain-numbers';

type Says = Evidence['says'];

/** Columns from left to right; shape and column say the same as the colour, so nothing hangs on colour alone. */
const lanes: readonly { says: Says; name: string; symbol: string; color: string; filled: boolean }[] = [
  { says: 'not', name: 'not stiction', symbol: 'circle', color: palette.pv, filled: false },
  { says: 'undecided', name: 'undecided', symbol: 'square', color: palette.faint, filled: false },
  { says: 'stiction', name: 'stiction', symbol: 'diamond', color: palette.op, filled: true },
  { says: 'skipped', name: 'skipped', symbol: 'x-thin', color: palette.faint, filled: true },
];

/** Height of a row, px, and how far below its middle the marks stand, in rows. */
const rowHeight = 42;
const markBelow = 0.24;
/** Room above the mark of the verdict, in rows, for its three lines of text. */
const firstRow = 1.15;

/** null when no indicator was asked. */
export function evidenceFigure(findings: Findings): Figure | null {
  const { assessment, stiction } = findings;
  const { evidence, cause } = assessment;
  if (evidence.length === 0) return null;
  const verdictSays: Says =
    cause.verdict === 'stiction' ? 'stiction' : cause.verdict === 'cannot-tell' ? 'undecided' : 'not';
  const fit = stiction.fit;
  const inPercent = (estimate: Estimate): string => withInterval({ ...estimate, unit: '%' });
  const fitWords =
    fit === null
      ? [stiction.drawn === null ? 'No fit.' : 'Fit: numbers withheld.']
      : [`Fit: S ${inPercent(fit.S)}`, `J ${fit.J ? inPercent(fit.J) : 'not resolved'}`];
  const lastRow = evidence.length + 0.65;
  const verdict = {
    text: [`<b>Verdict: ${cause.verdict}</b>`, ...fitWords].join('<br>'),
    y: 0,
    says: verdictSays,
    why: cause.reasons[0] ?? '',
    size: 18,
  };
  const rows = [
    verdict,
    ...evidence.map((item, i) => ({
      text: plainText(item.value === null ? item.indicator : `${item.indicator}: ${short(item.value)}`),
      y: i + 1.15,
      says: item.says,
      why: item.value === null ? item.why : `${item.why} (${item.threshold})`,
      size: 12,
    })),
  ];
  const count = (says: Says): number => evidence.filter((item) => item.says === says).length;
  const tally = `${count('stiction')} for stiction, ${count('not')} against, ${count('undecided')} undecided, ${count('skipped')} skipped`;
  const data = lanes.map((lane, column) => {
    const here = rows.filter((row) => row.says === lane.says);
    return {
      type: 'scatter',
      mode: 'markers',
      x: here.map(() => column),
      y: here.map((row) => row.y + markBelow),
      text: here.map((row) => wrapped(row.why, 44).map(plainText).join('<br>')),
      marker: {
        symbol: lane.symbol,
        size: here.map((row) => row.size),
        opacity: 1,
        color: lane.filled ? lane.color : palette.paper,
        line: { color: lane.color, width: 2.4 },
      },
      hovertemplate: '%{text}<extra></extra>',
    };
  });
  return makeFigure({
    id: 'evidence',
    title: `${assessment.loop}: what each indicator says`,
    caption: `The verdict stands on top, with what the fit found; under it one row an indicator. ${tally}. Most indicators look at shape alone and they often disagree; the fit and the record's fitness weigh more.`,
    alt: `Verdict ${cause.verdict}; ${fitWords.join(', ')}. Indicators of ${assessment.loop}: ${tally}. ${evidence.map((item) => `${item.indicator}: ${item.says}`).join('; ')}.`,
    caveats: recordCaveats(findings),
    data,
    annotations: [
      ...lanes.map((lane, column) => ({
        x: column,
        y: 1,
        xref: 'x',
        yref: 'paper',
        yanchor: 'bottom',
        yshift: 2,
        showarrow: false,
        text: lane.name,
        font: { size: fontSize.small, color: palette.ink },
      })),
      ...rows.map((row) => ({
        x: 0,
        y: row.y - 0.12,
        xref: 'paper',
        yref: 'y',
        xanchor: 'left',
        yanchor: 'bottom',
        yshift: -8,
        align: 'left',
        showarrow: false,
        text: row.text,
        font: { size: fontSize.small, color: palette.ink },
      })),
    ],
    layout: {
      xaxis: { range: [-0.5, lanes.length - 0.5], visible: false, fixedrange: true },
      yaxis: { range: [lastRow, -firstRow], visible: false, fixedrange: true },
      shapes: rows.map((row) => ({
        type: 'line',
        xref: 'x',
        x0: 0,
        x1: lanes.length - 1,
        y0: row.y + markBelow,
        y1: row.y + markBelow,
        layer: 'below',
        line: { color: palette.grid, width: 5 },
      })),
    },
    height: 74 + (lastRow + firstRow) * rowHeight,
    legend: false,
  });
}
