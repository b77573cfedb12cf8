/** The figures of plans and readings of valve tests, on the demo records. */
import { beforeAll, describe, expect, it } from 'vitest';
import { agreedLimits, testedLoop } from '../../data/make/valve-tests';
import { planValveTest } from '../../src/field-test/plan-valve-test';
import { readValveTest, type ValveTestFindings } from '../../src/field-test/read-valve-test';
import { simulateStroke } from '../../src/field-test/simulate-stroke';
import { strokeFrictionFigure } from '../../src/figures/stroke-friction-figure';
import { strokePressureFigure } from '../../src/figures/stroke-pressure-figure';
import { testLoopFigure } from '../../src/figures/test-loop-figure';
import { testPlanFigure } from '../../src/figures/test-plan-figure';
import { testResponseFigure } from '../../src/figures/test-response-figure';
import { testTrendFigure } from '../../src/figures/test-trend-figure';
import { expectSound, traceOf } from './findings-fixture';

const size = { area: '645 cm2', stroke: '101.6 mm' };
const read = (name: string): ValveTestFindings => readValveTest(`data/31-FC-104-${name}.csv`, size);
let hold: ValveTestFindings;
let step: ValveTestFindings;
let stroke: ValveTestFindings;
let fast: ValveTestFindings;
beforeAll(() => {
  hold = read('hold-test');
  step = read('step-test');
  stroke = read('stroke');
  fast = read('strokes-at-seven-speeds');
});

describe('figures of valve tests', () => {
  it('shade the hold from its first to its last sample', () => {
    const figure = testTrendFigure(hold);
    expectSound(figure);
    const [shape] = (figure.layout as { shapes: { x0: number; x1: number }[] }).shapes;
    expect(shape!.x0).toBeCloseTo(hold.hold!.from / 60, 6);
    expect(shape!.x1).toBeCloseTo((hold.hold!.to - 1) / 60, 6);
    expect(testLoopFigure(hold)).toBeNull();
    expect(testResponseFigure(hold)).toBeNull();
  });

  it('mark the steps that moved the valve, and no others', () => {
    const figure = testTrendFigure(step);
    expectSound(figure);
    const moved = step.reading.steps.filter((one) => one.moved);
    expect(traceOf(figure, 'step that moved it').x).toHaveLength(moved.length);
  });

  it('draw every reversal as a dimension as long as it was read', () => {
    for (const findings of [step, stroke]) {
      const figure = testLoopFigure(findings);
      expectSound(figure);
      const lines = (figure.data as { marker?: { symbol?: string }; x: number[]; y: number[] }[]).filter(
        ({ marker, y }) => marker?.symbol === 'arrow' && y[0] === y[1],
      );
      const lengths = lines.map(({ x }) => Math.abs(x[1]! - x[0]!));
      const mean = lengths.reduce((sum, one) => sum + one, 0) / lengths.length;
      const { value, low, high } = findings.reading.deadBand!;
      expect(lengths.length).toBeGreaterThan(1);
      // Steps read to a step; strokes to the value itself.
      if (findings === stroke) expect(mean).toBeCloseTo(value, 2);
      else for (const length of lengths) expect(length).toBeGreaterThanOrEqual(low);
      expect(high).toBeGreaterThanOrEqual(value);
    }
  });

  it('lay the responses over each other and mark T63 and T86 where they were read', () => {
    const figure = testResponseFigure(step);
    expectSound(figure);
    const { T63, T86 } = step.step!.overall;
    const marks = traceOf(figure, 'T63 and T86, mean');
    expect(marks.y).toEqual([63.2, 86.5]);
    expect(marks.x[0]).toBeCloseTo(T63!.value, 3);
    expect(marks.x[1]).toBeCloseTo(T86!.value, 3);
  });

  it('draw the spring line through the logged pressures, and friction with the law that was taken', () => {
    const pressure = strokePressureFigure(stroke);
    expectSound(pressure);
    const { x, y } = traceOf(pressure, 'spring') as unknown as { x: number[]; y: number[] };
    const slope = (y[1]! - y[0]!) / (x[1]! - x[0]!);
    expect(100 * slope).toBeCloseTo(stroke.friction!.springRange.value, 2);
    expect(strokePressureFigure(step)).toBeNull();

    const friction = strokeFrictionFigure(fast);
    expectSound(friction);
    expect(traceOf(friction, fast.friction!.curve!.chosen.law).y.length).toBeGreaterThan(20);
    expect(traceOf(friction, 'measured, 90 % interval').x).toHaveLength(fast.friction!.curve!.points.length);
    expect(strokeFrictionFigure(stroke)).toBeNull();
    expectSound(testLoopFigure(fast, simulateStroke(fast).travel));
  });

  it('draw a plan inside its band, stamped as a proposal', () => {
    const plan = planValveTest(testedLoop, agreedLimits);
    expect(plan.tests.length).toBeGreaterThan(1);
    for (const test of plan.tests) {
      const figure = testPlanFigure(plan, test);
      expectSound(figure);
      const op = traceOf(figure, 'OP, proposed').y as number[];
      expect(Math.min(...op)).toBeGreaterThanOrEqual(agreedLimits.opBand.low);
      expect(Math.max(...op)).toBeLessThanOrEqual(agreedLimits.opBand.high);
      const [stamp] = (figure.layout as { annotations: { text: string }[] }).annotations;
      expect(stamp!.text.replace('<br>', ' ')).toBe('Proposal, not released. Authorised people decide.');
    }
  });
});
