/** The cycling loops of a unit against their period: which stand at the same one, and which of these is the likely source. */
import type { Verdict } from '../assessment/assessment';
import { duration } from '../assessment/make-answer-card';
import { type AuditFindings, type RankedFindings, roleOf } from '../audit/audit-findings';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName, plainText, wrapped } from './layout';
import { fontSize, palette } from './palette';
import { plain, short } from './plain-numbers';
import { verdictMarks } from './verdict-marks';

/** Rows that can be read on one figure (own choice). */
const mostRows = 100;
/** From so many rows on they stand closer, and the periods are written above them as well. */
const manyRows = 30;
/** Characters of a tag that fit beside a figure 350 px wide. */
const tagWidth = 18;

/** null when no loop cycles. */
export function periodMapFigure({ audit, ranked }: AuditFindings): Figure | null {
  const cycling = ranked.filter(({ assessment }) => assessment.oscillation.period !== null);
  if (cycling.length === 0) return null;
  const rows = inRows(cycling);
  const left = cycling.length - rows.length;
  const periods = rows.map(periodOf);
  const from = Math.min(...periods) / 1.5;
  const to = Math.max(...periods) * 1.5;
  const groups = audit.groups.filter(({ loops }) =>
    rows.some(({ assessment }) => loops.includes(assessment.loop)),
  );
  const verdicts = (Object.keys(verdictMarks) as Verdict[]).filter((verdict) =>
    rows.some(({ assessment }) => assessment.cause.verdict === verdict),
  );
  const many = rows.length >= manyRows;
  const rowHeight = many ? 15 : 22;
  const ticks = periodTicks(from, to);
  const sources = rows.flatMap((loop, row) => (roleOf(loop) === 'likely source' ? [{ loop, row }] : []));

  const data: object[] = verdicts.map((verdict) => {
    const { symbol, color, filled } = verdictMarks[verdict];
    const here = rows.flatMap((loop, row) =>
      loop.assessment.cause.verdict === verdict ? [{ loop, row }] : [],
    );
    return {
      type: 'scatter',
      mode: 'markers',
      name: verdict,
      x: here.map(({ loop }) => digits(periodOf(loop))),
      y: here.map(({ row }) => row),
      text: here.map(({ loop }) => hoverText(loop)),
      marker: {
        symbol,
        size: many ? 8 : 11,
        opacity: 1,
        color: filled ? color : palette.paper,
        line: { color, width: many ? 1.8 : 2.2 },
      },
      hovertemplate: '%{text}<extra></extra>',
    };
  });
  if (sources.length > 0) {
    data.push({
      type: 'scatter',
      mode: 'markers',
      name: 'likely source of a shared cycle',
      x: sources.map(({ loop }) => digits(periodOf(loop))),
      y: sources.map(({ row }) => row),
      marker: {
        symbol: 'circle-open',
        size: many ? 15 : 21,
        color: palette.ink,
        line: { color: palette.ink, width: 1.6 },
      },
      hoverinfo: 'skip',
    });
  }
  const told = groups.map(
    ({ loops, period, likelySource }) =>
      `${loops.length} at about ${duration(period)}, ${likelySource === null ? 'source not told' : `likely source ${likelySource}`}`,
  );
  const shared =
    groups.length === 0
      ? 'No two of them share a cycle.'
      : `Shaded together: ${told.slice(0, 4).join('; ')}${told.length > 4 ? `; and ${told.length - 4} more` : ''}.`;
  return makeFigure({
    id: 'period-map',
    title: 'Cycling loops and their periods',
    caption: `One row a loop that cycles, loops that share a cycle on one shaded ground, the likely source ringed. ${shared} The same period alone does not make loops share a cycle: whole spectra are compared, and whether they keep step.`,
    alt: `Periods of ${rows.length} cycling loops from ${duration(Math.min(...periods))} to ${duration(Math.max(...periods))}. ${shared}`,
    caveats: [
      ...(left > 0 ? [`${left} more loops cycle; the table has all of them.`] : []),
      'A likely source is read from operating data and has to be confirmed on site.',
    ],
    data,
    annotations: many ? ticksAbove(ticks) : [panelName('loops that cycle', 'y')],
    layout: {
      xaxis: axis({
        type: 'log',
        range: plain([Math.log10(from), Math.log10(to)]),
        ...ticks,
        title: axisTitle('period'),
        tickangle: 0,
      }),
      yaxis: axis({
        range: [rows.length - 0.4, -0.6],
        tickvals: rows.map((_, row) => row),
        ticktext: rows.map((loop) => rowName(loop)),
        fixedrange: true,
        ticks: '',
        tickfont: { size: many ? fontSize.small - 2 : fontSize.small },
      }),
      shapes: groups.map(({ loops }) => ground(loops, rows)),
    },
    height: 130 + rows.length * rowHeight + 20 * Math.ceil((verdicts.length + 1) / 3),
  });
}

/**
 * The first of the ranking, each with all that share its cycle, as long as there is room. Group by group, the likely
 * source on top of its own; then the loops that cycle alone, the fastest first.
 */
function inRows(cycling: readonly RankedFindings[]): RankedFindings[] {
  const chosen = new Set<RankedFindings>();
  for (const one of cycling) {
    const all = one.group === null ? [one] : cycling.filter(({ group }) => group === one.group);
    for (const loop of all) if (chosen.size < mostRows) chosen.add(loop);
  }
  const rows = [...chosen];
  const isSource = (loop: RankedFindings): number => Number(roleOf(loop) === 'likely source');
  const groups = new Set(rows.flatMap(({ group }) => group ?? []));
  const together = [...groups].flatMap((group) =>
    rows
      .filter((loop) => loop.group === group)
      .sort((a, b) => isSource(b) - isSource(a) || a.place - b.place),
  );
  const alone = rows.filter(({ group }) => group === null).sort((a, b) => periodOf(a) - periodOf(b));
  return [...together, ...alone];
}

function periodOf({ assessment }: RankedFindings): number {
  return assessment.oscillation.period!;
}

/** Four digits of each period, as a logarithmic axis shows small ones as large as large ones. */
function digits(period: number): number {
  return Number(period.toPrecision(4));
}

function rowName(loop: RankedFindings): string {
  const tag = loop.assessment.loop;
  const name = plainText(tag.length > tagWidth ? `${tag.slice(0, tagWidth - 1)}…` : tag);
  return roleOf(loop) === 'likely source' ? `<b>${name}</b>` : name;
}

function hoverText({ assessment, reasons, place }: RankedFindings): string {
  const { loop, cause, oscillation } = assessment;
  const lines = [
    `${loop}: ${cause.verdict}, ${duration(oscillation.period!)}`,
    ...wrapped(reasons[0] ?? '', 44),
  ];
  return [...lines, `place ${place} of the ranking`].map(plainText).join('<br>');
}

/** The ground of one group over its rows. */
function ground(loops: readonly string[], rows: readonly RankedFindings[]): object {
  const mine = rows.flatMap(({ assessment }, row) => (loops.includes(assessment.loop) ? [row] : []));
  return {
    type: 'rect',
    xref: 'paper',
    x0: 0,
    x1: 1,
    yref: 'y',
    y0: mine[0]! - 0.44,
    y1: mine[mine.length - 1]! + 0.44,
    layer: 'below',
    fillcolor: palette.grid,
    opacity: 0.45,
    line: { width: 0 },
  };
}

interface Ticks {
  readonly tickvals: readonly number[];
  readonly ticktext: readonly string[];
}

/** Steps of 1, 2 and 5 in the unit in which a period is read, as long as they are few enough to stand side by side. */
function periodTicks(from: number, to: number): Ticks {
  const steps = [
    1, 2, 5, 10, 20, 30, 60, 120, 300, 600, 1200, 1800, 3600, 7200, 18_000, 36_000, 86_400, 259_200,
  ];
  const within = steps.filter((step) => step >= from && step <= to);
  const values = within.length >= 2 ? within : [...new Set([from * 1.5, to / 1.5].map(digits))];
  const by = Math.ceil(values.length / 6);
  const kept = values.filter((_, i) => i % by === 0);
  return { tickvals: kept, ticktext: kept.map(inShort) };
}

/** The same ticks at the upper end of the plot, for one that is too tall to be seen at once. */
function ticksAbove({ tickvals, ticktext }: Ticks): object[] {
  return tickvals.map((period, i) => ({
    // Places on a logarithmic axis are powers of ten.
    x: Math.log10(period),
    xref: 'x',
    y: 1,
    yref: 'paper',
    yanchor: 'bottom',
    yshift: 2,
    showarrow: false,
    text: ticktext[i],
    font: { size: fontSize.small, color: palette.ink },
  }));
}

function inShort(seconds: number): string {
  if (seconds < 60) return `${short(seconds)} s`;
  if (seconds < 3600) return `${short(seconds / 60)} min`;
  return `${short(seconds / 3600)} h`;
}
