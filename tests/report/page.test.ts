import { describe, expect, it } from 'vitest';
import type { Notebook, NotebookCell } from '../../src/report/notebook-file';
import { withParameters } from '../../src/report/notebook-file';
import { pageOf } from '../../src/report/page';

const code = (source: string, outputs: NotebookCell['outputs'] = [], tags: string[] = []): NotebookCell => ({
  cell_type: 'code',
  source,
  metadata: { tags },
  outputs,
});
const html = (text: string): NotebookCell['outputs'] => [
  { output_type: 'display_data', data: { 'text/html': [text] } },
];
const notebookOf = (...cells: NotebookCell[]): Notebook => ({
  cells,
  metadata: {},
  nbformat: 4,
  nbformat_minor: 5,
});

describe('a page made from a notebook', () => {
  it('keeps the order, renders Markdown, and folds the code of silent cells into the next that shows something', () => {
    const page = pageOf(
      notebookOf(
        { cell_type: 'markdown', source: ['## One\n', '**bold**'], metadata: {} },
        code('const silent = 1;'),
        code('show()', html('<b>shown</b>')),
      ),
      'Title & more',
    );
    expect(page).toContain('<title>Title &amp; more</title>');
    expect(page.indexOf('<h2>One</h2>')).toBeLessThan(page.indexOf('<b>shown</b>'));
    expect(page).toContain('<strong>bold</strong>');
    expect(page.match(/<details/g)).toHaveLength(1);
    expect(page).toContain('const silent = 1;\n\nshow()');
  });

  it('escapes printed text and code, and lets no Markdown carry markup', () => {
    const page = pageOf(
      notebookOf(
        { cell_type: 'markdown', source: '<script>bad()</script>', metadata: {} },
        code('1 < 2', [{ output_type: 'stream', name: 'stdout', text: '<i>printed</i>' }]),
      ),
      '',
    );
    expect(page).not.toContain('<script>bad');
    expect(page).toContain('&lt;i&gt;printed&lt;/i&gt;');
    expect(page).toContain('1 &lt; 2');
  });

  it('names no address on the web and forbids every request', () => {
    const page = pageOf(notebookOf(code('show()', html('<b>x</b>'))), '');
    expect(page).toContain("default-src 'none'");
    expect(page).not.toMatch(/(src|href)="(?!data:)/);
  });
});

describe('parameters of a notebook', () => {
  it('come in a cell of their own after the tagged one, and leave the template as it is', () => {
    const template = Object.freeze(
      notebookOf(code('const file = "demo";', [], ['parameters']), code('use(file)')),
    );
    const filled = withParameters(template, { file: 'a "b".csv', reading: { service: 'flow' } });
    expect(filled.cells.map((cell) => cell.source)).toEqual([
      'const file = "demo";',
      'const file = "a \\"b\\".csv" as const;\nconst reading = {"service":"flow"} as const;',
      'use(file)',
    ]);
    expect(template.cells).toHaveLength(2);
  });

  it('need a tagged cell', () => {
    expect(() => withParameters(notebookOf(code('1')), {})).toThrow('no cell tagged "parameters"');
  });
});
