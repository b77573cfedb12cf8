import { describe, expect, it } from 'vitest';
import { axis, makeFigure, panelName, plainText, wrapped } from '../../src/figures/layout';

const parts = {
  id: 'a',
  title: 'A figure',
  caption: 'c',
  alt: 'a',
  data: [],
  layout: { xaxis: axis({}) },
  height: 400,
};

interface Drawn {
  height: number;
  margin: { t: number };
  title: { text: string };
  annotations: { text: string }[];
  legend?: object;
}
const layoutOf = (more: object): Drawn => makeFigure({ ...parts, caveats: [], ...more }).layout as Drawn;

describe('makeFigure', () => {
  it('stamps caveats on the figure and makes room for them, so that the panels keep their size', () => {
    const without = layoutOf({});
    const stamped = layoutOf({
      caveats: ['cannot-tell: the record was compressed before it was stored, alas.'],
    });
    expect(without.annotations).toEqual([]);
    expect(stamped.annotations).toHaveLength(1);
    expect(stamped.annotations[0]!.text.replace('<br>', ' ')).toBe(
      'cannot-tell: the record was compressed before it was stored, alas.',
    );
    expect(stamped.height - without.height).toBe(stamped.margin.t - without.margin.t);
    expect(stamped.margin.t).toBeGreaterThan(without.margin.t + 30);
  });

  it('breaks a long title and shows tags and ampersands of a loop name as they stand', () => {
    const long = layoutOf({ title: 'AREA31.WATERRECOVERY.31FC104 <b>&: how well the fit follows' });
    expect(long.title.text).toBe(
      '<b>AREA31.WATERRECOVERY.31FC104 &lt;b&gt;&amp;:<br>how well the fit follows</b>',
    );
    expect(long.margin.t).toBeGreaterThan(layoutOf({}).margin.t);
  });

  it('has a legend only where one is wanted', () => {
    expect(layoutOf({}).legend).toBeDefined();
    expect(layoutOf({ legend: false }).legend).toBeUndefined();
  });
});

describe('parts of the layout', () => {
  it('wraps at spaces and leaves a longer word whole', () => {
    expect(wrapped('one two three fourteenletters x', 9)).toEqual([
      'one two',
      'three',
      'fourteenletters',
      'x',
    ]);
    expect(wrapped('', 9)).toEqual([]);
  });

  it('switches off the tags and entities that Plotly would read', () => {
    expect(plainText('<a href="x">&amp;')).toBe('&lt;a href="x"&gt;&amp;amp;');
  });

  it('hangs the name of an axis on its panel', () => {
    expect(panelName('PV', 'y2')).toMatchObject({ yref: 'y2 domain', text: 'PV' });
  });
});
