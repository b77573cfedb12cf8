/** The notebook of an audit through real Jupyter and its kernel, and its page in a real browser, offline; with 300 loops too. */
import { copyFileSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { cautions } from '../../src/assessment/cautions';
import type { Audit } from '../../src/audit/audit';
import { auditCard } from '../../src/audit/audit-card';
import type { AuditFindings } from '../../src/audit/audit-findings';
import { periodMapFigure } from '../../src/figures/period-map-figure';
import { auditCardHtml, groupsHtml } from '../../src/report/audit-html';
import { rankedTableHtml } from '../../src/report/audit-table';
import { figureHtml } from '../../src/report/figure-html';
import { figureLibraryHtml } from '../../src/report/figure-library';
import { escapeHtml } from '../../src/report/html-text';
import { componentStyle } from '../../src/report/look';
import { joined, type Notebook, type NotebookCell } from '../../src/report/notebook-file';
import { pageOf } from '../../src/report/page';
import { staticPictures } from '../../src/report/static-picture';
import { largeUnit } from '../audit/made-unit';
import { captured } from '../cli/captured';
import { scratchFolder } from '../scratch-folder';
import { startBrowser } from './browser';
import { expectKeptWithoutOutputs, expectRanWhole } from './notebook-checks';
import { openPage } from './open-page';

/** Of the demo unit: a sticky valve, two loops that it shakes, a healthy one. */
const demo = ['31-FC-201', '31-PC-202', '31-TC-204', '31-FC-301'];

const folder = scratchFolder();
const unit = join(folder, 'unit');
const out = join(folder, 'out');
let audit: Audit;
let notebook: Notebook;
let browser: Browser;

beforeAll(async () => {
  browser = await startBrowser();
  mkdirSync(unit);
  for (const tag of demo) copyFileSync(join('data', 'unit', `${tag}.csv`), join(unit, `${tag}.csv`));
  writeFileSync(join(unit, '31-FC-900.csv'), 'time,A\n2026-03-10T06:00:00Z,1\n');
  writeFileSync(join(unit, 'notes.md'), 'Not a loop.');
  const words = [unit, '--out', out, '--workers', '0', '--pages', '1'];
  const { code, stdout, stderr } = await captured('audit', ...words);
  expect(stderr).not.toMatch(/fault/);
  expect(code).toBe(0);
  expect(stdout).toContain(`Page to share:  ${join(out, 'audit.html')}`);
  audit = JSON.parse(readFileSync(join(out, 'audit.json'), 'utf8'));
  notebook = JSON.parse(readFileSync(join(out, 'audit.ipynb'), 'utf8'));
});
afterAll(() => browser?.close());

const outputsOf = (cell: NotebookCell): string[] =>
  (cell.outputs ?? []).map((output) => joined(output.data?.['text/html'] as string[] | undefined));
const allOutputs = (): string => notebook.cells.flatMap(outputsOf).join('\n');

const sizes: readonly [number, number][] = [
  [1280, 800],
  [390, 844],
];

/** No part of the page reaches out of it, but what scrolls in a box of its own. */
async function expectFits(page: Page, width: number): Promise<void> {
  expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(width);
  const cut = await page.evaluate(() =>
    [...document.querySelectorAll('.sb-card *, .sb-more details, .sb-more details *, .sb-folded summary')]
      .filter((part) => part.getBoundingClientRect().right > document.documentElement.clientWidth + 1)
      .map((part) => `${part.tagName} ${part.textContent!.slice(0, 40)}`),
  );
  expect(cut).toEqual([]);
}

describe('the notebook of an audit', () => {
  it('ran every cell without a word on stderr, and shows the answer first', () => {
    expectRanWhole(notebook);
    const [before, answer] = allOutputs().split('<section');
    expect(before!.replace(/<(style|script)[\s\S]*?<\/\1>/g, '').trim()).toBe('');
    const card = auditCard(audit);
    for (const text of [card.headline, card.counts, ...card.together, ...cautions])
      expect(answer).toContain(escapeHtml(text));
  });

  it('shows the audit of the JSON, from the journal, with every loop and the one that failed', () => {
    const html = allOutputs();
    expect(audit.ranking[0]!.loop).toBe('31-FC-201');
    expect(audit.groups[0]!.likelySource).toBe('31-FC-201');
    for (const { loop, score } of audit.ranking) {
      expect(html).toContain(`<strong>${loop}</strong>`);
      expect(html).toContain(`>${score.toFixed(1)}</td>`);
    }
    for (const reason of audit.groups[0]!.reasons) expect(html).toContain(escapeHtml(reason));
    const failed = audit.loops.find(({ schema }) => schema === 'stickband/failed-loop/1') as {
      error: string;
    };
    expect(html).toContain(escapeHtml(failed.error));
    expect(html).toContain('notes.md');
    // One line a loop, and none twice: the notebook did nothing again, not even the loop that failed.
    const journal = readFileSync(join(out, 'audit.jsonl'), 'utf8').trim().split('\n');
    expect(journal).toHaveLength(1 + audit.loops.length);
  });

  it('links to the page of the first loop, which is there', () => {
    const [link] = /loops\/1-[^"]+\.html/.exec(allOutputs())!;
    expect(link).toBe('loops/1-31-FC-201.html');
    expect(readFileSync(join(out, link), 'utf8')).toContain('31-FC-201: what makes this loop cycle?');
    expect(readdirSync(join(out, 'loops'))).toHaveLength(2);
  });

  it('is made of merged shards as well, without their records', async () => {
    const parts = join(folder, 'parts');
    for (const shard of ['1/2', '2/2']) {
      const words = [unit, '--out', parts, '--shard', shard, '--workers', '0'];
      expect((await captured('audit', ...words)).code).toBe(0);
    }
    const named = [1, 2].map((shard) => join(parts, `audit-part-${shard}-of-2.json`));
    const { code } = await captured('merge', ...named, '--out', join(folder, 'merged'));
    expect(code).toBe(0);
    const merged = (name: string): string => readFileSync(join(folder, 'merged', name), 'utf8');
    expect(merged('audit.json')).toBe(readFileSync(join(out, 'audit.json'), 'utf8'));
    const page = merged('audit.html');
    for (const { loop } of audit.ranking) expect(page).toContain(`<strong>${loop}</strong>`);
    expect(page).toContain(escapeHtml(auditCard(audit).headline));
  });

  it('holds no outputs as it is kept', () => {
    expectKeptWithoutOutputs('notebooks/audit-a-unit.ipynb');
  });

  it('leaves a CSV beside it, with every caution', () => {
    const csv = readFileSync(join(out, 'audit.csv'), 'utf8');
    expect(csv.trim().split('\r\n')).toHaveLength(1 + audit.loops.length);
    for (const caution of cautions) expect(csv).toContain(caution);
  });
});

describe('the page of an audit', () => {
  it.each(sizes)('draws, fits and complains of nothing at %i x %i pixels', async (width, height) => {
    const { page, trouble } = await openPage(browser, join(out, 'audit.html'), width, height);
    await page.waitForFunction(() => document.querySelectorAll('.sb-shown').length === 1);
    for (const part of ['.sb-unit h2', '.sb-unit .sb-cause', '.sb-unit ol li >> nth=0']) {
      const box = (await page.locator(part).boundingBox())!;
      expect(box.y + box.height).toBeLessThan(height);
    }
    await page.locator('.sb-more summary >> nth=0').click();
    await expectFits(page, width);
    expect(trouble).toEqual([]);
    await page.context().close();
  });

  it('leads from the card to the whole answer of a loop in one click', async () => {
    const { page } = await openPage(browser, join(out, 'audit.html'), 390, 844);
    const whole = page.locator('.sb-whole >> nth=0');
    expect(await whole.isVisible()).toBe(false);
    await page.locator('.sb-unit ol a >> nth=0').click();
    await whole.waitFor({ state: 'visible' });
    expect(await whole.locator('.sb-cycles').evaluate((image: HTMLImageElement) => image.naturalWidth)).toBe(
      200,
    );
    await page.context().close();
  });

  it('tells each loop, and all cautions, where scripts are off', async () => {
    const { page, trouble } = await openPage(browser, join(out, 'audit.html'), 1280, 800, false);
    await page.locator('.sb-more summary >> nth=1').click();
    expect(await page.locator('.sb-whole >> nth=1').isVisible()).toBe(true);
    expect(await page.locator('.sb-picture').isVisible()).toBe(true);
    const text = await page.locator('main').textContent();
    for (const caution of cautions) expect(text).toContain(caution);
    expect(trouble).toEqual([]);
    await page.context().close();
  });
});

/** The page that the notebook of `unit` becomes, without the kernel. */
async function pageWith(unit: AuditFindings): Promise<string> {
  const figure = periodMapFigure(unit)!;
  const [picture] = await staticPictures([figure]);
  const parts = [
    `<style>${componentStyle}</style>\n${figureLibraryHtml()}`,
    auditCardHtml(auditCard(unit.audit), ''),
    rankedTableHtml(unit.ranked),
    figureHtml(figure, picture!),
    groupsHtml(unit.audit.groups),
  ];
  const cells = parts.map((html): NotebookCell => {
    const output = { output_type: 'display_data', data: { 'text/html': html } } as const;
    return { cell_type: 'code', source: '', metadata: {}, outputs: [output] };
  });
  return pageOf({ cells, metadata: {}, nbformat: 4, nbformat_minor: 5 }, 'Audit');
}

describe('the page of an audit of 300 loops', () => {
  const path = join(folder, 'large.html');
  beforeAll(async () => writeFileSync(path, await pageWith(largeUnit(300))));

  it('stays under 10 MB', () => {
    expect(statSync(path).size).toBeLessThan(10e6);
  });

  it.each(sizes)('opens soon, fits, and sorts at %i x %i pixels', async (width, height) => {
    const started = performance.now();
    const { page, trouble } = await openPage(browser, path, width, height);
    // Read within a second or two on an idle machine; the bound leaves room for a busy one.
    expect(performance.now() - started).toBeLessThan(10_000);
    expect(await page.locator('.sb-ranked > table > tbody').count()).toBe(250);
    await expectFits(page, width);
    const first = page.locator('.sb-ranked > table > tbody strong >> nth=0');
    expect(await first.textContent()).toBe('31-FC-201');
    const byLoop = page.locator('.sb-ranked th button', { hasText: /^loop$/ });
    await byLoop.click();
    await byLoop.click();
    expect(await first.textContent()).toBe('80-TC-308');
    expect(trouble).toEqual([]);
    await page.context().close();
  });
});
