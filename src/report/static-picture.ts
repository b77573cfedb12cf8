/**
 * Static pictures of figures: the same descriptions, drawn by Plotly in a page that exists only in memory (jsdom),
 * as SVG text that stands alone. jsdom lays nothing out, so the sizes that Plotly asks for are worked out here.
 */
import { readFileSync } from 'node:fs';
import { Script } from 'node:vm';
import type { DOMWindow } from 'jsdom';
import type { Figure } from '../figures/figure';
import { thin } from '../figures/thin';
import { installQuickQueries } from './quick-queries';
import { installSvgGeometry } from './svg-geometry';

/** Points kept of a line: one and a half a pixel, which nobody can tell from all of them in a picture. */
const pointsKept = 900;

interface Stage {
  readonly window: DOMWindow;
  readonly plotly: {
    newPlot(on: Element, data: object[], layout: object, config: object): Promise<unknown>;
    purge(on: Element): void;
    Snapshot: { toSVG(of: Element, format: 'svg'): string };
  };
  /** Starts the page's random numbers afresh, so that equal figures give equal pictures. */
  seed(): void;
}

let stage: Promise<Stage> | null = null;
let before: Promise<unknown> = Promise.resolve();

/**
 * One SVG text a figure, in the same order, fit for an image element (`data:image/svg+xml`). Equal figures give equal
 * texts. Lines are thinned to about 900 points. The library is loaded once a process, which takes about a second.
 */
export function staticPictures(figures: readonly Figure[]): Promise<string[]> {
  const pictures = before.then(async () => {
    stage ??= openStage();
    const opened = await stage;
    const drawn: string[] = [];
    for (const figure of figures) drawn.push(await draw(opened, figure));
    return drawn;
  });
  // The next call waits for this one, as both would draw from the same random numbers.
  before = pictures.catch(() => undefined);
  return pictures;
}

async function draw({ window, plotly, seed }: Stage, figure: Figure): Promise<string> {
  const place = window.document.createElement('div');
  window.document.body.append(place);
  try {
    seed();
    const data = figure.data.map((trace) => thinned(structuredClone(trace)));
    const size = { autosize: false, width: figure.width, height: figure.height };
    const layout = { ...structuredClone(figure.layout), ...size };
    await plotly.newPlot(place, data, layout, { staticPlot: true });
    return standalone(plotly.Snapshot.toSVG(place, 'svg'), figure);
  } finally {
    plotly.purge(place);
    place.remove();
  }
}

async function openStage(): Promise<Stage> {
  const { JSDOM } = await import('jsdom');
  const page = new JSDOM('<!DOCTYPE html><body></body>', {
    runScripts: 'outside-only',
    pretendToBeVisual: true,
  });
  const context = page.getInternalVMContext();
  installSvgGeometry(page.window);
  installQuickQueries(page.window);
  page.window.URL.createObjectURL = () => '';
  const library = require.resolve('plotly.js-cartesian-dist-min');
  new Script(readFileSync(library, 'utf8'), { filename: library }).runInContext(context);
  const restart = new Script('{ let at = 0; Math.random = () => (at = (at + 0.6180339887498949) % 1); }');
  return {
    window: page.window,
    plotly: page.window.Plotly,
    seed: () => {
      restart.runInContext(context);
    },
  };
}

/** A line with more points than a picture can show, thinned; one with breaks in it and everything else as it is. */
function thinned(trace: { mode?: string; x?: unknown; y?: unknown }): object {
  const { mode, x, y } = trace;
  if (mode !== 'lines' || !Array.isArray(x) || !Array.isArray(y) || y.includes(null)) return trace;
  const kept = thin(y, pointsKept);
  return { ...trace, x: kept.map((i) => x[i]), y: kept.map((i) => y[i]) };
}

/** Makes the SVG scale with the place it is shown in, and leaves out what only a live figure needs. */
function standalone(svg: string, { width, height }: Figure): string {
  let text = svg
    .replace(/ (class|data-[\w-]+)="[^"]*"/g, '')
    .replace(/url\((?:'|&quot;)(#[\w-]+)(?:'|&quot;)\)/g, 'url($1)')
    .replace('<svg ', `<svg viewBox="0 0 ${width} ${height}" `);
  for (let size = 0; size !== text.length; ) {
    size = text.length;
    text = text.replace(/<(g|text)( [^>]*)?(\/>|><\/\1>)/g, '');
  }
  return text;
}
