import { describe, expect, test } from 'vitest';
import { ellipseChord, ellipseWidth } from '../../src/evidence/ellipse-width';
import { expectClose } from '../closeness';
import { cosine, facts, read } from './loops';

describe('two sines make an ellipse whose longest chord along x is 2 A sin(phase)', () => {
  test.each([10, 45, 90, 150])('phase %d degrees', (degrees) => {
    const phase = (degrees * Math.PI) / 180;
    const x = cosine(700, 70).map((value) => 3 * value + 40);
    const y = cosine(700, 70, -phase).map((value) => 0.2 * value - 7);
    expectClose(ellipseChord(x, y)!, 6 * Math.sin(phase), { relative: 1e-6 });
  });
  test('in noise', () => {
    const chord = ellipseChord(cosine(3000, 70, 0, 0.05, 1), cosine(3000, 70, 1, 0.05, 2))!;
    expectClose(chord, 2 * Math.sin(1), { relative: 0.05 });
  });
});

test('a straight line and constants have no ellipse', () => {
  const x = cosine(200, 50);
  expect(ellipseChord(x, new Float64Array(200))).toBeNull();
  expect(ellipseChord(x, x)).toBeNull();
});

test('the row is a size in % of OP span and names no cause', () => {
  const reading = read(ellipseWidth, { op: cosine(2000, 50), pv: cosine(2000, 50, -Math.PI / 2) });
  expectClose(reading.value, 2, { relative: 0.02 });
  expect(reading.says).toBe('undecided');
});

test('OP and PV that cycle at different periods are skipped', () => {
  expect(ellipseWidth.skips(facts({ op: cosine(2000, 20), pv: cosine(2000, 50) }))).toMatch(/not one cycle/);
});
