/** The guided notebook through real Jupyter and its kernel, and the page made from it in a real browser, offline. */
import { mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { basename, join } from 'node:path';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Assessment } from '../../src/assessment/assessment';
import { cautions } from '../../src/assessment/cautions';
import { withInterval } from '../../src/assessment/make-answer-card';
import { escapeHtml } from '../../src/report/html-text';
import { findJupyter } from '../../src/report/jupyter';
import { joined, type Notebook, type NotebookCell } from '../../src/report/notebook-file';
import { runNotebook } from '../../src/report/run-notebook';
import { captured } from '../cli/captured';
import { scratchFolder } from '../scratch-folder';
import { startBrowser } from './browser';
import { expectRanWhole } from './notebook-checks';
import { type OpenedPage, openPage } from './open-page';

interface Rendered {
  readonly notebook: Notebook;
  readonly page: string;
  readonly assessment: Assessment;
}

const folder = scratchFolder();

async function render(file: string): Promise<Rendered> {
  const out = join(folder, 'out', basename(file, '.csv'));
  const { code, stderr } = await captured('assess', file, '--out', out, '--json', join(out, 'numbers.json'));
  expect(stderr).not.toMatch(/fault/);
  expect(code).toBe(0);
  const page = join(out, readdirSync(out).find((name) => name.endsWith('.html'))!);
  return {
    notebook: JSON.parse(readFileSync(page.replace(/html$/, 'ipynb'), 'utf8')),
    page,
    assessment: JSON.parse(readFileSync(join(out, 'numbers.json'), 'utf8')),
  };
}

const outputsOf = (cell: NotebookCell): string[] =>
  (cell.outputs ?? []).map((output) => joined(output.data?.['text/html'] as string[] | undefined));
const allOutputs = (notebook: Notebook): string => notebook.cells.flatMap(outputsOf).join('\n');
const figuresIn = (html: string): string[] =>
  [...html.matchAll(/data-figure="([^"]+)"/g)].map((match) => match[1]!);

let sticky: Rendered;
let browser: Browser;
beforeAll(async () => {
  browser = await startBrowser();
  sticky = await render('data/31-FC-104.csv');
});
afterAll(() => browser?.close());

describe('the notebook of the sticky demo loop', () => {
  it('ran every cell, in order, without a word on stderr', () => {
    expectRanWhole(sticky.notebook);
  });

  it('shows the answer card first, with the numbers of the JSON and every caution', () => {
    const answer = sticky.notebook.cells.flatMap(outputsOf).find((html) => html.startsWith('<section'))!;
    const before = allOutputs(sticky.notebook).split('<section')[0]!;
    expect(before.replace(/<(style|script)[\s\S]*?<\/\1>/g, '').trim()).toBe('');
    const { stiction, cause } = sticky.assessment;
    expect(cause.verdict).toBe('stiction');
    expect(answer).toContain(withInterval(stiction!.S));
    expect(answer).toContain(stiction!.J ? withInterval(stiction!.J) : 'not resolved');
    expect(answer).toContain(`confidence ${Math.round(100 * cause.confidence!)} %`);
    for (const caution of cautions) expect(answer).toContain(escapeHtml(caution));
  });

  it('shows the same numbers in its tables, with fingerprint, version and options', () => {
    const html = allOutputs(sticky.notebook);
    const { stiction, record, provenance } = sticky.assessment;
    const shown = (value: number): string => `>${Number(value.toPrecision(4))}<`;
    for (const value of [stiction!.S.value, stiction!.S.low, stiction!.S.high])
      expect(html).toContain(shown(value));
    for (const text of [
      record.sha256,
      record.start,
      provenance.version,
      JSON.stringify(provenance.options),
    ]) {
      expect(html).toContain(escapeHtml(text));
    }
  });

  it('has a static picture in every figure, which needs no script and no style', () => {
    const html = allOutputs(sticky.notebook);
    expect(figuresIn(html)).toEqual(expect.arrayContaining(['trend']));
    // What an untrusted notebook leaves of an output: no scripts, no inline svg, no style attributes.
    const left = html.replace(/<(script|style|svg)[\s\S]*?<\/\1>/g, '').replace(/ style="[^"]*"/g, '');
    expect(left.match(/<img class="sb-picture" src="data:image\/svg\+xml;base64,/g)).toHaveLength(
      figuresIn(html).length,
    );
  });

  it('names no folder of this machine', () => {
    const text = JSON.stringify(sticky.notebook);
    expect(text).not.toContain(process.cwd());
    expect(text).not.toContain(folder);
  });
});

describe('the page of the sticky demo loop', () => {
  const open = (width: number, height: number, javaScriptEnabled = true): Promise<OpenedPage> =>
    openPage(browser, sticky.page, width, height, javaScriptEnabled);

  it.each([
    [1280, 800],
    [390, 844],
  ])('draws every figure at %i pixels, asks for nothing, and complains of nothing', async (width, height) => {
    const { page, trouble } = await open(width, height);
    const count = figuresIn(allOutputs(sticky.notebook)).length;
    await page.waitForFunction((wanted) => document.querySelectorAll('.sb-shown').length === wanted, count);
    const drawn = await page.evaluate(() =>
      [...document.querySelectorAll('.sb-figure')].map((figure) => {
        const plot = figure.querySelector('.main-svg')!.getBoundingClientRect();
        return (
          plot.width > 200 &&
          plot.width <= figure.clientWidth &&
          plot.height > 100 &&
          figure.querySelectorAll('.trace path, .contourlayer path').length > 0
        );
      }),
    );
    expect(drawn).toEqual(Array(count).fill(true));
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(width);
    expect(trouble).toEqual([]);
    await page.context().close();
  });

  it.each([
    [1280, 800],
    [390, 844],
  ])('says the answer on the first screen at %i pixels', async (width, height) => {
    const { page } = await open(width, height);
    for (const part of ['.sb-card h2', '.sb-cause', '.sb-tiles .sb-value >> nth=0']) {
      const box = (await page.locator(part).boundingBox())!;
      expect(box.y + box.height).toBeLessThan(height);
    }
    await page.context().close();
  });

  it('shows the static pictures and the cautions where scripts are off', async () => {
    const { page, trouble } = await open(1280, 800, false);
    const pictures = page.locator('.sb-picture');
    expect(await pictures.count()).toBe(figuresIn(allOutputs(sticky.notebook)).length);
    for (const picture of await pictures.all()) {
      await picture.scrollIntoViewIfNeeded();
      expect(await picture.isVisible()).toBe(true);
      expect(
        await picture.evaluate((image: HTMLImageElement) => image.complete && image.naturalWidth),
      ).toBeGreaterThan(200);
    }
    const text = await page.locator('main').textContent();
    for (const caution of cautions) expect(text).toContain(caution);
    expect(trouble).toEqual([]);
    await page.context().close();
  });

  it('prints the static pictures instead of the drawn figures, within the paper', async () => {
    const { page } = await open(1280, 800);
    await page.waitForFunction(() => document.querySelectorAll('.sb-shown').length > 0);
    await page.emulateMedia({ media: 'print' });
    await page.setViewportSize({ width: 688, height: 1000 }); // A4 less its margins, at 96 pixels an inch
    expect(await page.locator('.sb-picture').first().isVisible()).toBe(true);
    expect(await page.locator('.sb-plot').first().isVisible()).toBe(false);
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(688);
    await page.context().close();
  });

  it('is one file of at most 3.5 MB with the figure library once', () => {
    expect(statSync(sticky.page).size).toBeLessThan(3.5e6);
    expect(readFileSync(sticky.page, 'utf8').match(/class="sb-library"/g)).toHaveLength(1);
  });
});

describe('other records', () => {
  it('shows measured travel against OP before PV against OP', async () => {
    const { notebook } = await render('data/31-FC-104-with-travel.csv');
    const figures = figuresIn(allOutputs(notebook));
    const places = ['travel', 'phase'].map((word) => figures.findIndex((id) => id.includes(word)));
    expect(places[0]).toBeGreaterThanOrEqual(0);
    expect(places[0]).toBeLessThan(places[1]!);
  });

  it('renders a record that answers nothing, and says what record to ask for', async () => {
    const lines = readFileSync('data/31-FC-104.csv', 'utf8').split('\n').slice(0, 21);
    mkdirSync(join(folder, 'in'));
    const file = join(folder, 'in', 'twenty-31-FC-104.csv');
    writeFileSync(file, `${lines.join('\n')}\n`);
    const { notebook, assessment } = await render(file);
    expect(assessment.cause.verdict).toBe('cannot-tell');
    expect(allOutputs(notebook)).toContain('Get better data');
    expect(allOutputs(notebook)).toMatch(/20 samples in a cycle and at least 20 cycles/);
  });
});

describe('the notebook as it is kept', () => {
  const kept: Notebook = JSON.parse(readFileSync('notebooks/assess-one-loop.ipynb', 'utf8'));

  it('holds no outputs, and runs as it is, on the bundled demo loop', async () => {
    for (const cell of kept.cells)
      expect([cell.outputs ?? [], cell.execution_count ?? null]).toEqual([[], null]);
    const executed = await runNotebook(kept, { jupyter: findJupyter()!, workingFolder: 'notebooks' });
    expect(allOutputs(executed)).toContain(withInterval(sticky.assessment.stiction!.S));
  });

  it('shares its kernel with the code of the README, which works as printed', async () => {
    const source = /```ts\n(import [^`]*)```/.exec(readFileSync('README.md', 'utf8'))![1]!;
    const cell: NotebookCell = { cell_type: 'code', id: 'readme', source, metadata: {}, outputs: [] };
    const executed = await runNotebook(
      { ...kept, cells: [{ ...cell, execution_count: null }] },
      { jupyter: findJupyter()!, workingFolder: 'notebooks' },
    );
    expect(figuresIn(allOutputs(executed))).toEqual(['trend']);
    expect(allOutputs(executed)).toContain('31-FC-104');
  });

  it.each([
    [
      'does not compile',
      "const count: number = 'one';",
      /Cell 1 .*Type 'string' is not assignable to type 'number'/s,
    ],
    ['throws', "throw new Error('on purpose');", /Cell 1 .*on purpose/s],
  ])('tells which cell failed and why when a cell %s', async (_, source, message) => {
    const cell: NotebookCell = {
      cell_type: 'code',
      id: 'one',
      source,
      metadata: {},
      outputs: [],
      execution_count: null,
    };
    await expect(
      runNotebook({ ...kept, cells: [cell] }, { jupyter: findJupyter()!, workingFolder: 'notebooks' }),
    ).rejects.toThrow(message);
  });
});
