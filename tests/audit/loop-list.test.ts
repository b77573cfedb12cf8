import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { isLoopList, readLoopList, tagOfFile } from '../../src/audit/loop-list';
import { scratchFolder } from '../scratch-folder';

const folder = scratchFolder();

function list(text: string, name = 'loops.csv'): string {
  const path = join(folder, name);
  writeFileSync(path, text);
  return path;
}

const read = (text: string) => readLoopList(list(text), {});

describe('readLoopList', () => {
  it('reads all columns, with paths relative to the list', () => {
    const loops = read(
      'file,tag,service,response,pv_low,pv_high\n' +
        'a/31-FC-104.csv,31-FC-104,flow,self-regulating,0,120\n' +
        '/exports/level.csv,31-LC-140,level,integrating,-5,105.5\n',
    );
    expect(loops).toEqual([
      {
        order: 0,
        tag: '31-FC-104',
        file: 'a/31-FC-104.csv',
        path: join(folder, 'a', '31-FC-104.csv'),
        reading: {
          tag: '31-FC-104',
          service: 'flow',
          response: 'self-regulating',
          pvRange: { low: 0, high: 120 },
        },
      },
      {
        order: 1,
        tag: '31-LC-140',
        file: '/exports/level.csv',
        path: '/exports/level.csv',
        reading: {
          tag: '31-LC-140',
          service: 'level',
          response: 'integrating',
          pvRange: { low: -5, high: 105.5 },
        },
      },
    ]);
  });

  it('needs the column file alone; what is empty is not stated, and the tag comes from the name', () => {
    expect(
      read('file\nx/31 PC 122 march.csv\nboiler.csv\n').map(({ tag, reading }) => [tag, reading]),
    ).toEqual([
      ['31_PC_122', {}],
      ['boiler', {}],
    ]);
    expect(read('FILE;Tag;service\na.csv;;\n\n').map(({ reading }) => reading)).toEqual([{}]);
  });

  it('reads quoted cells as RFC 4180 has them, a byte order mark, semicolons, and decimal commas', () => {
    // RFC 4180, section 2, rules 6 and 7: commas and doubled quotes inside quotes.
    expect(read('\uFEFFfile,tag\n"a, ""b"".csv",T1\n')[0]!.file).toBe('a, "b".csv');
    expect(read('file;pv_low;pv_high\na.csv;-0,5;12,25\n')[0]!.reading.pvRange).toEqual({
      low: -0.5,
      high: 12.25,
    });
  });

  it('keeps a range with units as it is stated', () => {
    expect(read('file,pv_low,pv_high\na.csv,0 l/s,30 l/s\n')[0]!.reading.pvRange).toEqual({
      low: '0 l/s',
      high: '30 l/s',
    });
  });

  it('adds what holds for all loops', () => {
    expect(readLoopList(list('file,tag\na.csv,T1\n'), { zone: 'UTC+2' })[0]!.reading).toEqual({
      zone: 'UTC+2',
      tag: 'T1',
    });
  });

  it.each([
    ['file,pv_hihg\na.csv,3\n', /has the column "pv_hihg".*Its columns are file, tag, service/],
    ['file,tag,tag\na.csv,T1,T2\n', /the column "tag" twice/],
    ['file,service\na.csv,flow\nb.csv,flux\n', /line 3: "service" is one of flow, .*, not "flux"/],
    ['file,response\na.csv,slow\n', /line 2: "response" is one of self-regulating, integrating/],
    [
      'file,pv_low,pv_high\na.csv,10,1\n',
      /line 2: pv_low and pv_high need two numbers, the lower one first, not "10" and "1"/,
    ],
    ['file,pv_low,pv_high\na.csv,,9\n', /line 2: pv_low and pv_high need two numbers.* not "" and "9"/],
    ['file,tag\n,T1\n', /line 2: "file" is empty/],
    ['file,tag\na.csv,T1\nb.csv,T2\na.csv,T1\n', /line 4: the same file and tag stand on line 2/],
    ['file,tag\na.csv,T1,flow\n', /line 2: it has 3 cells but there are 2 columns/],
    ['file,tag\n\n', /has no loop below its line of column names/],
  ])('refuses %j', (text, sentence) => {
    expect(() => read(text)).toThrow(sentence);
    expect(() => read(text)).toThrow(/The list loops\.csv/);
  });

  it('tells many mistakes at once, and counts the rest', () => {
    const rows = Array.from({ length: 12 }, (_, i) => `${i}.csv,none`);
    expect(() => read(`file,service\n${rows.join('\n')}\n`)).toThrow(/line 2: .*line 9: .*; and 4 more\./);
  });
});

describe('isLoopList', () => {
  it.each([
    ['file,tag\n', true],
    ['\n File ;tag\n', true],
    ['\uFEFFFile;tag\n', true],
    ['file\na.csv\n', true],
    ['time,SP,PV,OP\n', false],
    ['profile,PV\n', false],
    ['', false],
  ])('%j: %s', (start, is) => expect(isLoopList(start)).toBe(is));
});

describe('tagOfFile', () => {
  it.each([
    // ANSI/ISA-5.1: first letter the variable, then the function; here with area and loop number.
    ['march/31-FC-104.csv', '31-FC-104'],
    ['export 31-LC-140 raw.xlsx', '31-LC-140'],
    ['boiler.old.csv', 'boiler.old'],
  ])('%s: %s', (file, tag) => expect(tagOfFile(file)).toBe(tag));
});
