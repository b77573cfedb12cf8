import { JSDOM } from 'jsdom';
import { describe, expect, it } from 'vitest';
import type { Assessment } from '../../src/assessment/assessment';
import type { RankedFindings } from '../../src/audit/audit-findings';
import { rankedTableHtml } from '../../src/report/audit-table';
import { madeUnit } from '../audit/made-unit';

const { ranked } = madeUnit();

/** The page with the table, its script run or not. */
function opened(loops: readonly RankedFindings[], scripts = true, hash = ''): Document {
  const page = `<!doctype html><main>${rankedTableHtml(loops)}</main>`;
  const { window } = new JSDOM(page, {
    url: `https://unit.invalid/${hash}`,
    runScripts: scripts ? 'dangerously' : undefined,
    beforeParse: (made) => {
      made.Element.prototype.scrollIntoView = () => {};
    },
  });
  return window.document;
}

const tagsOf = (document: Document): string[] =>
  [...document.querySelectorAll('.sb-ranked tbody strong:first-child')]
    .map((tag) => tag.textContent!)
    .filter((text) => /^\d\d-/.test(text));

function sortBy(document: Document, head: string): string[] {
  const found = [...document.querySelectorAll('thead th')].find((th) => th.textContent === head)!;
  found.querySelector('button')!.click();
  return tagsOf(document);
}

describe('the ranked table', () => {
  it('has a row a loop in ranked order, with a picture, and its whole answer folded in, without any script', () => {
    const document = opened(ranked, false);
    expect(tagsOf(document)).toEqual(ranked.map(({ assessment }) => assessment.loop));
    expect(document.querySelectorAll('thead button')).toHaveLength(0);
    const bodies = [...document.querySelectorAll('.sb-ranked > table > tbody')];
    expect(bodies).toHaveLength(ranked.length);
    for (const body of bodies) {
      const [row, more] = [...(body as HTMLTableSectionElement).rows];
      expect(row!.querySelector('img')!.src).toMatch(/^data:image\/svg\+xml;base64,/);
      expect(row!.cells).toHaveLength(document.querySelectorAll('thead th').length);
      expect(more!.cells[0]!.colSpan).toBe(row!.cells.length);
      expect(more!.querySelector('details')!.open).toBe(false);
    }
    const first = bodies[0]!.textContent!;
    for (const words of [
      'stiction',
      'confidence 90 %',
      '4.00',
      '(3.60 to 4.40)',
      '2 % of range',
      'likely source',
    ])
      expect(first).toContain(words);
    expect(first).toContain('Confirm on site, then have the final control assembly of 31-FC-201 checked');
    expect(first).toContain('Work request, to copy');
  });

  it('sorts by a column, turns round at the next click, and keeps what has no value last', () => {
    const document = opened(ranked);
    const sticky = '31-FC-201';
    expect(sortBy(document, 'loop')).toEqual(ranked.map(({ assessment }) => assessment.loop).sort());
    expect(sortBy(document, 'loop')).toEqual(
      ranked
        .map(({ assessment }) => assessment.loop)
        .sort()
        .reverse(),
    );
    // Only one loop has S, and only it has a range.
    expect(sortBy(document, 'dead band S, %')[0]).toBe(sticky);
    expect(sortBy(document, 'dead band S, %')[0]).toBe(sticky);
    const periods = sortBy(document, 'period');
    expect(periods.slice(-2)).toEqual(['31-PC-231', '31-TC-308']); // 37 s, then none
    expect(sortBy(document, 'period')[0]).toBe('31-PC-231');
    expect(document.querySelectorAll('[aria-sort]')).toHaveLength(1);
    expect(sortBy(document, 'place')).toEqual(ranked.map(({ assessment }) => assessment.loop));
  });

  it('unfolds the loop that the address names', () => {
    const open = [...opened(ranked, true, '#sb-loop-2').querySelectorAll('details')].map((one) => one.open);
    expect(open).toEqual([false, true, false, false, false]);
  });

  it('shows what an assessment may hold, and escapes what comes from outside', () => {
    const [{ assessment, ...rest }] = ranked as [RankedFindings];
    const full: Assessment = {
      ...assessment,
      loop: '<31>',
      controller: { form: 'PI', gain: 0.4, integralTime: 90, explains: 0.99 },
      stiction: { ...assessment.stiction!, J: { value: 1.2, low: 1, high: 1.4, unit: '% of OP span' } },
      oscillation: { ...assessment.oscillation, others: [250] },
      record: { ...assessment.record, notes: [{ code: 'unit', text: 'Taken as <kPa>.' }] },
      stictionRefused: ['None was refused.'],
      next: [{ do: 'Ask.', why: 'It is cheap.', caution: 'Mind the step.' }],
      cause: { ...assessment.cause, reasons: ['Because.'], ruledOut: ['Not that.'] },
    };
    const html = rankedTableHtml([{ ...rest, assessment: full }], { pages: { '<31>': 'loops/1-a b.html' } });
    for (const words of [
      'PI, gain 0.4, integral time 90 s',
      '1.20 % of OP span (1.00 to 1.40)',
      '4.17 min',
      'Taken as &lt;kPa&gt;.',
      'Mind the step.',
      'Because.',
      'Not that.',
      'None was refused.',
      'href="loops/1-a%20b.html"',
    ])
      expect(html).toContain(words);
    expect(html).not.toContain('<31>');
    expect(html.replace(/<script>.*/s, '')).not.toMatch(/undefined|NaN|null/);
  });

  it('is left out when no loop was assessed', () => {
    expect(rankedTableHtml([])).toBe('');
  });
});
