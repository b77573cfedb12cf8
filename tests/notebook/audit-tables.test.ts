import { describe, expect, it } from 'vitest';
import { rankingRule } from '../../src/audit/rank-loops';
import * as tables from '../../src/notebook/audit-tables';
import type { Table } from '../../src/report/table';
import { madeLoops, madeUnit } from '../audit/made-unit';

const column = (table: Table, name: string): readonly unknown[] =>
  table.columns.find((candidate) => candidate.name === name)!.values;

const unit = madeUnit();
const { ranked } = unit;
const note = { code: 'unit', text: 'PV is taken to be in m3/h.' };

describe('an audit as tables', () => {
  it('gives the ranked loops with the numbers of their assessments', () => {
    const table = tables.rankingTable(unit);
    expect(column(table, 'loop')).toEqual(ranked.map(({ assessment }) => assessment.loop));
    expect(column(table, 'S, %')).toEqual(
      ranked.map(({ assessment }) => assessment.stiction?.S.value ?? null),
    );
    expect(column(table, 'score')).toEqual(ranked.map(({ score }) => score));
    expect(column(table, 'likely source').filter(Boolean)).toEqual(Array(3).fill('31-FC-201'));
  });

  it('gives the failed loops with their errors, and every record with its fingerprint', () => {
    expect(column(tables.failedTable(unit), 'error')).toEqual(['It is empty.']);
    const records = tables.recordTable(unit);
    expect(column(records, 'loop')).toEqual(ranked.map(({ assessment }) => assessment.loop).sort());
    expect(column(records, 'SHA-256')).toEqual(Array(5).fill('0'.repeat(64)));
  });

  it('gathers the notes on the records, the most frequent first, once a loop', () => {
    const noted = (notes: { code: string; text: string }[], i: number) => ({
      ...ranked[i]!,
      assessment: { ...ranked[i]!.assessment, record: { ...ranked[i]!.assessment.record, notes } },
    });
    const table = tables.auditNoteTable({
      ...unit,
      ranked: [noted([{ code: 'mode', text: 'Auto.' }, note], 0), noted([note, note], 1), ranked[2]!],
    });
    expect(column(table, 'code')).toEqual(['unit', 'mode']);
    expect(column(table, 'loops')).toEqual([2, 1]);
    expect(column(table, 'which')[0]).toBe([0, 1].map((i) => ranked[i]!.assessment.loop).join(', '));
    expect(column(table, 'for example')).toEqual([note.text, 'Auto.']);
  });

  it('states every number of the rule, as changed', () => {
    const values = (table: Table): Record<string, unknown> =>
      Object.fromEntries(column(table, 'part').map((part, i) => [part, column(table, 'value')[i]]));
    const plain = values(tables.rankingRuleTable(unit));
    const numbers = [
      ...Object.values(rankingRule.cause),
      ...Object.values(rankingRule.severity).flatMap(({ full, weight }) => [full, weight]),
      ...Object.values(rankingRule).filter((value) => typeof value === 'number'),
    ];
    expect(Object.values(plain).sort()).toEqual(numbers.sort());
    const provenance = { version: '1', options: { ranking: { leastSeverity: 0.3 } }, seed: 1 };
    const changed = tables.rankingRuleTable({ ...unit, audit: { ...unit.audit, provenance } });
    expect(values(changed)).toEqual({ ...plain, leastSeverity: 0.3 });
  });

  it('gives version, options, seed and the number of loops, failed ones counted', () => {
    expect(column(tables.auditProvenanceTable(unit), 'value')).toEqual([
      '1.2.3',
      '{}',
      '1',
      String(madeLoops().length),
    ]);
  });
});
