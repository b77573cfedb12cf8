import { JSDOM } from 'jsdom';
import { describe, expect, it } from 'vitest';
import { installSvgGeometry } from '../../src/report/svg-geometry';

const { window } = new JSDOM('');
installSvgGeometry(window);

function boxOf(inner: string, id = 'it') {
  window.document.body.innerHTML = `<svg>${inner}</svg>`;
  const { left, top, right, bottom } = window.document.getElementById(id)!.getBoundingClientRect();
  return [left, top, right, bottom].map((value) => Number(value.toFixed(6)));
}

describe('bounding boxes', () => {
  it('follow the transforms around an element (SVG 1.1, chapter 7: applied from the inside out)', () => {
    const rect = '<rect id="it" x="1" y="2" width="3" height="4"/>';
    expect(boxOf(rect)).toEqual([1, 2, 4, 6]);
    expect(boxOf(`<g transform="translate(10,20)">${rect}</g>`)).toEqual([11, 22, 14, 26]);
    expect(boxOf(`<g transform="translate(10 20) scale(2)">${rect}</g>`)).toEqual([12, 24, 18, 32]);
    expect(boxOf(`<g transform="rotate(90)">${rect}</g>`)).toEqual([-6, 1, -2, 4]);
    expect(boxOf(`<g transform="rotate(90, 1, 2)">${rect}</g>`)).toEqual([-3, 2, 1, 5]);
    expect(boxOf(`<g transform="matrix(1,0,0,1,5,6)">${rect}</g>`)).toEqual([6, 8, 9, 12]);
  });

  it('enclose what a group holds', () => {
    expect(
      boxOf('<g id="it"><rect x="1" y="1" width="1" height="1"/><path d="M5,6L9,8"/><defs/></g>'),
    ).toEqual([1, 1, 9, 8]);
    expect(boxOf('<g id="it"></g>')).toEqual([0, 0, 0, 0]);
  });

  it('place text by its anchor, its size and its lines', () => {
    const text = (more: string, inner = 'abcd') =>
      boxOf(`<text id="it" x="100" y="50" style="font-size: 10px${more}">${inner}</text>`);
    const [left, top, right, bottom] = text('');
    expect(left).toBe(100);
    expect(right! - left!).toBeCloseTo(24, 6);
    expect([top, bottom]).toEqual([40.7, 52.4]);
    expect(text('; text-anchor: middle')[0]).toBeCloseTo(88, 6);
    expect(text('; text-anchor: end')[2]).toBeCloseTo(100, 6);
    const lines = text(
      '',
      '<tspan class="line" x="100" y="50" dy="0em">ab</tspan><tspan class="line" x="100" y="50" dy="1.3em">abcdeg</tspan>',
    );
    expect(lines[2]! - lines[0]!).toBeCloseTo(36, 6);
    expect(lines[3]! - bottom!).toBeCloseTo(13, 6);
  });

  it('count bold and larger pieces wider', () => {
    const plain = boxOf('<text id="it" style="font-size: 10px">abab</text>')[2]!;
    const bold = boxOf(
      '<text id="it" style="font-size: 10px">ab<tspan style="font-weight: bold">ab</tspan></text>',
    )[2]!;
    const large = boxOf(
      '<text id="it" style="font-size: 10px">ab<tspan style="font-size: 20px">ab</tspan></text>',
    )[2]!;
    expect(bold).toBeGreaterThan(plain);
    expect(large).toBeCloseTo(1.5 * plain, 6);
  });
});

describe('paths', () => {
  it('have a length and points along it', () => {
    window.document.body.innerHTML = '<svg><path id="it" d="M0,0L3,4L3,10"/></svg>';
    const path = window.document.getElementById('it') as unknown as SVGPathElement;
    expect(path.getTotalLength()).toBeCloseTo(11, 9);
    expect(path.getPointAtLength(5)).toMatchObject({ x: 3, y: 4 });
  });
});
