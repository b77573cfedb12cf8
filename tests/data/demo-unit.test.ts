import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { DEMO_UNIT, makeDemoUnit, unitFolder, unitList, unitListFile } from '../../data/make/demo-unit';
import { toCsv } from '../../data/make/export';
import { findLoops } from '../../src/audit/find-loops';
import { crossCorrelation } from '../../src/signal/autocorrelation';

const data = join(__dirname, '../../data');

describe('demo unit', () => {
  const unit = makeDemoUnit();

  it('is what the files and the list in data/ hold', () => {
    for (const made of unit) {
      const file = readFileSync(join(data, unitFolder, `${made.demo.tag}.csv`), 'utf8');
      expect(toCsv(made, made.demo.seed) === file, made.demo.tag).toBe(true);
    }
    expect(readFileSync(join(data, unitListFile), 'utf8')).toBe(unitList());
  });

  it('has at least 24 loops with every cause among them, each tag once', () => {
    expect(DEMO_UNIT.length).toBeGreaterThanOrEqual(24);
    expect(new Set(DEMO_UNIT.map(({ tag }) => tag)).size).toBe(DEMO_UNIT.length);
    expect([...new Set(DEMO_UNIT.map(({ cause }) => cause))].sort()).toEqual([
      'cannot-tell',
      'lost-motion',
      'not-oscillating',
      'outside-disturbance',
      'stiction',
      'tight-tuning',
    ]);
    const { loops } = findLoops(join(data, unitListFile), null, {});
    expect(loops.map(({ tag }) => tag)).toEqual(DEMO_UNIT.map(({ tag }) => tag));
  });

  it('the neighbours follow the sticky loop, later and through the process alone', () => {
    const pvOf = (tag: string): Float64Array => unit.find(({ demo }) => demo.tag === tag)!.run.pv;
    const shaken = DEMO_UNIT.filter(({ shakenBy }) => shakenBy !== null);
    expect(shaken.map(({ shakenBy }) => shakenBy!.tag)).toEqual(['31-FC-201', '31-FC-201', '31-FC-201']);
    for (const { tag } of shaken) {
      // Within one cycle of some 45 samples.
      const likeness = crossCorrelation(pvOf('31-FC-201'), pvOf(tag), 45);
      const largest = likeness.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
      expect(largest, tag).toBeGreaterThan(0.5);
    }
    const apart = crossCorrelation(pvOf('31-FC-201'), pvOf('31-FC-211').subarray(0, 1400), 45);
    expect(apart.reduce((most, value) => Math.max(most, Math.abs(value)), 0)).toBeLessThan(0.3);
  });
});
