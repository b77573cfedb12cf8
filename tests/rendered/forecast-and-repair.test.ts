/** The guided notebook of retuning and repair through real Jupyter, and the page made from it in a real browser, offline. */
import { readFileSync } from 'node:fs';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { assessLoop } from '../../src/assessment/assess-loop';
import { cautions } from '../../src/assessment/cautions';
import type { Findings } from '../../src/assessment/findings';
import { withInterval } from '../../src/assessment/make-answer-card';
import { compareAssessments } from '../../src/forecast/compare-assessments';
import { notToLoad } from '../../src/forecast/forecast-card';
import { forecastCycle } from '../../src/forecast/forecast-cycle';
import { readLoop } from '../../src/record/read-loop';
import { escapeHtml } from '../../src/report/html-text';
import { findJupyter } from '../../src/report/jupyter';
import { joined, type Notebook } from '../../src/report/notebook-file';
import { type Rendered, renderNotebook } from '../../src/report/render-notebook';
import { scratchFolder } from '../scratch-folder';
import { startBrowser } from './browser';
import { expectKeptWithoutOutputs, expectRanWhole } from './notebook-checks';
import { openPage } from './open-page';

const kept = 'notebooks/forecast-and-repair.ipynb';
const folder = scratchFolder();
let browser: Browser;
let both: Shown;
let beforeOnly: Shown;

interface Shown {
  readonly rendered: Rendered;
  readonly notebook: Notebook;
  readonly html: string;
}

async function render(name: string, parameters: Readonly<Record<string, unknown>>): Promise<Shown> {
  const rendered = await renderNotebook(kept, {
    jupyter: findJupyter()!,
    folder,
    name,
    title: '31-FC-104: what would retuning or repair do?',
    files: { before: 'data/31-FC-104.csv' },
    parameters,
  });
  const notebook: Notebook = JSON.parse(readFileSync(rendered.notebook, 'utf8'));
  const html = notebook.cells
    .flatMap((cell) => cell.outputs ?? [])
    .map((output) => joined(output.data?.['text/html'] as string[] | undefined))
    .join('\n');
  return { rendered, notebook, html };
}

const figuresIn = (html: string): string[] =>
  [...html.matchAll(/data-figure="([^"]+)"/g)].map((match) => match[1]!);
const read = (name: string): Findings =>
  assessLoop(readLoop(`data/${name}.csv`, { pvRange: { low: 0, high: 120 }, pvUnit: 'm3/h' }));

beforeAll(async () => {
  browser = await startBrowser();
  both = await render('both', {});
  beforeOnly = await render('before-only', { after: '' });
});
afterAll(() => browser?.close());

describe('the notebook of retuning and repair', () => {
  it('is kept without outputs, and ran every cell without a word on stderr', () => {
    expectKeptWithoutOutputs(kept);
    for (const { notebook } of [both, beforeOnly]) expectRanWhole(notebook);
  });

  it('shows what the functions give', () => {
    const findings = read('31-FC-104');
    const { forecast } = forecastCycle(findings);
    const comparison = compareAssessments(findings, read('31-FC-104-after-repair'));
    for (const { pvSwing } of [...forecast!.others, forecast!.repaired]) {
      expect(both.html).toContain(withInterval(pvSwing));
    }
    expect(both.html).toContain(escapeHtml(forecast!.inWords[0]!));
    expect(both.html).toContain(escapeHtml(comparison.inWords));
    for (const reason of comparison.reasons) expect(both.html).toContain(escapeHtml(reason));
  });

  it('answers with the comparison once there is a record after the work, before that with the forecast', () => {
    const first = ({ html }: Shown): string => /<h2>(.*?)<\/h2>/.exec(html)![1]!;
    expect(first(both)).toMatch(/^Repaired/);
    expect(first(beforeOnly)).toMatch(/^Retuning does not end the cycle/);
    expect(beforeOnly.html).toContain('No record after the work yet');
  });

  it('draws its figures, each with its picture', () => {
    const figures = ['forecast', 'forecast-map', 'forecast-trend', 'repair-comparison'];
    expect(figuresIn(both.html)).toEqual(figures);
    expect(figuresIn(beforeOnly.html)).toEqual(figures.slice(0, 3));
    expect(both.html.match(/<img class="sb-picture" src="data:image\/svg\+xml;base64,/g)).toHaveLength(4);
  });

  it('carries every caution with each card, and says of settings that they are not to be loaded', () => {
    const cards = both.html.split('<section').slice(1);
    expect(cards).toHaveLength(2);
    for (const card of cards) {
      for (const caution of cautions) expect(card).toContain(escapeHtml(caution));
    }
    expect(cards[1]).toContain(notToLoad);
  });

  it('names no folder of this machine', () => {
    const text = JSON.stringify(both.notebook);
    expect(text).not.toContain(process.cwd());
    expect(text).not.toContain(folder);
  });
});

describe('the page', () => {
  it.each([
    [1280, 800],
    [390, 844],
  ])(
    'says the answer on the first screen at %i pixels and draws every figure within it',
    async (width, height) => {
      const { page, trouble } = await openPage(browser, both.rendered.page, width, height);
      for (const part of ['.sb-card h2', '.sb-cause', '.sb-tiles .sb-value >> nth=0']) {
        const box = (await page.locator(part).first().boundingBox())!;
        expect(box.y + box.height).toBeLessThan(height);
      }
      await page.waitForFunction(() => document.querySelectorAll('.sb-shown').length === 4);
      const within = await page.evaluate(() =>
        [...document.querySelectorAll('.sb-figure')].map((figure) => {
          const plot = figure.querySelector('.main-svg')!.getBoundingClientRect();
          return plot.width > 200 && plot.width <= figure.clientWidth && plot.height > 100;
        }),
      );
      expect(within).toEqual(Array(4).fill(true));
      expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(width);
      expect(trouble).toEqual([]);
      await page.context().close();
    },
  );
});
