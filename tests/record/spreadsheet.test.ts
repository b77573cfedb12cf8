import * as xlsx from '@e965/xlsx';
import { describe, expect, it } from 'vitest';
import { readLoop } from '../../src/record/read-loop';
import { expectAllClose } from '../closeness';
import { exportFile, start } from './export-file';

/** A workbook made by the spreadsheet library itself; dates are dates, as a spreadsheet program saves them. */
function workbook(sheets: Record<string, unknown[][]>): Uint8Array {
  const book = xlsx.utils.book_new();
  for (const [name, rows] of Object.entries(sheets)) {
    xlsx.utils.book_append_sheet(book, xlsx.utils.aoa_to_sheet(rows, { UTC: true }), name);
  }
  return new Uint8Array(xlsx.write(book, { type: 'array', bookType: 'xlsx' }));
}

const header = ['time', '31-FC-104.SP', '31-FC-104.PV', '31-FC-104.OP'];
const rows = Array.from({ length: 50 }, (_, i) => [
  new Date(start + 1000 * i),
  50,
  50 + (i % 7) / 4,
  40 - (i % 5) / 4,
]);

describe('a workbook', () => {
  it('is read with its dates and numbers', () => {
    const record = readLoop(exportFile(workbook({ export: [header, ...rows] }), 'export.xlsx'), {
      zone: 'UTC',
    });
    expect(record).toMatchObject({ loop: '31-FC-104', samplePeriod: 1, start: '2026-03-04T06:00:00.000Z' });
    expectAllClose(
      record.pv,
      rows.map((row) => row[2] as number),
      { absolute: 1e-12 },
    );
    expectAllClose(
      record.op,
      rows.map((row) => row[3] as number),
      { absolute: 1e-12 },
    );
  });

  it('is read from its first sheet with cells, below other lines, and says so', () => {
    const bytes = workbook({ empty: [], data: [['Export of'], [], header, ...rows], more: [['x']] });
    const record = readLoop(exportFile(bytes, 'export.xlsx'));
    expect(record.pv.length).toBe(50);
    expect(record.notes.map(({ code }) => code)).toEqual(
      expect.arrayContaining(['first-sheet', 'lines-above-header', 'time-zone']),
    );
  });

  it('is refused with the row of a wrong cell', () => {
    const wrong = rows.map((row, i) => (i === 10 ? [row[0], 50, 'abc', 40] : row));
    expect(() => readLoop(exportFile(workbook({ a: [header, ...wrong] }), 'export.xlsx'))).toThrow(
      /Row 12 of the column "31-FC-104.PV" has the text "abc"/,
    );
    expect(() => readLoop(exportFile(workbook({ a: [] }), 'export.xlsx'))).toThrow(/no sheet with cells/);
  });
});
