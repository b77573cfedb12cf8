/**
 * The demo loops through the whole path: made, exported, read, assessed. Beside the copies in data/ other stretches of
 * each loop are made here with seeds of their own, so that nothing can be set up for five files.
 */
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { DEMO_LOOPS, type DemoLoop, makeDemoLoop } from '../data/make/demo-loops';
import { toCsv } from '../data/make/export';
import { fitTruth } from '../data/make/truth';
import { assessLoop } from '../src/assessment/assess-loop';
import type { Assessment, Verdict } from '../src/assessment/assessment';
import { readLoop } from '../src/record/read-loop';
import { scratchFolder } from './scratch-folder';

const folder = scratchFolder();
const otherSeeds: readonly number[] = [1, 2, 3, 4, 5, 6];

interface Tried {
  readonly seed: number;
  readonly verdict: Verdict;
  readonly S: NonNullable<Assessment['stiction']>['S'] | null;
  /** S of the two-parameter element that comes closest to the true travel; null where it was not asked for. */
  readonly trueS: number | null;
}

function tried(demo: DemoLoop, seed: number): Tried {
  const made = makeDemoLoop(demo.name, seed);
  const file = join(folder, `${demo.name}.csv`);
  writeFileSync(file, toCsv(made, seed));
  const { pvRange, pvUnit } = demo;
  const { cause, stiction } = assessLoop(readLoop(file, { pvRange, pvUnit })).assessment;
  const trueS = demo.cause === 'stiction' ? fitTruth(made.run.op, made.run.travel, demo.built)!.S : null;
  return { seed, verdict: cause.verdict, S: stiction?.S ?? null, trueS };
}

const holds = ({ S, trueS }: Tried): boolean => S !== null && S.low <= trueS! && trueS! <= S.high;

/** What was found, for the message of a failed check. */
function told({ seed, verdict, S, trueS }: Tried): string {
  const found = S ? `S ${S.value.toFixed(2)} (${S.low.toFixed(2)} to ${S.high.toFixed(2)})` : 'no S';
  return `seed ${seed}: ${verdict}, ${found}${trueS === null ? '' : `, true S ${trueS.toFixed(2)}`}`;
}

const sticky = DEMO_LOOPS.filter(({ cause }) => cause === 'stiction');
const others = DEMO_LOOPS.filter(({ cause }) => cause !== 'stiction');

describe('the demo loops in data/', () => {
  for (const demo of sticky) {
    it(`${demo.name} is called stiction, the true S inside its interval`, () => {
      const found = tried(demo, demo.seed);
      expect(found.verdict).toBe('stiction');
      expect(holds(found), told(found)).toBe(true);
    });
  }

  it('the others are named by what makes them cycle, one of them at most cannot-tell', () => {
    const found = others.map((demo) => ({ demo, ...tried(demo, demo.seed) }));
    const wrong = found.filter(({ demo, verdict }) => verdict !== demo.cause && verdict !== 'cannot-tell');
    expect(wrong.map((one) => `${one.demo.name}, ${told(one)}`)).toEqual([]);
    expect(found.filter(({ verdict }) => verdict === 'cannot-tell').length).toBeLessThanOrEqual(1);
  });
});

describe('six other stretches of each demo loop', () => {
  for (const demo of sticky) {
    it(`${demo.name}: the interval of S holds the truth in at least five`, () => {
      const found = otherSeeds.map((seed) => tried(demo, seed));
      expect(found.filter(holds).length, found.map(told).join('\n')).toBeGreaterThanOrEqual(5);
    });
  }

  for (const demo of others) {
    it(`${demo.name}: none is called stiction`, () => {
      const found = otherSeeds.map((seed) => tried(demo, seed));
      const accused = found.filter(({ verdict }) => verdict === 'stiction');
      expect(accused.map(told)).toEqual([]);
    });
  }
});
