import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { DEMO_LOOPS, makeDemoLoop } from '../../data/make/demo-loops';
import { toCsv } from '../../data/make/export';
import { fitTruth } from '../../data/make/truth';
import { twoParameterValve } from '../../src/valve/two-parameter';

describe('truth of a valve', () => {
  it('gives back S, J and variant of a two-parameter element', () => {
    const op = Float64Array.from(
      { length: 3000 },
      (_, k) => 50 + 4 * Math.sin(k / 80) + 1.5 * Math.sin(k / 210 + 1),
    );
    for (const model of ['slides-on', 'sticks-again'] as const) {
      const travel = twoParameterValve(op, { S: 3, J: 0.9, model }).map((value) => value + 2);
      const truth = fitTruth(op, travel, null);
      expect(truth?.model).toBe(model);
      expect(truth?.S).toBeCloseTo(3, 1);
      expect(truth?.J).toBeCloseTo(0.9, 1);
      expect(truth?.explains).toBeGreaterThan(0.99);
    }
  });

  it('is nothing for a valve that does not move', () => {
    expect(fitTruth(Float64Array.from([1, 2, 3]), new Float64Array(3), null)).toBeNull();
  });
});

describe('demo loops', () => {
  it('are what the files in data/ hold', () => {
    for (const demo of DEMO_LOOPS) {
      const file = readFileSync(join(__dirname, '../../data', `${demo.name}.csv`), 'utf8');
      expect(toCsv(makeDemoLoop(demo.name, demo.seed), demo.seed) === file, demo.name).toBe(true);
    }
  });

  it('another seed gives another stretch of the same loop', () => {
    const one = makeDemoLoop('31-FC-131', 1).run;
    const two = makeDemoLoop('31-FC-131', 2).run;
    expect(one.pv[100]).not.toBe(two.pv[100]);
    expect(one.time.length).toBe(two.time.length);
  });
});
