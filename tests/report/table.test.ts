import { describe, expect, it } from 'vitest';
import { tableHtml } from '../../src/report/table';

const table = Object.freeze({
  title: 'Cycles <all>',
  columns: [
    { name: 'from, s', values: [0, 61.23456, 120] },
    { name: 'note', values: ['a & b', null, 'c'] },
    { name: 'whole', values: [true, false, true] },
  ],
});

describe('a table as HTML', () => {
  it('shows four significant digits, dashes for null, words for truth, and escapes text', () => {
    const html = tableHtml(table);
    expect(html).toContain('<td class="sb-number" data-column="from, s">61.23</td>');
    expect(html).toContain('>–</td>');
    expect(html).toContain('>no</td>');
    expect(html).toContain('a &amp; b');
    expect(html).toContain('Cycles &lt;all&gt;');
  });

  it('says how many rows it leaves out', () => {
    const html = tableHtml(table, { rows: 2 });
    expect(html).toContain('First 2 of 3.');
    expect(html.match(/<tr>/g)).toHaveLength(3);
    expect(html).not.toContain('120');
  });

  it('can be folded under its title', () => {
    expect(tableHtml(table, { folded: true })).toMatch(/^<details.*<summary><strong>Cycles &lt;all&gt;/);
  });

  it('says that it is empty instead of showing a bare head', () => {
    expect(tableHtml({ title: 'Slips', columns: [{ name: 'time, s', values: [] }] })).toBe(
      '<p><strong>Slips.</strong> None.</p>',
    );
  });
});
