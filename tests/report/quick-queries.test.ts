import { JSDOM } from 'jsdom';
import { describe, expect, it } from 'vitest';
import { installQuickQueries } from '../../src/report/quick-queries';

const inner =
  '<div class="a"><p id="p1" class="b c"><span class="b">x</span></p></div><p id="p2" class="bc"></p><svg><g class="c  b"></g></svg>';
const selectors = [
  'p',
  '.b',
  '.b.c',
  'p.b',
  'g.b.c',
  '.none',
  'svg',
  '#p2',
  'div .b',
  'p:first-child',
  '[class^="b"]',
];

describe('installQuickQueries', () => {
  it('finds what jsdom itself finds, in the same order', () => {
    const plain = new JSDOM(`<body>${inner}</body>`).window;
    const quick = new JSDOM(`<body>${inner}</body>`).window;
    installQuickQueries(quick);
    const tell = (element: Element | null) =>
      element && `${element.tagName} ${element.id} ${element.className}`;
    for (const selector of selectors) {
      const want = [...plain.document.body.querySelectorAll(selector)].map(tell);
      expect(Array.from(quick.document.body.querySelectorAll(selector), tell), selector).toEqual(want);
      expect(tell(quick.document.body.querySelector(selector)), selector).toEqual(want[0] ?? null);
    }
  });

  it('reads the style that an element has of its own', () => {
    const { window } = new JSDOM('<p style="font-size: 13px">x</p>');
    installQuickQueries(window);
    expect(window.getComputedStyle(window.document.querySelector('p')!).fontSize).toBe('13px');
  });
});
