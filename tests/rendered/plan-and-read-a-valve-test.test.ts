/** The guided notebook for valve tests through real Jupyter, and the page made from it in a real browser, offline. */
import { readFileSync } from 'node:fs';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { cautions, valveTestCautions } from '../../src/assessment/cautions';
import { withInterval } from '../../src/assessment/make-answer-card';
import { readValveTest } from '../../src/field-test/read-valve-test';
import { escapeHtml } from '../../src/report/html-text';
import { findJupyter } from '../../src/report/jupyter';
import { joined, type Notebook } from '../../src/report/notebook-file';
import { type Rendered, renderNotebook } from '../../src/report/render-notebook';
import { scratchFolder } from '../scratch-folder';
import { startBrowser } from './browser';
import { expectKeptWithoutOutputs, expectRanWhole } from './notebook-checks';
import { openPage } from './open-page';

const kept = 'notebooks/plan-and-read-a-valve-test.ipynb';
const folder = scratchFolder();
let rendered: Rendered;
let notebook: Notebook;
let shown: string;
let browser: Browser;

const figuresIn = (html: string): string[] =>
  [...html.matchAll(/data-figure="([^"]+)"/g)].map((match) => match[1]!);

beforeAll(async () => {
  browser = await startBrowser();
  rendered = await renderNotebook(kept, {
    jupyter: findJupyter()!,
    folder,
    name: 'valve-test',
    title: '31-FC-104: what does a test of this valve say?',
    files: { file: 'data/31-FC-104.csv' },
    parameters: {},
  });
  notebook = JSON.parse(readFileSync(rendered.notebook, 'utf8'));
  shown = notebook.cells
    .flatMap((cell) => cell.outputs ?? [])
    .map((output) => joined(output.data?.['text/html'] as string[] | undefined))
    .join('\n');
});
afterAll(() => browser?.close());

describe('the notebook for valve tests', () => {
  it('is kept without outputs, and ran every cell without a word on stderr', () => {
    expectKeptWithoutOutputs(kept);
    expectRanWhole(notebook);
  });

  it('shows what the functions give: dead band, spring and friction of the demo tests', () => {
    const size = { area: '645 cm2', stroke: '101.6 mm' };
    const step = readValveTest('data/31-FC-104-step-test.csv', size);
    const stroke = readValveTest('data/31-FC-104-stroke.csv', size);
    const first = shown.indexOf('<section');
    expect(shown.indexOf(withInterval(step.reading.deadBand!))).toBeGreaterThan(first);
    for (const one of [
      stroke.reading.S!,
      stroke.friction!.springRate!,
      stroke.friction!.frictionBand.force!,
    ]) {
      expect(shown).toContain(withInterval(one));
    }
    expect(shown).toContain('the cycle died');
    expect(shown).toContain('step-down');
  });

  it('draws a figure for each test, the plan and the friction, each with its picture', () => {
    expect(figuresIn(shown)).toEqual([
      'test-plan-step',
      'test-trend-hold',
      'test-trend-step',
      'test-loop-step',
      'test-response',
      'test-trend-stroke',
      'test-loop-stroke',
      'stroke-pressure',
      'stroke-pressure',
      'stroke-friction',
      'test-loop-stroke-simulated',
    ]);
    expect(shown.match(/<img class="sb-picture" src="data:image\/svg\+xml;base64,/g)).toHaveLength(11);
  });

  it('carries the cautions of tests with every card, and the standing of the plan', () => {
    const cards = shown.split('<section').slice(1);
    expect(cards).toHaveLength(3);
    for (const card of cards) {
      for (const caution of valveTestCautions) expect(card).toContain(escapeHtml(caution));
    }
    expect(cards[1]).toContain('proposal, not released');
    // An assessment is no test of a valve; a test is one.
    expect(shown).not.toContain(escapeHtml(cautions[0]!));
  });

  it('names no folder of this machine', () => {
    const text = JSON.stringify(notebook);
    expect(text).not.toContain(process.cwd());
    expect(text).not.toContain(folder);
  });
});

describe('the page of the notebook for valve tests', () => {
  it.each([
    [1280, 800],
    [390, 844],
  ])(
    'says the answer on the first screen at %i pixels and draws every figure within it',
    async (width, height) => {
      const { page, trouble } = await openPage(browser, rendered.page, width, height);
      for (const part of ['.sb-card h2', '.sb-cause', '.sb-tiles .sb-value >> nth=0']) {
        const box = (await page.locator(part).first().boundingBox())!;
        expect(box.y + box.height).toBeLessThan(height);
      }
      const count = figuresIn(shown).length;
      await page.waitForFunction((wanted) => document.querySelectorAll('.sb-shown').length === wanted, count);
      const within = await page.evaluate(() =>
        [...document.querySelectorAll('.sb-figure')].map((figure) => {
          const plot = figure.querySelector('.main-svg')!.getBoundingClientRect();
          return plot.width > 200 && plot.width <= figure.clientWidth && plot.height > 100;
        }),
      );
      expect(within).toEqual(Array(count).fill(true));
      expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(width);
      expect(trouble).toEqual([]);
      await page.context().close();
    },
  );
});
