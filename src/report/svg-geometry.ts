/**
 * Sizes of SVG elements for a page without layout (jsdom): bounding boxes from attributes, transforms and typical
 * letter widths, and lengths of paths. Right to a few pixels, which is what placing labels and legends needs.
 */
import type { DOMWindow } from 'jsdom';
import { svgPathProperties } from 'svg-path-properties';

interface Box {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
}

/** Maps (x, y) to (a x + c y + e, b x + d y + f), as SVG orders it. */
type Matrix = readonly [a: number, b: number, c: number, d: number, e: number, f: number];

const identity: Matrix = [1, 0, 0, 1, 0, 0];

/** Gives the SVG elements of `window` the measures that jsdom leaves out. */
export function installSvgGeometry(window: DOMWindow): void {
  const svg = window.SVGElement.prototype as SVGElement & {
    getTotalLength(): number;
    getPointAtLength(length: number): { x: number; y: number };
  };
  svg.getBoundingClientRect = function (this: SVGElement): DOMRect {
    const { left, top, right, bottom } = boxOf(this, placeOf(this)) ?? {
      left: 0,
      top: 0,
      right: 0,
      bottom: 0,
    };
    const rect = { x: left, y: top, left, top, right, bottom, width: right - left, height: bottom - top };
    return { ...rect, toJSON: () => rect };
  };
  svg.getTotalLength = function (this: SVGElement): number {
    return new svgPathProperties(this.getAttribute('d') ?? '').getTotalLength();
  };
  svg.getPointAtLength = function (this: SVGElement, length: number): { x: number; y: number } {
    return new svgPathProperties(this.getAttribute('d') ?? '').getPointAtLength(length);
  };
}

/** The transform of everything around `element`, its own left out. */
function placeOf(element: Element): Matrix {
  const parent = element.parentElement;
  return parent === null ? identity : times(placeOf(parent), transformOf(parent));
}

function boxOf(element: Element, place: Matrix): Box | null {
  const here = times(place, transformOf(element));
  const number = (name: string): number => Number.parseFloat(element.getAttribute(name) ?? '') || 0;
  switch (element.tagName.toLowerCase()) {
    case 'g':
    case 'svg':
    case 'a':
      return around(Array.from(element.children, (child) => boxOf(child, here)));
    case 'rect':
    case 'image': {
      const [x, y] = [number('x'), number('y')];
      return mapped(here, { left: x, top: y, right: x + number('width'), bottom: y + number('height') });
    }
    case 'path': {
      const parts = new svgPathProperties(element.getAttribute('d') ?? '').getParts();
      const ends = parts.flatMap(({ start, end }) => [start, end]);
      return around(ends.map(({ x, y }) => mapped(here, { left: x, top: y, right: x, bottom: y })));
    }
    case 'text':
      return around(linesOf(element).map((line) => mapped(here, line)));
    default:
      return null;
  }
}

/** A box a line of a text element; Plotly marks lines after the first break as `tspan.line`. */
function linesOf(text: Element): Box[] {
  const lines = Array.from(text.querySelectorAll('tspan.line'));
  const size = fontSizeOf(text);
  const anchor = (text as SVGElement).style.textAnchor || text.getAttribute('text-anchor');
  return (lines.length > 0 ? lines : [text]).map((line) => {
    const from = (name: string): number =>
      Number.parseFloat(line.getAttribute(name) ?? text.getAttribute(name) ?? '') || 0;
    const width = widthOf(line, size);
    const left = from('x') - (anchor === 'middle' ? width / 2 : anchor === 'end' ? width : 0);
    const base = from('y') + Number.parseFloat(line.getAttribute('dy') ?? '0') * size;
    return { left, right: left + width, top: base - 0.93 * size, bottom: base + 0.24 * size };
  });
}

function widthOf(node: Node, size: number): number {
  let width = 0;
  for (const child of Array.from(node.childNodes)) {
    if (child.nodeType === 3) {
      for (const letter of child.nodeValue ?? '') width += letterWidth(letter) * size;
    } else {
      const { fontSize, fontWeight } = (child as SVGElement).style;
      width += widthOf(child, Number.parseFloat(fontSize) || size) * (fontWeight === 'bold' ? 1.1 : 1);
    }
  }
  return width;
}

/** Width of a letter in a common sans-serif face, in font sizes. */
function letterWidth(letter: string): number {
  if (/[ijlI.,:;'|!()[\]ftr /]/.test(letter)) return 0.35;
  if (/[mwMW%@]/.test(letter)) return 0.9;
  return /[A-Z]/.test(letter) ? 0.67 : 0.6;
}

function fontSizeOf(element: Element): number {
  for (let at: Element | null = element; at !== null; at = at.parentElement) {
    const size = Number.parseFloat((at as SVGElement).style?.fontSize ?? '');
    if (size > 0) return size;
  }
  return 12;
}

function transformOf(element: Element): Matrix {
  let matrix = identity;
  for (const [, kind, list] of (element.getAttribute('transform') ?? '').matchAll(/(\w+)\(([^)]*)\)/g)) {
    const [p = 0, q, r, s = 0, t = 0, u = 0] = list.split(/[\s,]+/).map(Number);
    if (kind === 'translate') matrix = times(matrix, [1, 0, 0, 1, p, q ?? 0]);
    else if (kind === 'scale') matrix = times(matrix, [p, 0, 0, q ?? p, 0, 0]);
    else if (kind === 'matrix') matrix = times(matrix, [p, q ?? 0, r ?? 0, s, t, u]);
    else if (kind === 'rotate') {
      const [cos, sin] = [Math.cos((p * Math.PI) / 180), Math.sin((p * Math.PI) / 180)];
      const [x, y] = [q ?? 0, r ?? 0];
      matrix = times(matrix, [cos, sin, -sin, cos, x - cos * x + sin * y, y - sin * x - cos * y]);
    }
  }
  return matrix;
}

function times([a, b, c, d, e, f]: Matrix, [g, h, i, j, k, l]: Matrix): Matrix {
  return [a * g + c * h, b * g + d * h, a * i + c * j, b * i + d * j, a * k + c * l + e, b * k + d * l + f];
}

function mapped([a, b, c, d, e, f]: Matrix, { left, top, right, bottom }: Box): Box {
  const x = [a * left + c * top, a * right + c * top, a * left + c * bottom, a * right + c * bottom];
  const y = [b * left + d * top, b * right + d * top, b * left + d * bottom, b * right + d * bottom];
  return {
    left: Math.min(...x) + e,
    right: Math.max(...x) + e,
    top: Math.min(...y) + f,
    bottom: Math.max(...y) + f,
  };
}

function around(boxes: readonly (Box | null)[]): Box | null {
  const real = boxes.filter((box): box is Box => box !== null);
  if (real.length === 0) return null;
  return {
    left: Math.min(...real.map((box) => box.left)),
    top: Math.min(...real.map((box) => box.top)),
    right: Math.max(...real.map((box) => box.right)),
    bottom: Math.max(...real.map((box) => box.bottom)),
  };
}
