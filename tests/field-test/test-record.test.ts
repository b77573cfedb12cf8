import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { readValveTest } from '../../src/field-test/read-valve-test';
import { readTestRecord } from '../../src/field-test/test-record';
import { readLoop } from '../../src/record/read-loop';
import { scratchFolder } from '../scratch-folder';

const folder = scratchFolder();

function file(header: string, row: (k: number) => string, rows = 120): string {
  const path = join(folder, '31-FC-104.csv');
  const lines = Array.from({ length: rows }, (_, k) => `${0.5 * k},${row(k)}`);
  writeFileSync(path, `time,${header}\n${lines.join('\n')}\n`);
  return path;
}

const command = (k: number): number => (k < 60 ? 50 : 52);

describe('a test record', () => {
  it('is read with command, travel and pressure, whatever they are called, and notes what was assumed', () => {
    const path = file(
      'Valve command [%],Travel (%),Actuator pressure [kPa]',
      (k) => `${command(k)},${49 + (k % 7)},${100 + k}`,
    );
    const record = readTestRecord(path);
    expect(record.samplePeriod).toBe(0.5);
    expect(record.op[119]).toBe(52);
    expect(record.pressureUnit).toBe('kPa');
    expect(record.pressure![10]).toBe(110);
    expect(record.notes.find(({ code }) => code === 'columns')!.text).toMatch(/op from "Valve command/);
    expect(record.loop).toBe('31-FC-104');
  });

  it('keeps stretches in manual, which the record of a loop leaves out', () => {
    const path = file(
      '31-FC-104.OP,31-FC-104.PV,31-FC-104.MODE',
      (k) => `${command(k)},${k % 5},${k < 80 ? 'AUTO' : 'MAN'}`,
    );
    expect(readTestRecord(path).op.length).toBe(120);
    expect(readLoop(path).op.length).toBe(80);
    expect(readTestRecord(path).automatic![100]).toBe(0);
  });

  it('takes travel as a length where the rated travel is stated', () => {
    const path = file('OP,Travel [mm]', (k) => `${command(k)},${20 + (k % 7)}`);
    expect(readTestRecord(path, { stroke: '4 cm' }).travel![0]).toBeCloseTo(50, 9);
    expect(() => readTestRecord(path)).toThrow(/is in mm. State the rated travel with --stroke/);
    expect(() => readTestRecord(path, { stroke: '40' })).toThrow(
      /"stroke" needs a number above 0 with its unit/,
    );
    expect(() => readTestRecord(path, { stroke: '40 kPa' })).toThrow(/different things/);
  });

  it('leaves out a travel that only hands the command back', () => {
    const path = file('OP,Travel,PV', (k) => `${50 + (k % 20)},${50 + (k % 20)},${k % 3}`);
    const record = readTestRecord(path);
    expect(record.travel).toBeNull();
    expect(record.notes.map(({ code }) => code)).toContain('travel-not-alive');
  });

  it.each([
    ['SP,PV', /no column for the command/],
    ['OP,SP', /neither travel nor PV/],
    ['OP,Travel,Position', /two columns that may be travel/],
    ['MV,PV', /MV is never taken by its name/],
  ])('with the columns %s is refused with a sentence', (header, message) => {
    const cells = header.split(',').length;
    const path = file(header, (k) =>
      Array(cells)
        .fill(k % 9)
        .join(','),
    );
    expect(() => readTestRecord(path)).toThrow(message);
  });

  it('refuses unknown options and columns that are not there', () => {
    const path = file('OP,PV', (k) => `${command(k)},${k}`);
    expect(() => readTestRecord(path, { traevl: 'x' } as object)).toThrow(/no option "traevl"/);
    expect(() => readTestRecord(path, { travel: 'x' })).toThrow(/no column "x" for travel/);
    expect(() => readTestRecord(path, { pressureUnit: 'bar', pressure: 'PV' })).not.toThrow();
    expect(() => readTestRecord(path, { pressureUnit: 'm', pressure: 'PV' })).toThrow(/different things/);
  });

  it('may be the record of a loop, which is refused as a test while it is in automatic', () => {
    const record = readLoop('data/31-FC-104-with-travel.csv');
    expect(readValveTest(record, { kind: 'stroke' }).reading.deadBand).not.toBeNull();
    expect(() => readValveTest('data/31-FC-104-with-travel.csv')).toThrow(/no valve test: assess it/);
    expect(() => readValveTest(record, { op: 'OP', kind: 'stroke' })).toThrow(
      /do not go with a record that is read/,
    );
    expect(() => readValveTest(record, { kind: 'ramp' as 'stroke' })).toThrow(
      /"kind" is one of hold, step, stroke/,
    );
  });
});
