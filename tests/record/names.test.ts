import { describe, expect, it } from 'vitest';
import { bareTag, isaTag, roleOf, sameLoop, serviceOf } from '../../src/record/names';

describe('roleOf', () => {
  it.each([
    ['31-FC-104.PV', '31-FC-104', 'pv', ''],
    ['31FC104.SP', '31FC104', 'sp', ''],
    ['31-FC-104 OP', '31-FC-104', 'op', ''],
    ['31_FC_104_OUT', '31_FC_104', 'op', ''],
    ['31-FC-104/Set Point', '31-FC-104', 'sp', ''],
    ['31-FC-104.BLK1.PV', '31-FC-104.BLK1', 'pv', ''],
    ['PV [l/s]', '', 'pv', 'l/s'],
    ['PV (31-FC-104)', '31-FC-104', 'pv', ''],
    ['31-FC-104.MV', '31-FC-104', 'mv', ''],
    ['Time stamp', '', 'time', ''],
    ['Valve position', '', 'travel', ''],
    ['31-FC-104', '31-FC-104', null, ''],
    ['stop', 'stop', null, ''],
    ['Flow', 'Flow', null, ''],
  ])('reads "%s"', (name, loop, role, unit) => {
    expect(roleOf(name)).toMatchObject({ loop, role, unit });
  });

  it('gives a time or quality column to the signal that it names', () => {
    expect(roleOf('31-FC-104.PV quality')).toMatchObject({ loop: '31-FC-104', role: 'quality', of: 'pv' });
    expect(roleOf('OP time')).toMatchObject({ loop: '', role: 'time', of: 'op' });
    expect(roleOf('quality')).toMatchObject({ role: 'quality', of: null });
  });
});

describe('tags', () => {
  // Letters and loop number as in ISA-5.1, e.g. FC 104, with the area before them.
  it.each([
    ['31-FC-104', '31', 'FC', '104'],
    ['31FIC104A', '31', 'FIC', '104A'],
    ['FC-104', '', 'FC', '104'],
    ['unit3/31-LC-140.block', '31', 'LC', '140'],
  ])('isaTag finds the parts of %s', (name, area, letters, number) => {
    expect(isaTag(name)).toMatchObject({ area, letters, number });
  });

  it('isaTag does not see tags in other words', () => {
    for (const name of ['PV', 'wash water', 'loop 7', 'file1', 'test2', 'PV1', '2026-03-04', 'FLOW'])
      expect(isaTag(name)).toBeNull();
  });

  it('one loop is one loop however it is written', () => {
    expect(bareTag('31-fc_104')).toBe('31FC104');
    expect(sameLoop('area31\\31-FC-104.BLK', '31FC104')).toBe(true);
    expect(sameLoop('31-FC-104', '31-FC-10')).toBe(false);
  });

  // First letters of ISA-5.1: F flow rate, P pressure, L level, T temperature; others stand for other things.
  it.each([
    ['FC', 'flow'],
    ['PDC', 'pressure'],
    ['LIC', 'level'],
    ['TC', 'temperature'],
    ['AC', null],
  ])('serviceOf %s is %s', (letters, service) => {
    expect(serviceOf(letters)).toBe(service);
  });
});
