import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import type { ExportMap } from '../../../src/audit/sources/export-map';
import { mapText, readMap } from '../../../src/audit/sources/read-map';
import { scratchFolder } from '../../scratch-folder';

const path = join(scratchFolder(), 'map.csv');
const read = (text: string): ExportMap => {
  writeFileSync(path, text);
  return readMap(path);
};

describe('readMap', () => {
  it('takes what is stated and leaves the rest open', () => {
    const text = [
      'tag;service;response;pv_low;pv_high;time;sp;pv;op;mode;travel;valve_low;valve_high;time_format;zone;comment',
      '31-FC-104;Flow;self-regulating;0;120,5;Stamp;a.SP;a.PV;a.OP;a.MODE;a.ZT;100;50,5;dd.MM.yyyy HH:mm:ss;UTC;checked',
      '31-LC-140;;;0 l/s;30 l/s;;;b.PV;b.OP;;;;;;;',
    ].join('\n');
    expect(read(text).loops).toEqual([
      {
        order: 0,
        tag: '31-FC-104',
        service: 'flow',
        response: 'self-regulating',
        pvRange: { low: 0, high: 120.5 },
        valveRange: { low: 100, high: 50.5 },
        time: 'Stamp',
        sp: 'a.SP',
        pv: 'a.PV',
        op: 'a.OP',
        mode: 'a.MODE',
        travel: 'a.ZT',
        timeFormat: 'dd.MM.yyyy HH:mm:ss',
        zone: 'UTC',
        comment: 'checked',
      },
      { order: 1, tag: '31-LC-140', pvRange: { low: '0 l/s', high: '30 l/s' }, pv: 'b.PV', op: 'b.OP' },
    ]);
  });

  it('reads what mapText writes, names that look like formulas and cells with commas too', () => {
    const map: ExportMap = {
      loops: [
        { order: 0, tag: '=31-FC-104', pv: '+PV, "raw"', op: "-OP's", sp: '@SP', comment: 'a; b, c' },
        { order: 1, tag: "'quoted", pv: 'p', op: 'o', pvRange: { low: -5, high: 5 }, service: 'other' },
      ],
    };
    const text = mapText(map);
    // Negative numbers are none.
    expect(text).not.toMatch(/(^|,)"?([=+@]|-\D)/m);
    expect(read(text)).toEqual(map);
  });

  it.each([
    [
      'tag,pv,op\n,a,b\n',
      /^The map map\.csv cannot be used: line 2: "tag" is empty\. Its columns are tag, service/,
    ],
    ['tag,pv,op\nx,a,b\nx,c,d\n', /line 3: the tag x stands on line 2 too/],
    ['tag,pv,op\nx,a,a\n', /line 2: "pv" and "op" are both "a"/],
    [
      'tag,pv,op,service\nx,a,b,steam\n',
      /"service" is one of flow, pressure, level, temperature, other, not "steam"/,
    ],
    ['tag,pv,op,response\nx,a,b,slow\n', /"response" is one of self-regulating/],
    [
      'tag,pv,op,pv_low,pv_high\nx,a,b,9,1\n',
      /pv_low and pv_high need two numbers, the lower one first, not "9" and "1"/,
    ],
    [
      'tag,pv,op,valve_low,valve_high\nx,a,b,50,\n',
      /valve_low and valve_high need two numbers, % of OP, not "50" and ""/,
    ],
    ['tag,pv,output\nx,a,b\n', /it has the column "output", which no map has/],
    ['tag,pv,op,op\nx,a,b,c\n', /it has the column "op" twice/],
    ['tag,pv,op\nx,a,b,c\n', /line 2: it has 4 cells but there are 3 columns/],
    ['tag,pv,op\n', /has no loop below its line of column names/],
  ])('refuses %j', (text, message) => {
    expect(() => read(text)).toThrow(message);
  });

  it('refuses a map that is not there', () => {
    expect(() => readMap(join(path, '../none.csv'))).toThrow(/There is no file ".*none\.csv"/);
  });
});
