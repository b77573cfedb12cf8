import { describe, expect, it } from 'vitest';
import { dataFrame, tableOf } from '../../src/notebook/data-frame';
import { showTable } from '../../src/notebook/show';

const table = Object.freeze({
  title: 'Slips',
  columns: [
    { name: 'time, s', values: Object.freeze([1.5, 1772604000123, 3]) },
    { name: 'direction', values: Object.freeze(['up', 'down', 'up']) },
  ],
});

describe('a table as a danfo data frame', () => {
  it('keeps columns and values whole, and comes back as it was', async () => {
    const frame = await dataFrame(table);
    expect(frame.shape).toEqual([3, 2]);
    expect(tableOf(frame, 'Slips')).toEqual(table);
  });

  it('can be filtered, which is what it is for', async () => {
    const frame = await dataFrame(table);
    const isUp = frame.column('direction').eq('up' as never); // danfo's types leave texts out
    const up = frame.query(isUp);
    expect(tableOf(up, 'Up').columns[0]!.values).toEqual([1.5, 3]);
  });

  it('may be empty', async () => {
    const frame = await dataFrame({ title: 'None', columns: [{ name: 'time, s', values: [] }] });
    expect(frame.shape).toEqual([0, 1]);
    expect(tableOf(frame, 'None').columns).toEqual([{ name: 'time, s', values: [] }]);
  });
});

describe('showing outside a kernel', () => {
  it('says where it works', async () => {
    await expect(showTable(table)).rejects.toThrow(/in a cell of the TypeScript kernel/);
  });

  it('refuses an option it does not know', async () => {
    await expect(showTable(table, { row: 3 } as object)).rejects.toThrow(/showTable has no option "row"/);
  });
});
