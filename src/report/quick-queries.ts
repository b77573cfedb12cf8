/**
 * Shortcuts through jsdom for the questions that the figure library asks thousands of times a picture: elements by
 * one tag or some classes, and the style of an element. Together they save a quarter of the time.
 */
import type { DOMWindow } from 'jsdom';

/** A selector such as `g`, `.trace` or `path.js-line.crisp`; anything else goes to jsdom. */
const plainSelector = /^([a-zA-Z]*)((?:\.[\w-]+)*)$/;

/** Right only for a page whose style sheets do not matter to the figure, as styles are read from the elements alone. */
export function installQuickQueries(window: DOMWindow): void {
  const { prototype } = window.Element;
  const { querySelector, querySelectorAll } = prototype;
  prototype.querySelector = function (this: Element, selector: string): Element | null {
    const wanted = plainSelector.exec(selector);
    if (wanted === null) return querySelector.call(this, selector);
    return matches(this, wanted[1], classesOf(wanted[2]), true)[0] ?? null;
  } as typeof querySelector;
  prototype.querySelectorAll = function (this: Element, selector: string): ArrayLike<Element> {
    const wanted = plainSelector.exec(selector);
    if (wanted === null) return querySelectorAll.call(this, selector);
    return matches(this, wanted[1], classesOf(wanted[2]), false);
  } as typeof querySelectorAll;
  window.getComputedStyle = (element) => (element as HTMLElement).style;
}

function classesOf(part: string): string[] {
  return part.split('.').filter((name) => name !== '');
}

/** Elements below `top` in document order, or the first of them alone. */
function matches(top: Element, tag: string, classes: readonly string[], first: boolean): Element[] {
  const found: Element[] = [];
  const walk = (parent: Element): void => {
    for (let child = parent.firstElementChild; child !== null; child = child.nextElementSibling) {
      if (tag === '' || child.localName === tag) {
        const own = ` ${child.getAttribute('class') ?? ''} `;
        if (classes.every((name) => own.includes(` ${name} `))) found.push(child);
      }
      if (first && found.length > 0) return;
      walk(child);
    }
  };
  walk(top);
  return found;
}
