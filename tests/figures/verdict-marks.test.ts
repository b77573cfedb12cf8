import { describe, expect, it } from 'vitest';
import { palette } from '../../src/figures/palette';
import { verdictMarks } from '../../src/figures/verdict-marks';

describe('the marks of the causes', () => {
  const marks = Object.values(verdictMarks);

  it('differ without colour: in shape or filling, and in their sign', () => {
    expect(new Set(marks.map(({ symbol, filled }) => `${symbol} ${filled}`)).size).toBe(marks.length);
    expect(new Set(marks.map(({ sign }) => sign)).size).toBe(marks.length);
  });

  it('take their colours from the palette', () => {
    for (const { color } of marks) expect(Object.values(palette)).toContain(color);
  });
});
