/**
 * The look that every figure starts from: light ground, thin grid, the name of each axis written level above its
 * panel, the legend under the plot, caveats stamped above it. Widths follow the screen; it holds from 350 px up.
 */
import type { RecordClock } from './clock';
import type { Figure } from './figure';
import { fontFamily, fontSize, palette } from './palette';

export interface FigureParts {
  readonly id: string;
  readonly title: string;
  readonly caption: string;
  readonly alt: string;
  /** Stamped on the figure, so that a screenshot cannot lose them; one sentence each. */
  readonly caveats: readonly string[];
  readonly data: readonly object[];
  readonly annotations?: readonly object[];
  /** Axes, shapes and whatever else Plotly's layout takes. */
  readonly layout: object;
  /** Of the static picture; default 560, which still reads when a small screen shrinks it. */
  readonly width?: number;
  readonly height: number;
  /** Whether a legend line under the plot needs room. Default true. */
  readonly legend?: boolean;
}

/** Room in CSS pixels above the topmost panel: for its own name, a line of caveats, a line of the title. */
const panelNameHeight = 24;
const stampLineHeight = 16;
const titleLineHeight = 20;
/** Characters a line that fit into a figure 350 px wide. */
const stampWidth = 44;
const titleWidth = 36;

const legendBelow = {
  orientation: 'h',
  x: 0,
  xanchor: 'left',
  y: 0,
  yref: 'container',
  yanchor: 'bottom',
  bgcolor: 'rgba(0,0,0,0)',
  font: { size: fontSize.small },
};

export function makeFigure(parts: FigureParts): Figure {
  const { id, title, caption, alt, caveats, data, width = 560, legend = true } = parts;
  const lines = caveats.flatMap((caveat) => wrapped(caveat, stampWidth));
  const titleLines = wrapped(title, titleWidth);
  const titleHeight = 16 + titleLines.length * titleLineHeight;
  const stampHeight = lines.length > 0 ? lines.length * stampLineHeight + 12 : 0;
  const height = parts.height + stampHeight + (titleLines.length - 1) * titleLineHeight;
  const stamp = {
    xref: 'paper',
    yref: 'paper',
    x: 0,
    y: 1,
    xanchor: 'left',
    yanchor: 'bottom',
    yshift: panelNameHeight,
    align: 'left',
    showarrow: false,
    text: lines.map(plainText).join('<br>'),
    font: { size: fontSize.small, color: palette.ink },
    bgcolor: palette.stampGround,
    bordercolor: palette.stampEdge,
    borderwidth: 1,
    borderpad: 3,
  };
  return {
    id,
    title,
    caption,
    alt,
    data,
    layout: {
      autosize: true,
      height,
      font: { family: fontFamily, size: fontSize.body, color: palette.ink },
      paper_bgcolor: palette.paper,
      plot_bgcolor: palette.paper,
      title: {
        text: `<b>${titleLines.map(plainText).join('<br>')}</b>`,
        font: { size: fontSize.title },
        x: 0,
        xref: 'container',
        xanchor: 'left',
        y: 1,
        yref: 'container',
        yanchor: 'top',
        pad: { l: 10, t: 10 },
      },
      margin: { l: 14, r: 14, t: titleHeight + stampHeight + panelNameHeight, b: 14 },
      showlegend: legend,
      ...(legend ? { legend: legendBelow } : {}),
      hovermode: 'closest',
      dragmode: 'zoom',
      ...parts.layout,
      annotations: [...(lines.length > 0 ? [stamp] : []), ...(parts.annotations ?? [])],
    },
    width,
    height,
  };
}

/** An axis in the common look; `more` goes over it. */
export function axis(more: object): object {
  return {
    automargin: true,
    showgrid: true,
    gridcolor: palette.grid,
    gridwidth: 1,
    zeroline: false,
    showline: true,
    linecolor: palette.faint,
    linewidth: 1,
    ticks: 'outside',
    ticklen: 4,
    tickcolor: palette.faint,
    tickfont: { size: fontSize.small },
    ...('tickvals' in more ? {} : { nticks: 6 }),
    ...more,
  };
}

/** A horizontal axis in clock time under the panel of the vertical axis `anchor`. */
export function timeAxis(clock: RecordClock, anchor: string): object {
  return axis({
    type: 'date',
    anchor,
    title: axisTitle(clock.title),
    hoverformat: '%H:%M:%S',
    tickangle: 0,
    nticks: 5,
  });
}

/** Title of a horizontal axis. */
export function axisTitle(text: string): object {
  return { text: plainText(text), font: { size: fontSize.small }, standoff: 6 };
}

/** The name of a vertical axis, written level above the upper left corner of its panel. `y` is e.g. `y` or `y2`. */
export function panelName(text: string, y: string): object {
  return {
    xref: 'paper',
    yref: `${y} domain`,
    x: 0,
    y: 1,
    xanchor: 'left',
    yanchor: 'bottom',
    yshift: 2,
    showarrow: false,
    text: plainText(text),
    font: { size: fontSize.small, color: palette.ink },
  };
}

/** A quantity with its unit, as on an axis; the quantity alone where no unit is known. */
export function withUnit(quantity: string, unit: string): string {
  return unit === '' ? quantity : `${quantity}, ${unit}`;
}

/** Text that Plotly shows as it stands: its few tags and entities are switched off. */
export function plainText(text: string): string {
  return text.replace(/&/g, '&amp;').replace(/</g, '&lt;').replace(/>/g, '&gt;');
}

/** Breaks a sentence into lines of at most `width` characters at its spaces; a longer word stays whole. */
export function wrapped(text: string, width: number): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(/\s+/).filter((part) => part !== '')) {
    if (line !== '' && line.length + 1 + word.length > width) {
      lines.push(line);
      line = word;
    } else {
      line = line === '' ? word : `${line} ${word}`;
    }
  }
  if (line !== '') lines.push(line);
  return lines;
}
