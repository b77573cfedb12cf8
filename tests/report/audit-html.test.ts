import { describe, expect, it } from 'vitest';
import { cautions } from '../../src/assessment/cautions';
import type { LoopGroup } from '../../src/audit/audit';
import { auditCard } from '../../src/audit/audit-card';
import { auditCardHtml, groupsHtml } from '../../src/report/audit-html';
import { rankedTableHtml } from '../../src/report/audit-table';
import { escapeHtml } from '../../src/report/html-text';
import { madeUnit } from '../audit/made-unit';

describe('the answer to a unit as HTML', () => {
  const { audit, ranked } = madeUnit();

  it('leads from each loop that it names first to the place where that loop is told in full', () => {
    const card = auditCard(audit);
    const html = auditCardHtml(card, 'Area 31');
    const table = rankedTableHtml(ranked);
    const links = [...html.matchAll(/<a href="#([^"]+)"><strong>([^<]+)/g)].map(([, id, loop]) => [id, loop]);
    expect(links.map(([, loop]) => loop)).toEqual(card.first.map(({ loop }) => loop));
    for (const [id, loop] of links) {
      const body = table.split('<tbody').find((part) => part.includes(`id="${id}"`))!;
      expect(body).toContain(`<strong>${loop}</strong>`);
    }
    expect(html).toContain('Area 31: records from 2026-03-10 06:00 to 2026-03-10 06:39 UTC');
    for (const caution of cautions) expect(html).toContain(escapeHtml(caution));
  });

  it('escapes what comes from outside', () => {
    const card = { ...auditCard(audit), together: ['<b>'], first: [{ loop: '<i>', line: 'a & b' }] };
    expect(auditCardHtml(card, '<u>')).toContain('&lt;i&gt;</strong></a> a &amp; b');
    expect(auditCardHtml(card, '<u>')).not.toMatch(/<[bu]>/);
  });

  it('unfolds the reasons of a few groups, and folds those of many', () => {
    const group: LoopGroup = { period: 60, loops: ['a', 'b'], likelySource: null, reasons: ['It is open.'] };
    expect(groupsHtml([group])).toContain('<details class="sb-folded" open>');
    expect(groupsHtml([group])).toContain('<li>It is open.</li>');
    expect(groupsHtml(Array(6).fill(group))).not.toContain(' open>');
    expect(groupsHtml([])).toContain('No two loops share a cycle.');
  });
});
