/**
 * The figure library as HTML: put once into a notebook or page, it draws every figure there is or comes later.
 * The library is stored compressed and unpacked by the browser; where a browser cannot, or scripts are off, the
 * static pictures simply stay.
 */
import { readFileSync } from 'node:fs';
import { gzipSync } from 'node:zlib';

let stored: string | null = null;

export function figureLibraryHtml(): string {
  stored ??= gzipSync(readFileSync(require.resolve('plotly.js-cartesian-dist-min')), { level: 9 }).toString(
    'base64',
  );
  return [
    `<script type="application/octet-stream" class="sb-library">${stored}</script>`,
    `<script>(${drawFigures})()</script>`,
  ].join('\n');
}

/** Kept as text, because it runs in the browser and not here. Draws what is there and watches for what comes. */
const drawFigures = `async function () {
  if (window.stickbandDraws) return;
  window.stickbandDraws = true;
  if (document.readyState === 'loading') {
    await new Promise((parsed) => document.addEventListener('DOMContentLoaded', parsed));
  }
  const holder = document.querySelector('script.sb-library');
  if (!holder || !window.DecompressionStream) return;
  const bytes = Uint8Array.from(atob(holder.textContent), (sign) => sign.charCodeAt(0));
  const unpacked = new Blob([bytes]).stream().pipeThrough(new DecompressionStream('gzip'));
  const script = document.createElement('script');
  script.textContent = await new Response(unpacked).text();
  document.head.append(script);
  const draw = async (figure) => {
    const stored = figure.querySelector('.sb-figure-data');
    if (!stored) return; // taken away from a notebook that is not trusted
    figure.classList.add('sb-drawn');
    const plot = figure.querySelector('.sb-plot');
    const { data, layout } = JSON.parse(stored.textContent);
    await window.Plotly.newPlot(plot, data, layout, { displaylogo: false });
    figure.classList.add('sb-shown');
    let width = plot.clientWidth;
    new ResizeObserver(() => {
      if (plot.clientWidth === 0 || plot.clientWidth === width) return;
      width = plot.clientWidth;
      window.Plotly.Plots.resize(plot);
    }).observe(figure);
  };
  const drawAll = () => document.querySelectorAll('.sb-figure:not(.sb-drawn)').forEach(draw);
  let waiting = 0;
  new MutationObserver(() => {
    clearTimeout(waiting);
    waiting = setTimeout(drawAll, 50);
  }).observe(document.body, { childList: true, subtree: true });
  drawAll();
}`;
