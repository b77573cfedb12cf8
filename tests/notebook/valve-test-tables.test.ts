import { describe, expect, it } from 'vitest';
import { agreedLimits, testedLoop } from '../../data/make/valve-tests';
import { planValveTest } from '../../src/field-test/plan-valve-test';
import { readValveTest } from '../../src/field-test/read-valve-test';
import {
  frictionLawTable,
  frictionTable,
  planTable,
  stepTable,
  testFileTable,
  testTable,
} from '../../src/notebook/valve-test-tables';
import type { Table } from '../../src/report/table';

const column = (table: Table, name: string) => table.columns.find((one) => one.name === name)!.values;
const size = { area: '645 cm2', stroke: '101.6 mm' };

describe('tables of valve tests', () => {
  it('hold every move of a plan with the time at which it begins', () => {
    const plan = planValveTest(testedLoop, agreedLimits);
    const table = planTable(plan);
    expect(column(table, 'move')).toHaveLength(plan.tests.reduce((sum, { moves }) => sum + moves.length, 0));
    const step = plan.tests.find(({ kind }) => kind === 'step')!;
    const first = (column(table, 'test') as string[]).indexOf('step');
    expect(column(table, 'at, s').slice(first, first + 3)).toEqual(
      [0, 1, 2].map((i) => i * step.moves[0]!.hold),
    );
  });

  it('hold every step, every test and every record', () => {
    const step = readValveTest('data/31-FC-104-step-test.csv');
    const hold = readValveTest('data/31-FC-104-hold-test.csv');
    expect(column(stepTable(step), 'moved')).toEqual(step.reading.steps.map(({ moved }) => moved));
    expect(column(testTable([step, hold]), 'what it says')[1]).toBe('the cycle died');
    expect(column(testFileTable([step]), 'SHA-256')).toEqual([step.record.sha256]);
    expect(column(frictionTable(step), 'friction, N')).toEqual([]);
  });

  it('hold the friction curve and mark one law as taken', () => {
    const fast = readValveTest('data/31-FC-104-strokes-at-seven-speeds.csv', size);
    const { points, chosen } = fast.friction!.curve!;
    expect(column(frictionTable(fast), 'friction, N')).toEqual(points.map(({ force }) => force));
    const laws = frictionLawTable(fast);
    const taken = column(laws, 'taken') as boolean[];
    expect(taken.filter(Boolean)).toHaveLength(1);
    expect(column(laws, 'law')[taken.indexOf(true)]).toBe(chosen.law);
  });
});
