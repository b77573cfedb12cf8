/**
 * An executed notebook as one self-contained page: text and outputs in order, code folded away. The page asks
 * for nothing from outside, and its content policy forbids it to.
 */
import MarkdownIt from 'markdown-it';
import { version } from '../version';
import { escapeHtml } from './html-text';
import { pageStyle } from './look';
import { hasTag, joined, type Notebook, type NotebookOutput } from './notebook-file';

const contentPolicy =
  "default-src 'none'; img-src data: blob:; style-src 'unsafe-inline'; script-src 'unsafe-inline'; base-uri 'none'";

/** `title` is what a browser shows in its tab. Code of cells that show nothing is folded in with the next cell's. */
export function pageOf(notebook: Notebook, title: string): string {
  const markdown = new MarkdownIt({ html: false, typographer: false });
  const parts: string[] = [];
  let code: string[] = [];
  for (const cell of notebook.cells) {
    if (cell.cell_type === 'markdown') {
      parts.push(`<div class="text">${markdown.render(joined(cell.source))}</div>`);
      continue;
    }
    if (cell.cell_type !== 'code') continue;
    code.push(joined(cell.source));
    const outputs = (cell.outputs ?? []).map(outputHtml).filter(Boolean);
    parts.push(...outputs);
    if (outputs.length === 0 || hasTag(cell, 'set-up')) continue;
    parts.push(foldedCode(code));
    code = [];
  }
  if (code.length > 0) parts.push(foldedCode(code));
  return [
    '<!doctype html>',
    '<html lang="en"><head><meta charset="utf-8">',
    `<meta http-equiv="Content-Security-Policy" content="${contentPolicy}">`,
    '<meta name="viewport" content="width=device-width, initial-scale=1">',
    '<link rel="icon" href="data:,">',
    `<title>${escapeHtml(title)}</title>`,
    `<style>${pageStyle}</style>`,
    '</head><body><main>',
    ...parts,
    `<footer>Made with stickband ${escapeHtml(version)}. Interactive figures are drawn by Plotly.js (MIT licence).</footer>`,
    '</main></body></html>\n',
  ].join('\n');
}

function outputHtml(output: NotebookOutput): string {
  if (output.output_type === 'stream') return `<pre class="printed">${escapeHtml(joined(output.text))}</pre>`;
  const data = output.data ?? {};
  if (data['text/html']) return joined(data['text/html'] as string | string[]);
  const plain = joined(data['text/plain'] as string | string[] | undefined);
  return plain ? `<pre class="printed">${escapeHtml(plain)}</pre>` : '';
}

function foldedCode(code: readonly string[]): string {
  return `<details class="code"><summary>show the code</summary><pre>${escapeHtml(code.join('\n\n'))}</pre></details>`;
}
