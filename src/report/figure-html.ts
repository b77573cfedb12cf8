/** A figure as HTML: drawn by the figure library where it is, and a static picture everywhere else. */
import type { Figure } from '../figures/figure';
import { escapeHtml, scriptJson } from './html-text';

/** `picture` is the figure as SVG text. */
export function figureHtml(figure: Figure, picture: string): string {
  const source = `data:image/svg+xml;base64,${Buffer.from(picture, 'utf8').toString('base64')}`;
  const data = scriptJson({ data: figure.data, layout: figure.layout });
  return [
    `<figure class="sb-figure" data-figure="${escapeHtml(figure.id)}">`,
    `<div class="sb-plot" role="img" aria-label="${escapeHtml(figure.alt)}"></div>`,
    `<img class="sb-picture" src="${source}" alt="${escapeHtml(figure.alt)}" width="${figure.width}" height="${figure.height}">`,
    `<figcaption>${escapeHtml(figure.caption)}</figcaption>`,
    `<script type="application/json" class="sb-figure-data">${data}</script>`,
    '</figure>',
  ].join('\n');
}
