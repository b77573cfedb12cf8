import { readFileSync } from 'node:fs';
import { Script } from 'node:vm';
import { JSDOM } from 'jsdom';
import { beforeAll, describe, expect, it } from 'vitest';
import { cycleFigure } from '../../src/figures/cycle-figure';
import { evidenceFigure } from '../../src/figures/evidence-figure';
import type { Figure } from '../../src/figures/figure';
import { fitFigure } from '../../src/figures/fit-figure';
import { misfitFigure } from '../../src/figures/misfit-figure';
import { phaseFigure } from '../../src/figures/phase-figure';
import { travelFigure } from '../../src/figures/travel-figure';
import { trendFigure } from '../../src/figures/trend-figure';
import { valveLoopFigure } from '../../src/figures/valve-loop-figure';
import { staticPictures } from '../../src/report/static-picture';
import { fixtureFindings } from '../figures/findings-fixture';

const findings = fixtureFindings({ measuredTravel: true, verdict: 'cannot-tell', samples: 7200 });
const figures: Figure[] = [
  trendFigure,
  cycleFigure,
  phaseFigure,
  travelFigure,
  valveLoopFigure,
  fitFigure,
  misfitFigure,
  evidenceFigure,
].map((make) => make(findings)!);

describe('staticPictures', () => {
  let pictures: string[];
  beforeAll(async () => {
    pictures = await staticPictures(figures);
  });

  it('makes one picture a figure that stands alone and reads as XML', () => {
    expect(pictures).toHaveLength(figures.length);
    const { DOMParser } = new JSDOM('').window;
    for (const [i, picture] of pictures.entries()) {
      const root = new DOMParser().parseFromString(picture, 'image/svg+xml').documentElement;
      const { width, height, id } = figures[i]!;
      expect(root.namespaceURI, id).toBe('http://www.w3.org/2000/svg');
      expect(root.getAttribute('viewBox')).toBe(`0 0 ${width} ${height}`);
      expect(root.getAttribute('width')).toBe(String(width));
      expect(root.getAttribute('height')).toBe(String(height));
      expect(root.textContent).toContain('31-FC-104');
      expect(picture).not.toMatch(/NaN|undefined|Infinity/);
      expect(picture).not.toMatch(/(?:href|src)="http|url\((?!#)/);
    }
  });

  it('keeps every picture below 150 kB', () => {
    for (const [i, picture] of pictures.entries())
      expect(picture.length, figures[i]!.id).toBeLessThan(150_000);
  });

  it('draws the lines, labels and caveats that the figure has', () => {
    const trend = pictures[0]!;
    for (const words of [
      'PV and SP, m3/h',
      'clock time (UTC+01:00)',
      'slip up',
      'cannot-tell: The record was',
    ]) {
      expect(trend).toContain(words);
    }
    const strokes = new Set([...trend.matchAll(/stroke: (rgb\([^)]*\))/g)].map((match) => match[1]));
    expect(strokes).toContain('rgb(21, 127, 158)');
    expect(strokes).toContain('rgb(156, 61, 20)');
  });

  it('gives equal pictures for equal figures, in any order and at the same time', async () => {
    const some = [0, 4, 6];
    const forth = some.map((i) => figures[i]!);
    const [again, backwards] = await Promise.all([
      staticPictures(forth),
      staticPictures([...forth].reverse()),
    ]);
    expect(again).toEqual(some.map((i) => pictures[i]));
    expect(backwards.reverse()).toEqual(again);
  });

  it('shows the clock of the plant in every zone', async () => {
    const zone = process.env.TZ;
    process.env.TZ = 'Asia/Kolkata';
    try {
      // Half past five in the morning there when it is midnight in Greenwich: the zone is in force.
      expect(new Date(0).getMinutes()).toBe(30);
      expect(await staticPictures([figures[0]!])).toEqual([pictures[0]]);
    } finally {
      if (zone === undefined) delete process.env.TZ;
      else process.env.TZ = zone;
    }
    expect(pictures[0]).toContain('>06:00</tspan>');
  });

  it('leaves the figures as they were', async () => {
    const before = JSON.stringify(figures[0]);
    await staticPictures([figures[0]!]);
    expect(JSON.stringify(figures[0])).toBe(before);
  });

  it('goes on after a figure that cannot be drawn', async () => {
    const broken = { ...figures[0]!, width: Number.NaN, data: [{ type: 'scatter', x: () => 1 }] };
    await expect(staticPictures([broken])).rejects.toThrow();
    expect(await staticPictures([figures[7]!])).toEqual([pictures[7]]);
  });
});

describe('the figures', () => {
  it('hold nothing that the figure library does not know (its own validator)', () => {
    const page = new JSDOM('<body></body>', { runScripts: 'outside-only', pretendToBeVisual: true });
    page.window.URL.createObjectURL = () => '';
    const library = readFileSync(require.resolve('plotly.js-cartesian-dist-min'), 'utf8');
    new Script(library, { filename: 'figure-library.js' }).runInContext(page.getInternalVMContext());
    const { validate } = page.window.Plotly as {
      validate(data: object, layout: object): { msg: string }[] | undefined;
    };
    for (const { id, data, layout } of figures) {
      const complaints = validate(structuredClone(data) as object, structuredClone(layout)) ?? [];
      expect(
        complaints.map(({ msg }) => msg),
        id,
      ).toEqual([]);
    }
  });
});
