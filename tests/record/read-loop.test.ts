import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import type { LoopRecord } from '../../src/record/loop-record';
import { type ReadLoopOptions, readLoop } from '../../src/record/read-loop';
import { expectAllClose, expectClose } from '../closeness';
import { csv, exportFile, exportFolder, type Row, rows, stamp, start } from './export-file';

const read = (text: string | Uint8Array, options: ReadLoopOptions = {}, name?: string): LoopRecord =>
  readLoop(exportFile(text, name), options);
const note = (record: LoopRecord, code: string): string =>
  record.notes.find((one) => one.code === code)?.text ?? `no note ${code}`;
const codes = (record: LoopRecord): string[] => record.notes.map(({ code }) => code);
const column = (list: readonly Row[], key: keyof Row): number[] => list.map((row) => Number(row[key]));

/** What an export with one time column in seconds becomes; the rest of the tests change one thing each. */
function expectWhole(record: LoopRecord, list: readonly Row[]): void {
  expect(record.samplePeriod).toBe(1);
  expectAllClose(record.pv, column(list, 'pv'), { absolute: 1e-12 }, 'PV');
  expectAllClose(record.op, column(list, 'op'), { absolute: 1e-12 }, 'OP');
  expectAllClose(record.sp!, column(list, 'sp'), { absolute: 1e-12 }, 'SP');
}

describe('readLoop reads an export', () => {
  const list = rows(60);
  const plain = csv(list, 'time,31-FC-104.SP,31-FC-104.PV,31-FC-104.OP');

  it('with ISO stamps and commas', () => {
    const record = read(plain, {}, 'export of monday.csv');
    expectWhole(record, list);
    expect(record).toMatchObject({
      loop: '31-FC-104',
      service: 'flow',
      response: 'self-regulating',
      source: 'export of monday.csv',
      start: '2026-03-04T06:00:00.000Z',
      travel: null,
      pvUnit: '',
      pvRange: null,
    });
    expect(record.sha256).toBe(createHash('sha256').update(plain).digest('hex'));
    expect(record.logging).toEqual({
      rows: 60,
      duplicates: 0,
      gaps: 0,
      longestGap: 0,
      manualShare: 0,
      badShare: 0,
      filledShare: 0,
      skew: 0,
      modeLogged: false,
      keptShare: 1,
    });
  });

  it.each([
    ['semicolons', plain.replaceAll(',', ';')],
    ['tabs', plain.replaceAll(',', '\t')],
    ['semicolons and decimal commas', plain.replaceAll(',', ';').replace(/(\d)\.(\d)/g, '$1,$2')],
    ['quotes everywhere', plain.replace(/[^,\n]+/g, '"$&"')],
    ['decimal commas in quotes', plain.replace(/(\d+)\.(\d\d)/g, '"$1,$2"')],
    ['a byte order mark and Windows line ends', `\ufeff${plain.replaceAll('\n', '\r\n')}\r\n`],
    ['blank lines', `\n\n${plain}\n\n`],
    ['lines above the names', `Export;31-FC-104\nBy;nobody\n\n${plain.replaceAll(',', ';')}`],
    ['separators at the ends of lines', `${plain.replaceAll('\n', ',\n')},`],
  ])('with %s', (_, text) => {
    expectWhole(read(text), list);
  });

  it('in UTF-16 with a byte order mark', () => {
    expectWhole(read(Buffer.from(`\ufeff${plain}`, 'utf16le')), list);
  });

  it('in Latin-1, with a line of units', () => {
    const text = plain.replace('\n', '\n,°C,°C,%\n').replaceAll('31-FC-104', '31-TC-104');
    const record = read(Buffer.from(text, 'latin1'));
    expectWhole(record, list);
    expect(record.pvUnit).toBe('°C');
    expect(note(record, 'line-of-units')).toContain('Line 2');
  });

  it('with whatever was assumed in its notes', () => {
    const record = read(plain);
    expect(note(record, 'columns')).toContain('OP from "31-FC-104.OP"');
    expect(note(record, 'service-assumed')).toMatch(/first letter of 31-FC-104: flow/);
    expect(note(record, 'response-assumed')).toMatch(/assumed from the service flow: self-regulating/);
    const stated = read(plain, {
      tag: '31-FC-104',
      service: 'level',
      response: 'integrating',
      sp: '31-FC-104.SP',
      pv: '31-FC-104.PV',
      op: '31-FC-104.op',
    });
    expect(codes(stated)).toEqual([]);
    expect(stated).toMatchObject({ service: 'level', response: 'integrating' });
  });

  it.each([
    ['31-LC-140', 'level', 'integrating'],
    ['31-PC-122', 'pressure', 'self-regulating'],
    ['TIC7', 'temperature', 'self-regulating'],
    ['31-AC-9', 'other', 'unknown'],
    ['wash water', 'other', 'unknown'],
  ])('and takes the service of %s as %s', (loop, service, response) => {
    expect(read(csv(list), { tag: loop })).toMatchObject({ loop, service, response });
  });

  it('and calls the loop after the file when nothing else names it', () => {
    const record = read(csv(list), {}, '31-LC-140.csv');
    expect(record).toMatchObject({ loop: '31-LC-140', service: 'level' });
    expect(codes(record)).toContain('loop-from-source');
  });

  it('and says that no SP was logged', () => {
    const record = read(csv(list).replaceAll(/^([^,]*),[^,]*/gm, '$1'));
    expect(record.sp).toBeNull();
    expect(codes(record)).toContain('no-set-point');
  });
});

describe('readLoop reads stamps', () => {
  const list = rows(40);
  const withStamps = (of: (i: number) => string | number): string =>
    csv(list.map((row, i) => ({ ...row, time: of(i) })));

  it.each([
    ['seconds since 1970', (i: number) => start / 1000 + i, 'time-epoch'],
    ['milliseconds since 1970', (i: number) => start + 1000 * i, 'time-epoch'],
    ['ISO 8601 without a zone', (i: number) => stamp(i).replace('T', ' ').replace('Z', ''), 'time-zone'],
  ])('as %s, noted', (_, of, code) => {
    const record = read(withStamps(of));
    expectWhole(record, list);
    expect(record.start).toBe('2026-03-04T06:00:00.000Z');
    expect(codes(record)).toContain(code);
  });

  it('with a distance from UTC', () => {
    const record = read(withStamps((i) => stamp(i + 3600).replace('Z', '+01:00')));
    expect(record.start).toBe('2026-03-04T06:00:00.000Z');
    expect(codes(record)).not.toContain('time-zone');
  });

  it('in a stated format and zone', () => {
    const record = read(
      withStamps((i) => `04.03.2026 08:00:${String(i).padStart(2, '0')}`),
      { timeFormat: 'dd.MM.yyyy HH:mm:ss', zone: 'Europe/Athens' },
    );
    expectWhole(record, list);
    expect(record.start).toBe('2026-03-04T06:00:00.000Z');
  });

  it('from a date column and a clock column', () => {
    const text = csv(
      list.map((row, i) => ({ ...row, time: `2026-03-04,06:00:${String(i).padStart(2, '0')}` })),
      'Date,Time,SP,PV,OP',
    );
    const record = read(text);
    expectWhole(record, list);
    expect(codes(record)).toContain('date-and-time');
  });

  it('through the end of daylight saving when the zone is stated, and refuses otherwise', () => {
    // The clock of Athens goes from 03:59 back to 03:00 on 25 October 2026.
    const clock = (i: number): string => {
      const minute = 30 + i;
      const hour = minute < 60 ? '03' : minute < 120 ? '03' : '04';
      return `2026-10-25 ${hour}:${String(minute % 60).padStart(2, '0')}:00`;
    };
    const text = withStamps(clock);
    const record = read(text, { zone: 'Europe/Athens' });
    expect(record.samplePeriod).toBe(60);
    expect(record.pv.length).toBe(40);
    expect(record.logging.gaps).toBe(0);
    expect(() => read(text)).toThrow(/one hour, as at the end of daylight saving.*--zone/);
  });

  it('and refuses clock time that the zone skips', () => {
    const text = withStamps((i) => `2026-03-29 03:${String(i).padStart(2, '0')}:00`);
    expect(() => read(text, { zone: 'Europe/Athens' })).toThrow(/Row 2 .*2026-03-29 03:00:00.*skips/);
    expect(() => read(text, { zone: 'Atlantis' })).toThrow(/zone "Atlantis" is not known/);
  });

  it.each([
    [
      'a format of its own',
      () => '04/03/2026 06:00',
      /Row 2 has the time stamp "04\/03\/2026 06:00".*--time-format/,
    ],
    ['a day that is none', () => '2026-02-30 06:00:00', /2026-02-30/],
    ['day numbers of a sheet', (i: number) => 46085.25 + i / 86400, /day numbers of a spreadsheet/],
    ['numbers of nothing known', (i: number) => 1e15 + i, /neither seconds nor milliseconds/],
    ['nothing', (i: number) => (i === 3 ? '' : stamp(i)), /Row 5 has no time stamp/],
  ])('and refuses %s', (_, of, message) => {
    expect(() => read(withStamps(of))).toThrow(message);
  });

  it('as plain seconds from an unknown start, noted', () => {
    const record = read(withStamps((i) => i));
    expectWhole(record, list);
    expect(note(record, 'time-count')).toContain('not known');
  });
});

describe('readLoop finds the columns', () => {
  const list = rows(40);
  const area = csv(
    list.map((row) => ({ ...row, op: `${row.op},60,61,62` })),
    'Time,31-FC-104.SP,31-FC-104.PV,31-FC-104.OP,31-LC-140.SP,31-LC-140.PV,31-LC-140.OP',
  );

  it('of the loop that is asked for among several', () => {
    expectWhole(read(area, { tag: '31FC104' }), list);
    expect(() => read(area)).toThrow(/2 loops: "31-FC-104", "31-LC-140"\. Choose one with --tag/);
    expect(() => read(area, { tag: '31-PC-1' })).toThrow(/no columns of 31-PC-1.*Loops found: "31-FC-104"/);
  });

  it.each([
    'time,31FC104.SP,31FC104.PV,31FC104.OP',
    'time,31-FC-104 SP,31-FC-104 PV,31-FC-104 OP',
    'time,31-FC-104/SP,31-FC-104,31-FC-104/OP',
    'time,31-FC-104.SP,31-FT-104,31-FC-104.OP',
    'TIMESTAMP,area31\\31-FC-104.SP,area31\\31-FC-104.PV,area31\\31-FC-104.OUT',
    'Time stamp,Set point,Process value,Controller output',
    'time,SP (31-FC-104),PV (31-FC-104),OP (31-FC-104)',
  ])('called %s', (header) => {
    expectWhole(read(csv(list, header)), list);
  });

  it('by the names that are stated', () => {
    const text = csv(list, 'Zeit,w,x,y');
    expect(() => read(text)).toThrow(/no column for the time.*"Zeit", "w", "x", "y".*--time/);
    expect(() => read(text, { time: 'Zeit' })).toThrow(/no column for PV.*--pv/);
    expectWhole(read(text, { time: 'Zeit', sp: 'w', pv: 'X', op: 'y' }), list);
    expect(() => read(text, { time: 'Zeit', sp: 'w', pv: 'x', op: 'z' })).toThrow(/no column "z" for OP/);
    expect(() => read(text, { time: 'clock' })).toThrow(/no column "clock" for the time/);
  });

  it('never takes MV for OP or travel by its name', () => {
    const missing = csv(list, 'time,SP,PV,MV');
    expect(() => read(missing)).toThrow(/no column for OP but one called "MV".*--op "MV" or --travel "MV"/);
    expectWhole(read(missing, { op: 'MV' }), list);
    const both = csv(
      list.map((row) => ({ ...row, op: `${row.op},12` })),
      'time,SP,PV,OP,MV',
    );
    const record = read(both);
    expect(record.travel).toBeNull();
    expect(codes(record)).toContain('mv-left-alone');
  });

  it('and refuses two that may be the same signal', () => {
    const twice = csv(
      list.map((row) => ({ ...row, op: `${row.op},12` })),
      'time,SP,PV,OP,OP',
    );
    expect(() => read(twice)).toThrow(/two columns that may be OP/);
  });

  it('of the measured travel, also under a position tag', () => {
    const lagged = (i: number): string => (39 + 3 * Math.cos((i - 2) / 7) + 0.1 * ((i * 7) % 3)).toFixed(2);
    const text = (header: string, more = ''): string =>
      csv(
        list.map((row, i) => ({ ...row, op: `${row.op},${lagged(i)}${more}` })),
        header,
      );
    const own = read(text('time,31-FC-104.SP,31-FC-104.PV,31-FC-104.OP,31-ZT-104'));
    expectAllClose(
      own.travel!,
      list.map((_, i) => Number(lagged(i))),
      { absolute: 1e-12 },
    );
    expect(note(own, 'columns')).toContain('travel from "31-ZT-104"');
    expect(() =>
      read(text('time,31-FC-104.SP,31-FC-104.PV,31-FC-104.OP,31-ZT-104A,31-ZT-104B', ',12')),
    ).toThrow(/two valves on one OP/);
  });

  it('in a long export', () => {
    const lines = list.flatMap((row, i) => [
      `31-FC-104.PV,${stamp(i)},${row.pv}`,
      `31-FC-104.OP,${stamp(i)},${row.op}`,
      `31-LC-140.OP,${stamp(i)},12`,
      ...(i % 10 === 0 ? [`31-FC-104.SP,${stamp(i)},${row.sp}`] : []),
    ]);
    const record = read(['Tag,Time,Value', ...lines].join('\n'), { tag: '31-FC-104' });
    expectWhole(record, list);
    expect(record.logging.filledShare).toBe(0);
    expect(codes(record)).toContain('long-export');
  });
});

describe('readLoop brings signals to one grid by last value', () => {
  /** OP is stamped 0.3 s after PV; each block of columns has stamps of its own. */
  const list = rows(60);
  const apart = [
    'Time,31-FC-104.PV,Time,31-FC-104.OP,Time,31-FC-104.SP',
    ...list.map(
      (row, i) =>
        `${stamp(i)},${row.pv},${stamp(i + 0.3)},${row.op},${i < 2 ? `${stamp(30 * i)},${50 + i}` : ','}`,
    ),
  ].join('\n');

  it('never between two values', () => {
    const record = read(apart);
    expect(record.pv.length).toBe(59);
    expect(record.start).toBe('2026-03-04T06:00:01.000Z');
    // OP at second i is the value stamped at i - 0.7.
    expectAllClose(record.op, column(list, 'op').slice(0, 59), { absolute: 1e-12 });
    expectAllClose(record.pv, column(list, 'pv').slice(1), { absolute: 1e-12 });
    expect([...new Set(record.sp)]).toEqual([50, 51]);
    expect(record.sp!.indexOf(51)).toBe(29);
  });

  it('and reports the skew', () => {
    const record = read(apart);
    expectClose(record.logging.skew, 0.3, { absolute: 1e-9 });
    expect(record.logging.filledShare).toBe(0);
  });

  it('where an OP that is logged at a fifth of the pace counts as filled', () => {
    const lines = list.flatMap((row, i) => [
      `31-FC-104.PV;${stamp(i)};${row.pv}`,
      ...(i % 5 === 0 ? [`31-FC-104.OP;${stamp(i)};${row.op}`] : []),
    ]);
    const record = read(['Tag;Time;Value', ...lines].join('\n'));
    expect(record.samplePeriod).toBe(1);
    // Three of five are older than 1.25 samples.
    expectClose(record.logging.filledShare, 0.6, { absolute: 0.02 });
    const logged = new Set(column(list, 'op').filter((_, i) => i % 5 === 0));
    expect(record.op.every((value) => logged.has(value))).toBe(true);
  });

  it('lays a grid over irregular stamps and says so', () => {
    let at = 0;
    const irregular = rows(200).map((row, i) => {
      at += [0.4, 2.1, 1, 0.7, 3, 1][i % 6]!;
      return { ...row, time: stamp(at) };
    });
    const record = read(csv(irregular));
    expect(codes(record)).toContain('irregular-stamps');
    expect(record.samplePeriod).toBe(1);
    const logged = new Set(column(irregular, 'pv'));
    expect(record.pv.every((value) => logged.has(value))).toBe(true);
    expect(record.logging.filledShare).toBeGreaterThan(0.1);
  });
});

describe('readLoop and time that does not move on', () => {
  it('drops and counts repeated stamps, the first one stays', () => {
    const list = rows(60);
    const doubled = [...list.slice(0, 20), { ...list[19]!, pv: '99' }, ...list.slice(20)];
    const record = read(csv(doubled));
    expectWhole(record, list);
    expect(record.logging).toMatchObject({ rows: 61, duplicates: 1 });
    expect(codes(record)).toContain('duplicates');
  });

  it('drops a single row after a clock was set back by a sample', () => {
    const list = rows(60);
    const record = read(csv([...list.slice(0, 20), list[18]!, ...list.slice(20)]));
    expectWhole(record, list);
    expect(record.logging.duplicates).toBe(1);
  });

  it.each([
    [
      'two rows in the wrong order',
      (list: Row[]) => [...list.slice(0, 20), list[21]!, list[20]!, ...list.slice(22)],
      /row 23 is stamped 2026-03-04T06:00:20Z, after 2026-03-04T06:00:21Z in row 22/,
    ],
    [
      'a stretch that comes again',
      (list: Row[]) => [...list, ...list.slice(10, 30)],
      /row 62 is stamped 2026-03-04T06:00:10Z, after 2026-03-04T06:00:59Z in row 61.*Sort the rows/,
    ],
    ['rows from new to old', (list: Row[]) => [...list].reverse(), /from new to old/],
  ])('refuses %s', (_, change, message) => {
    expect(() => read(csv(change(rows(60))))).toThrow(message);
  });
});

describe('readLoop and what is missing', () => {
  it('fills short gaps with the last value and counts them', () => {
    const list = rows(100);
    const record = read(csv(list.filter((_, i) => i < 40 || i > 43)));
    expect(record.pv.length).toBe(100);
    expect(record.logging).toMatchObject({ gaps: 1, longestGap: 5, filledShare: 0.04, keptShare: 1 });
    expect([...record.pv.slice(39, 44)]).toEqual(new Array(5).fill(Number(list[39]!.pv)));
    expect(codes(record)).toContain('gaps');
  });

  it('does not take a late stamp for a gap to be filled', () => {
    const record = read(csv(rows(100, (row, i) => (i === 50 ? { ...row, time: stamp(50.7) } : row))));
    expect(record.pv.length).toBe(100);
    expect(record.logging.filledShare).toBe(0);
  });

  it('splits the record at a long gap and keeps the longer part', () => {
    const list = rows(300).filter((_, i) => i < 100 || i >= 150);
    const record = read(csv(list));
    expect(record.pv.length).toBe(150);
    expect(record.start).toBe('2026-03-04T06:02:30.000Z');
    expectClose(record.logging.keptShare, 0.6, { absolute: 1e-12 });
    expect(note(record, 'kept-stretch')).toContain('0:02:30 h to 0:04:59 h');
  });

  it('drops manual stretches', () => {
    const text = csv(
      rows(100).map((row, i) => ({ ...row, op: `${row.op},${i >= 20 && i < 30 ? 'MAN' : 'AUTO'}` })),
      'time,SP,PV,OP,mode',
    );
    const record = read(text);
    expect(record.pv.length).toBe(70);
    expect(record.start).toBe('2026-03-04T06:00:30.000Z');
    expect(record.logging).toMatchObject({ manualShare: 0.1, keptShare: 0.7, modeLogged: true });
    expect(note(record, 'mode')).toContain('auto taken as automatic, man as manual');
  });

  it('keeps a loop that is in manual throughout, and says so', () => {
    const record = read(
      csv(
        rows(100).map((row) => ({ ...row, op: `${row.op},Manual` })),
        'time,SP,PV,OP,mode',
      ),
    );
    expect(record.pv.length).toBe(100);
    expect(record.logging.manualShare).toBe(1);
    expect(codes(record)).toContain('never-automatic');
  });

  it('leaves out modes that it does not understand', () => {
    const record = read(
      csv(
        rows(100).map((row) => ({ ...row, op: `${row.op},17` })),
        'time,SP,PV,OP,mode',
      ),
    );
    expect(record.logging.modeLogged).toBe(false);
    expect(note(record, 'mode-not-understood')).toContain('17');
  });

  it.each(['Bad', 'No Data', 'NaN', 'I/O Timeout', '', 'null'])(
    'takes "%s" for a sample without a value',
    (word) => {
      const record = read(csv(rows(100, (row, i) => (i % 25 === 7 ? { ...row, pv: word } : row))));
      expect(record.pv.length).toBe(100);
      expect(record.pv[7]).toBe(record.pv[6]);
      expect(record.logging.badShare).toBe(0.04);
      expect(record.logging.filledShare).toBe(0.04);
      expect(codes(record)).toContain(word === '' ? 'empty-cells' : 'bad-samples');
    },
  );

  it('cuts out a long run of bad values', () => {
    const record = read(csv(rows(100, (row, i) => (i >= 30 && i < 50 ? { ...row, op: 'Bad' } : row))));
    expect(record.pv.length).toBe(50);
    expect(record.logging.badShare).toBe(0.2);
  });

  it('takes samples of bad quality for bad', () => {
    const text = csv(
      rows(100).map((row, i) => ({ ...row, op: `${row.op},${i === 40 ? 0 : 192}` })),
      'time,SP,PV,OP,PV quality',
    );
    const record = read(text);
    expect(record.logging.badShare).toBe(0.01);
    expect(record.pv[40]).toBe(record.pv[39]);
    expect(note(record, 'bad-quality')).toContain('1 of 100');
  });

  it('reads columns that each have their own rows', () => {
    const list = rows(60);
    const lines = list.flatMap((row, i) => [
      `${stamp(i)},,${row.pv},`,
      `${stamp(i + 0.25)},,,${row.op}`,
      ...(i === 0 ? [`${stamp(0.5)},50,,`] : []),
    ]);
    const record = read(['time,SP,PV,OP', ...lines].join('\n'));
    expect(record.samplePeriod).toBe(1);
    expect(record.logging.badShare).toBe(0);
    expectClose(record.logging.skew, 0.25, { absolute: 1e-9 });
    expect(codes(record)).toContain('own-rows');
  });
});

describe('readLoop refuses with a sentence that helps', () => {
  const list = rows(30);
  it.each([
    ['an empty file', '', /is empty/],
    ['a file of blanks', '\n \n', /is empty/],
    ['names without rows', 'time,SP,PV,OP\n', /no rows below them.*time, SP, PV, OP/],
    ['rows without names', csv(list).split('\n').slice(1).join('\n'), /starts with values on line 1/],
    ['one row', csv(rows(1)), /one row of PV/],
    ['one column', 'PV\n1\n2\n', /no line of column names/],
    [
      'a missing column',
      csv(list, 'time,SP,PV,other'),
      /no column for OP\. Columns found: "SP", "PV", "other".*--op/,
    ],
    [
      'text for a number',
      csv(rows(30, (row, i) => (i === 9 ? { ...row, pv: 'abc' } : row))),
      /Row 11 of the column "PV" has the text "abc"/,
    ],
    [
      'a column without a number',
      csv(rows(30, (row) => ({ ...row, op: 'Bad' }))),
      /"OP" of The file .* has no number/,
    ],
    ['bytes that are no text', new Uint8Array([1, 2, 0, 0, 5, 0]), /not a text file/],
    [
      'a broken workbook',
      new Uint8Array(Buffer.from('PK\u0003\u0004 and then nothing')),
      /cannot be opened as an Excel workbook/,
    ],
    [
      'commas for decimals and columns',
      csv(rows(30), 'time,SP,PV,OP').replace(/(\d)\.(\d\d)/g, '$1,$2'),
      /decimal comma.*semicolons/,
    ],
    ['OP in other units', csv(list, 'time,SP,PV,OP [mA]'), /in mA\. OP is needed in %/],
    [
      'OP that is no percentage',
      csv(rows(30, (row) => ({ ...row, op: 20 * Number(row.op) }))),
      /goes from .* to .*OP is needed in %/,
    ],
  ])('%s', (_, text, message) => {
    expect(() => read(text)).toThrow(message);
    expect(() => read(text)).toThrow(expect.objectContaining({ name: 'UnreadableInput' }));
  });

  it('a file that is not there, and a folder', () => {
    expect(() => readLoop(`${exportFolder}/none.csv`)).toThrow(/There is no file/);
    expect(() => readLoop(exportFolder)).toThrow(/is a folder/);
  });

  it('wrong use', () => {
    const path = exportFile(csv(list));
    expect(() => readLoop(path, { colour: 'red' } as ReadLoopOptions)).toThrow(/no option "colour"/);
    expect(() => readLoop(path, { service: 'steam' as 'flow' })).toThrow(/"service" is one of flow/);
    expect(() => readLoop(path, { timeFormat: '---' })).toThrow(/no tokens/);
    expect(() => readLoop(42 as unknown as string)).toThrow(/path of a file or a danfo DataFrame/);
  });
});

describe('readLoop scales', () => {
  const list = rows(40);

  it('OP to the travel of one valve in a split range', () => {
    const record = read(csv(list), { valveRange: { low: 0, high: 50 } });
    expectAllClose(
      record.op,
      column(list, 'op').map((value) => 2 * value),
      { relative: 1e-12 },
    );
    expect(note(record, 'valve-range')).toContain('1 % of travel is 0.5 % of OP span');
    const reversed = read(csv(list), { valveRange: { low: 50, high: 0 } });
    expectAllClose(
      reversed.op,
      column(list, 'op').map((value) => 100 - 2 * value),
      { absolute: 1e-9 },
    );
  });

  it('and refuses a record that crosses the split point', () => {
    expect(() => read(csv(list), { valveRange: { low: 0, high: 40 } })).toThrow(
      /outside the valve range 0 to 40 %: the record crosses the split point/,
    );
    expect(() => read(csv(list), { valveRange: { low: 40, high: 40 } })).toThrow(/"valveRange" needs/);
  });

  it('PV to the unit that is wanted', () => {
    const text = csv(list, 'time,SP [m3/h],PV [m3/h],OP [%]');
    const plain = read(text, { pvRange: { low: '0 l/s', high: '30 l/s' } });
    expect(plain.pvUnit).toBe('m3/h');
    expectClose(plain.pvRange!.high, 108, { relative: 1e-12 });
    const wanted = read(text, { pvRange: { low: 0, high: 108 }, pvUnit: 'l/s' });
    expectAllClose(
      wanted.pv,
      column(list, 'pv').map((value) => value / 3.6),
      { relative: 1e-12 },
    );
    expectAllClose(
      wanted.sp!,
      column(list, 'sp').map((value) => value / 3.6),
      { relative: 1e-12 },
    );
    expect(note(wanted, 'unit-converted')).toContain('from m3/h to l/s');
  });

  it('and refuses units that do not fit', () => {
    const text = csv(list, 'time,SP [m3/h],PV [m3/h],OP');
    expect(() => read(text, { pvUnit: 'kPa' })).toThrow(/"m3\/h" cannot be converted to "kPa"/);
    expect(() => read(text, { pvUnit: 'furlongs' })).toThrow(/"furlongs" is not known/);
    expect(() => read(text, { pvRange: { low: 30, high: 0 } })).toThrow(
      /"pvRange" needs a low and a higher end/,
    );
    expect(read(csv(list), { pvUnit: 'barg' }).pvUnit).toBe('barg');
  });
});

describe('readLoop and the measured travel', () => {
  const text = (travel: (op: number, i: number) => number): string =>
    csv(
      rows(200).map((row, i) => ({ ...row, op: `${row.op},${travel(Number(row.op), i).toFixed(2)}` })),
      'time,SP,PV,OP,travel',
    );

  it('keeps one that is alive', () => {
    const record = read(text((op, i) => 0.9 * op + 2 + 0.3 * Math.sin(i * i)));
    expect(record.travel).not.toBeNull();
  });

  it.each([
    ['frozen', () => 41.5, /never moves/],
    ['OP handed back', (op: number) => op, /OP itself handed back/],
    ['OP handed back, scaled', (op: number) => 0.8 * op + 10, /OP itself handed back/],
  ])('leaves out one that is %s', (_, travel, message) => {
    const record = read(text(travel));
    expect(record.travel).toBeNull();
    expect(note(record, 'travel-not-alive')).toMatch(message);
  });
});

describe('readLoop reads a data frame', () => {
  const list = rows(40);
  /** Has what danfo's DataFrame has: `columns`, and `column(name).values`. */
  const frame = (columns: Record<string, unknown[]>) => ({
    columns: Object.keys(columns),
    column: (name: string) => ({ values: columns[name]! }),
  });

  it('with numbers, texts and missing values', () => {
    const pv: (number | null)[] = column(list, 'pv');
    pv[5] = null;
    const record = readLoop(
      frame({ time: list.map(({ time }) => time), SP: column(list, 'sp'), PV: pv, OP: column(list, 'op') }),
      { tag: '31-FC-104' },
    );
    expect(record).toMatchObject({ source: 'data frame', loop: '31-FC-104', samplePeriod: 1 });
    expect(record.pv[5]).toBe(record.pv[4]);
    expect(record.sha256).toMatch(/^[0-9a-f]{64}$/);
  });

  it('and refuses one without rows', () => {
    expect(() => readLoop(frame({ time: [], PV: [], OP: [] }))).toThrow(/no rows/);
  });
});

describe('readLoop keeps to what was logged', () => {
  const list = rows(120).filter((_, i) => i % 29 !== 3);
  const header = 'time,SP [degC],PV [degC],OP';

  it('when all stamps move: only the start follows', () => {
    const { start: at, sha256, ...one } = read(csv(list, header));
    for (const seconds of [-86400 * 365, 0.125, 3600, 7e8]) {
      const moved = list.map((row) => ({
        ...row,
        time: new Date(Date.parse(String(row.time)) + 1000 * seconds).toISOString(),
      }));
      const { start: movedAt, sha256: other, ...two } = read(csv(moved, header));
      expect(two).toEqual(one);
      expect(Date.parse(movedAt) - Date.parse(at)).toBe(1000 * seconds);
    }
  });

  it('when the unit of PV changes: only PV and SP follow', () => {
    const path = exportFile(csv(list, header));
    const one = readLoop(path, { pvUnit: 'degC' });
    const two = readLoop(path, { pvUnit: 'degF' });
    expectAllClose(
      two.pv,
      one.pv.map((value) => 1.8 * value + 32),
      { relative: 1e-12 },
    );
    expect({ ...two, pv: 0, sp: 0, pvUnit: 0, notes: 0 }).toEqual({
      ...one,
      pv: 0,
      sp: 0,
      pvUnit: 0,
      notes: 0,
    });
  });

  it('a day of seconds in little time', () => {
    const text = csv(
      rows(86_400).map((row) => ({ ...row, op: `${row.op},${row.op},AUTO` })),
      'time,SP,PV,OP,travel,mode',
    );
    const path = exportFile(text, 'a day.csv');
    readLoop(path);
    const before = process.cpuUsage();
    expect(readLoop(path).pv.length).toBe(86_400);
    const { user } = process.cpuUsage(before);
    // About half a second on a free core; processor time, so that a busy machine does not fail it.
    expect(user / 1e6).toBeLessThan(3);
  });
});
