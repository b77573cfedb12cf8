import { beforeAll, describe, expect, it } from 'vitest';
import { assessLoop } from '../../src/assessment/assess-loop';
import type { Findings } from '../../src/assessment/findings';
import { demoFile } from '../../src/notebook/demo-file';
import * as tables from '../../src/notebook/tables';
import { readLoop } from '../../src/record/read-loop';
import type { Table } from '../../src/report/table';

const column = (table: Table, name: string): readonly unknown[] =>
  table.columns.find((candidate) => candidate.name === name)!.values;

let findings: Findings;
beforeAll(() => {
  findings = assessLoop(readLoop(demoFile('31-FC-104.csv')));
});

describe('findings as tables', () => {
  it('give every column a value in every row', () => {
    const all = [
      tables.cycleTable,
      tables.estimateTable,
      tables.evidenceTable,
      tables.fitnessTable,
      tables.noteTable,
      tables.provenanceTable,
      tables.slipTable,
    ].map((make) => make(findings));
    for (const { columns } of all) {
      const rows = columns[0]!.values.length;
      expect(rows).toBeGreaterThan(0);
      for (const { values } of columns) {
        expect(values).toHaveLength(rows);
        expect(values).not.toContain(undefined);
      }
    }
  });

  it('give slips the direction of their sign and cycles the length between their ends', () => {
    const { slips } = findings.stiction.fit!;
    const table = tables.slipTable(findings);
    expect(column(table, 'direction')).toEqual(slips.map((slip) => (slip.size > 0 ? 'up' : 'down')));
    expect(column(table, 'size, %')).toEqual(slips.map((slip) => Math.abs(slip.size)));
    const cycles = findings.opCycle.single;
    expect(column(tables.cycleTable(findings), 'length, s')).toEqual(cycles.map(({ from, to }) => to - from));
  });

  it('give S first, with its interval', () => {
    const { S } = findings.stiction.fit!;
    const table = tables.estimateTable(findings);
    const first = table.columns.slice(1).map(({ values }) => values[0]);
    expect(first).toEqual([S.value, S.low, S.high, S.unit]);
  });
});

describe('the bundled demo records', () => {
  it('are found by name, and listed when the name is wrong', () => {
    expect(() => demoFile('31-FC-999.csv')).toThrow(/no demo record "31-FC-999\.csv".*31-FC-104\.csv/);
    expect(() => demoFile('README.md')).toThrow(/no demo record/);
  });
});
