import { describe, expect, it } from 'vitest';
import { type ColourScale, colourAt, misfitScale, palette, timeScale } from '../../src/figures/palette';
import { expectClose } from '../closeness';

type Triple = readonly [number, number, number];

/** Linear light from `#rrggbb`: the sRGB curve of IEC 61966-2-1 (value from memory). */
function linear(colour: string): Triple {
  const part = (start: number): number => {
    const value = Number.parseInt(colour.slice(start, start + 2), 16) / 255;
    return value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4;
  };
  return [part(1), part(3), part(5)];
}

/**
 * What a reader without red or without green cones sees, in linear light: the matrices of Machado, Oliveira,
 * Fernandes 2009 (IEEE Trans. Vis. Comput. Graph. 15:1291-1298) for full severity. Values from memory; that white
 * stays white (rows that sum to 1) is checked below.
 */
const sight: Record<string, readonly Triple[]> = {
  full: [
    [1, 0, 0],
    [0, 1, 0],
    [0, 0, 1],
  ],
  'without red': [
    [0.152286, 1.052583, -0.204868],
    [0.114503, 0.786281, 0.099216],
    [-0.003882, -0.048116, 1.051998],
  ],
  'without green': [
    [0.367322, 0.860646, -0.227968],
    [0.280085, 0.672501, 0.047413],
    [-0.01182, 0.04294, 0.968881],
  ],
};

function seen(colour: string, matrix: readonly Triple[]): Triple {
  const light = linear(colour);
  const row = ([r, g, b]: Triple): number =>
    Math.min(1, Math.max(0, r * light[0] + g * light[1] + b * light[2]));
  return [row(matrix[0]!), row(matrix[1]!), row(matrix[2]!)];
}

/** CIE L*a*b* under D65 (CIE 15; value from memory). */
function lab([r, g, b]: Triple): Triple {
  const f = (t: number): number => (t > (6 / 29) ** 3 ? Math.cbrt(t) : t / (3 * (6 / 29) ** 2) + 4 / 29);
  const x = f((0.4124 * r + 0.3576 * g + 0.1805 * b) / 0.9505);
  const y = f(luminance([r, g, b]));
  const z = f((0.0193 * r + 0.1192 * g + 0.9505 * b) / 1.089);
  return [116 * y - 16, 500 * (x - y), 200 * (y - z)];
}

function luminance([r, g, b]: Triple): number {
  return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}

/** Contrast as WCAG 2.1 defines it (value from memory). */
function contrast(a: string, b: string): number {
  const [low, high] = [luminance(linear(a)), luminance(linear(b))].sort((x, y) => x - y);
  return (high! + 0.05) / (low! + 0.05);
}

describe('palette', () => {
  it('reckons contrast and colour blindness rightly where the answer is known', () => {
    expectClose(contrast('#000000', '#ffffff'), 21, { absolute: 1e-9 }, 'black on white by WCAG 2.1');
    for (const rows of Object.values(sight)) {
      for (const [r, g, b] of rows) expectClose(r + g + b, 1, { absolute: 2e-6 }, 'row sum');
    }
    expectClose(lab([1, 1, 1])[0], 100, { absolute: 1e-9 }, 'lightness of white');
  });

  it('keeps signals apart in every kind of sight by at least 20 units of CIE 1976 distance (own choice)', () => {
    const { ink, setPoint, pv, op, travel, model } = palette;
    const signals = { ink, setPoint, pv, op, travel, model };
    for (const [kind, matrix] of Object.entries(sight)) {
      for (const [a, first] of Object.entries(signals)) {
        for (const [b, second] of Object.entries(signals)) {
          if (a >= b) continue;
          const p = lab(seen(first, matrix));
          const q = lab(seen(second, matrix));
          const apart = Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2]);
          expect(apart, `${a} and ${b}, sight ${kind}`).toBeGreaterThanOrEqual(20);
        }
      }
    }
  });

  it('stands out from the paper: graphics by 3:1, text by 4.5:1 (WCAG 2.1, 1.4.11 and 1.4.3, from memory)', () => {
    for (const name of ['setPoint', 'pv', 'op', 'travel', 'model'] as const) {
      expect(contrast(palette[name], palette.paper), name).toBeGreaterThanOrEqual(3);
    }
    for (const text of [palette.ink, palette.faint]) {
      expect(contrast(text, palette.paper)).toBeGreaterThanOrEqual(4.5);
      expect(contrast(text, palette.stampGround)).toBeGreaterThanOrEqual(4.5);
    }
  });

  it('keeps ink readable on every shade of the misfit map', () => {
    for (let i = 0; i <= 20; i++) {
      expect(contrast(palette.ink, colourAt(misfitScale, i / 20))).toBeGreaterThanOrEqual(4.5);
    }
  });

  it.each<[string, ColourScale, number]>([
    ['time', timeScale, -1],
    ['misfit', misfitScale, 1],
  ])('changes lightness one way along the scale of %s, in every kind of sight', (_, scale, way) => {
    for (const matrix of Object.values(sight)) {
      const lightness = Array.from({ length: 21 }, (__, i) => lab(seen(colourAt(scale, i / 20), matrix))[0]);
      for (let i = 1; i < lightness.length; i++)
        expect(way * (lightness[i]! - lightness[i - 1]!)).toBeGreaterThan(0);
    }
  });

  it('mixes linearly between stops and stays at the ends outside of them', () => {
    const scale: ColourScale = [
      [0, '#000000'],
      [0.5, '#0a0a0a'],
      [1, '#ffffff'],
    ];
    expect([-1, 0, 0.25, 0.5, 1, 2].map((at) => colourAt(scale, at))).toEqual([
      '#000000',
      '#000000',
      '#050505',
      '#0a0a0a',
      '#ffffff',
      '#ffffff',
    ]);
  });
});
