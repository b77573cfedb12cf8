import { read, utils } from '@e965/xlsx';
import { parse } from 'papaparse';
import { describe, expect, it } from 'vitest';
import type { Assessment } from '../../src/assessment/assessment';
import { cautions } from '../../src/assessment/cautions';
import type { FinishedLoop } from '../../src/audit/audit';
import { auditCsv } from '../../src/audit/audit-csv';
import { madeLoops, madeUnit } from './made-unit';

type Row = Record<string, string>;

function rowsOf(text: string): Row[] {
  const { data, errors } = parse<Row>(text.replace(/^\uFEFF/, ''), { header: true, skipEmptyLines: true });
  expect(errors).toEqual([]);
  return data;
}

/** The made unit with its sticky loop called so. */
function called(loop: string): string {
  const loops = madeLoops().map((one): FinishedLoop => {
    if (one.result.loop !== '31-FC-201') return one;
    return { ...one, file: loop, result: { ...(one.result as Assessment), loop } };
  });
  return auditCsv(madeUnit(loops));
}

describe('an audit as CSV', () => {
  const text = auditCsv(madeUnit());

  it('has one row a loop in ranked order, failed loops last with their error, each with every caution', () => {
    const rows = rowsOf(text);
    expect(rows.map(({ loop }) => loop)).toEqual([
      ...madeUnit().ranked.map(({ assessment }) => assessment.loop),
      '31-FC-900',
    ]);
    const first = rows[0]!;
    expect(first).toMatchObject({
      place: '1',
      loop: '31-FC-201',
      cause: 'stiction',
      confidence: '0.9',
      'S, % of OP span': '4',
      'S low': '3.6',
      'S high': '4.4',
      'J, % of OP span': '',
      'PV swing, % of range': '2',
      'cycles with': '31-LC-203, 31-PC-202',
      'in that cycle': 'likely source',
      error: '',
    });
    expect(rows.at(-1)).toMatchObject({ place: '', cause: '', error: 'It is empty.' });
    for (const row of rows) for (const caution of cautions) expect(row.cautions).toContain(caution);
    expect(text).not.toMatch(/undefined|NaN|null/);
  });

  it('is written as RFC 4180 has it, marked as UTF-8', () => {
    expect(text.startsWith('\uFEFFplace,score,loop,')).toBe(true);
    expect(text.endsWith('\r\n')).toBe(true);
    expect(text.replaceAll('\r\n', '')).not.toContain('\n');
  });

  // The signs that OWASP's page on CSV injection names: = + - @ tab carriage return, and line feed and wide forms
  // beside them (value from memory).
  it.each([
    "=HYPERLINK(A1,'x')",
    '=1+1\n2',
    '+31',
    '+cmd',
    '-2+3+cmd',
    '@SUM(A1)',
    '\t=1',
    '\r=1',
    '\n=1',
    ' =1',
    '＝1+1',
    '31"\r\n=1',
  ])('does not let %j become a formula', (loop) => {
    const rows = rowsOf(called(loop));
    const cell = rows[0]!.loop!;
    expect(rows).toHaveLength(6);
    const harmless = /^\+?\d+$/.test(loop) || loop.startsWith('31"');
    expect(cell).toBe(harmless ? loop : `'${loop}`);
  });

  it('leaves numbers alone that are negative', () => {
    expect(rowsOf(called('-12.5'))[0]!.loop).toBe('-12.5');
  });

  it('has no formula for another spreadsheet reader either (SheetJS takes cells that begin with = for one)', () => {
    const formulas = (csv: string): string[] => {
      const { Sheets, SheetNames } = read(csv, { type: 'string', cellFormula: true });
      return utils.sheet_to_formulae(Sheets[SheetNames[0]!]!).filter((line) => /^[A-Z]+\d+=(?!')/.test(line));
    };
    const raw = 'loop\r\n=1+1\r\n';
    expect(formulas(raw).some((line) => line.includes('1+1'))).toBe(true);
    expect(formulas(called('=1+1')).filter((line) => line.includes('1+1'))).toEqual([]);
  });
});
