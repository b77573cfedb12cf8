/** Before and after work on the valve of the demo loop: every answer, from simulated records. */
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { beforeAll, describe, expect, it } from 'vitest';
import { DEMO_LOOPS } from '../../data/make/demo-loops';
import { toCsv } from '../../data/make/export';
import { assessLoop } from '../../src/assessment/assess-loop';
import type { Findings } from '../../src/assessment/findings';
import { WrongUse } from '../../src/errors';
import type { ValveTestReading } from '../../src/field-test/valve-test-reading';
import { compareAssessments } from '../../src/forecast/compare-assessments';
import { comparisonCard } from '../../src/forecast/comparison-card';
import { type LoopOptions, simulateLoop } from '../../src/process/closed-loop';
import { readLoop } from '../../src/record/read-loop';
import { textbookStem } from '../../src/valve/stem';
import { scratchFolder } from '../scratch-folder';

const demo = DEMO_LOOPS.find(({ name }) => name === '31-FC-104')!;
const folder = scratchFolder();

/** The demo loop made anew with some of it changed, read and assessed. */
function record(changed: Partial<LoopOptions>, seed = 7, tag = '31-FC-104'): Findings {
  const run = simulateLoop({ ...demo.loop(seed), ...changed });
  const file = join(folder, `${tag}-${seed}.csv`);
  writeFileSync(file, toCsv({ demo: { ...demo, tag }, run }, seed));
  return assessLoop(readLoop(file, { pvRange: demo.pvRange, pvUnit: demo.pvUnit, tag }));
}

const valve = (S: number, J: number): Partial<LoopOptions> => ({
  valve: textbookStem({ S, J, actuatorLag: 0.3, startOp: 52 }),
});

function test(kind: ValveTestReading['kind'], high: number | null): ValveTestReading {
  const deadBand = high === null ? null : { value: high / 2, low: 0, high, unit: '% of span' };
  return {
    schema: 'stickband/valve-test/1',
    kind,
    deadBand,
    resolution: null,
    hysteresis: null,
    steps: [],
    S: null,
    J: null,
    notes: [],
    cautions: [],
  };
}

const read = (name: string): Findings =>
  assessLoop(readLoop(`data/${name}.csv`, { pvRange: demo.pvRange, pvUnit: demo.pvUnit }));

let before: Findings;
let repaired: Findings;
let quiet: Findings;
beforeAll(() => {
  before = read('31-FC-104');
  repaired = read('31-FC-104-after-repair');
  quiet = record(valve(0.12, 0.02));
});

describe('the cycle is gone', () => {
  it('and set-point moves bound the dead band: repaired', () => {
    const found = compareAssessments(before, repaired);
    expect(found.answer).toBe('repaired');
    expect(found.deadBandBelow!.value).toBeLessThanOrEqual(1);
    expect(found.deadBandBelow!.from).toMatch(/set-point moves/);
    expect([found.provenance.before, found.provenance.after]).toEqual([
      before.record.sha256,
      repaired.record.sha256,
    ]);
    expect(found.rows.filter(({ alike }) => alike !== null).map(({ alike }) => alike)).toEqual(
      Array(5).fill(true),
    );
  });

  it('and nothing bounds the dead band: not shown repaired', () => {
    const found = compareAssessments(before, quiet);
    expect(found.answer).toBe('cycle-gone');
    expect(found.inWords).toBe('Cycle gone, valve not shown repaired.');
    expect(found.reasons.join(' ')).toMatch(/no step or stroke test was given.*0 set-point moves/);
  });

  it.each([
    ['step', 0.4, 'repaired'],
    ['stroke', 0.9, 'repaired'],
    ['stroke', 1.6, 'cycle-gone'],
    ['hold', 0.4, 'cycle-gone'],
    ['step', null, 'cycle-gone'],
  ] as const)('and a %s test says below %s: %s', (kind, high, answer) => {
    expect(compareAssessments(before, quiet, { valveTest: test(kind, high) }).answer).toBe(answer);
  });

  it('counts a dead band as repaired up to what is accepted', () => {
    const valveTest = test('stroke', 1.6);
    expect(compareAssessments(before, quiet, { valveTest, acceptedDeadBand: 2 }).answer).toBe('repaired');
  });
});

describe('the cycle goes on', () => {
  it('as before: no change shown', () => {
    expect(compareAssessments(before, record({}, 11)).answer).toBe('no-change-shown');
  });

  it('with less dead band: improved; the other way round: worse', () => {
    const better = record(valve(1.2, 0.6), 12);
    expect(compareAssessments(before, better).answer).toBe('improved');
    expect(compareAssessments(better, before).answer).toBe('worse');
  });
});

describe('the records cannot be compared', () => {
  it.each([
    ['another tuning', { controller: { gain: 0.2, integralTime: 7, bias: 52 } }, /Tuning, as read differs/],
    ['another load', { setPoint: (time: number) => (time < -1700 ? 40 : 45) }, /Mean PV differs/],
    ['a short record', { samples: 900 }, /Record length differs/],
  ] as [string, Partial<LoopOptions>, RegExp][])('for %s', (_, changed, reason) => {
    const found = compareAssessments(before, record({ ...valve(0.12, 0.02), ...changed }, 13));
    expect(found.answer).toBe('cannot-tell');
    expect(found.reasons.join(' ')).toMatch(reason);
  });

  it('when the earlier one has no cycle', () => {
    expect(compareAssessments(quiet, before).answer).toBe('cannot-tell');
  });

  it('when a tuning cannot be read, unless it is stated to be the same', () => {
    const unread = { ...quiet, assessment: { ...quiet.assessment, controller: null } };
    expect(compareAssessments(before, unread).answer).toBe('cannot-tell');
    expect(compareAssessments(before, unread, { tuningUnchanged: true }).answer).toBe('cycle-gone');
  });

  it('when they are of two loops, or options are wrong', () => {
    const other = { ...quiet, record: { ...quiet.record, loop: '31-FC-131' } };
    expect(() => compareAssessments(before, other)).toThrow(WrongUse);
    expect(() => compareAssessments(before, quiet, { acceptedDeadBand: 0 })).toThrow(/above 0/);
    expect(() => compareAssessments(before, quiet, { test: 1 } as object)).toThrow(/no option "test"/);
  });
});

describe('the card', () => {
  it('says the answer first, then why, what was alike and what to do', () => {
    const card = comparisonCard(compareAssessments(before, quiet));
    expect(card.headline).toBe('Cycle gone, valve not shown repaired.');
    expect(card.parts.map(({ title }) => title)).toEqual(['Why', 'What was alike', 'What to do next']);
    expect(card.parts.at(-1)!.sentences[0]).toMatch(/step or stroke test/);
  });

  it('says what was not alike where it cannot tell', () => {
    const unread = { ...quiet, assessment: { ...quiet.assessment, controller: null } };
    const card = comparisonCard(compareAssessments(before, unread));
    expect(card.parts.map(({ title }) => title)).toContain('What was not alike');
  });
});
