import { createHash } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { basename, join } from 'node:path';
import * as xlsx from '@e965/xlsx';
import { afterAll, describe, expect, it } from 'vitest';
import type { MappedLoop } from '../../../src/audit/sources/export-map';
import { readSpooled } from '../../../src/audit/sources/read-spooled';
import { spoolExport } from '../../../src/audit/sources/spool-export';
import type { LoopRecord } from '../../../src/record/loop-record';
import { readLoop } from '../../../src/record/read-loop';

const folder = mkdtempSync(join(tmpdir(), 'stickband-sources-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** Samples of one loop, as texts. */
type Column = readonly string[];

const rows = 700;
/** Deterministic wandering numbers with two decimals, some of them around zero. */
const wandering = (pace: number, level: number, places = 2): Column =>
  Array.from({ length: rows }, (_, i) =>
    (level + 3 * Math.sin(i / pace) + Math.cos((i * i) / 50)).toFixed(places),
  );
const stamps: Column = Array.from({ length: rows }, (_, i) =>
  new Date(Date.UTC(2026, 2, 4, 6) + 2000 * i).toISOString().replace('.000Z', 'Z'),
);

/** What stands for a record: everything but where it came from. */
const facts = ({ source: _, sha256: __, ...rest }: LoopRecord): object => rest;

interface Columns {
  readonly [name: string]: Column;
}

const textOf = (columns: Columns, separator = ','): string =>
  [
    Object.keys(columns).join(separator),
    ...stamps.map((_, i) =>
      Object.values(columns)
        .map((cells) => cells[i])
        .join(separator),
    ),
  ].join('\n');

let files = 0;
const fileOf = (text: string | Uint8Array, ending = 'csv'): string => {
  const path = join(folder, `export-${++files}.${ending}`);
  writeFileSync(path, text);
  return path;
};

const spooled = async (file: string, loops: Omit<MappedLoop, 'order'>[]): Promise<LoopRecord[]> => {
  const work = mkdtempSync(join(folder, 'work-'));
  const found = await spoolExport(file, { loops: loops.map((loop, order) => ({ order, ...loop })) }, work);
  return found.map((loop) => readSpooled(structuredClone(loop)));
};

const loops = ['31-FC-104', '31-LC-140', '31-PC-122'].map((tag, k): { tag: string; columns: Columns } => ({
  tag,
  columns: {
    [`${tag}.SP`]: Array.from({ length: rows }, () => String(50 + k)),
    [`${tag}.PV`]: wandering(7 + k, 50 * k),
    [`${tag}.OP`]: wandering(9 + k, 40, 1 + k),
  },
}));
const map = loops.map(({ tag }) => ({ tag, sp: `${tag}.SP`, pv: `${tag}.PV`, op: `${tag}.OP` }));
const wide = (change: (columns: Columns) => Columns = (columns) => columns): Columns =>
  change(Object.assign({ time: stamps }, ...loops.map(({ columns }) => columns)));

const tsv = (text: string): string => text.replaceAll(',', '\t');
const decimalCommas = (text: string): string => text.replaceAll(',', ';').replace(/(\d)\.(\d)/g, '$1,$2');
/** Changes the cells of all columns with this ending. */
const changed =
  (ending: string, change: (cell: string, i: number) => string) =>
  (columns: Columns): Columns =>
    Object.fromEntries(
      Object.entries(columns).map(([name, cells]) => [
        name,
        name.endsWith(ending) ? cells.map(change) : cells,
      ]),
    );

describe('a wide export gives the records that readLoop gives of single files', () => {
  it.each<[string, (text: string) => string | Uint8Array, ((columns: Columns) => Columns)?]>([
    ['with commas', (text) => text],
    ['with semicolons and decimal commas', decimalCommas],
    ['with tabs', tsv],
    ['with quotes everywhere', (text) => text.replace(/[^,\n]+/g, '"$&"')],
    ['with a byte order mark and Windows line ends', (text) => `\ufeff${text.replaceAll('\n', '\r\n')}\r\n`],
    ['in UTF-16', (text) => Buffer.from(`\ufeff${text}`, 'utf16le')],
    ['with lines above the names, and blank lines', (text) => `Export;plant\n\n${decimalCommas(text)}\n\n`],
    ['with a last line that is cut off', (text) => text.slice(0, text.lastIndexOf('\n') + 25)],
    [
      'with words for missing values',
      (text) => text,
      changed('.PV', (cell, i) => (i % 90 === 7 ? 'No Data' : cell)),
    ],
    ['with empty cells', (text) => text, changed('.PV', (cell, i) => (i % 70 < 3 ? '' : cell))],
    [
      'with an OP stored only when it moves',
      (text) => text,
      changed('.OP', (cell, i) => (i % 4 > 0 ? '' : cell)),
    ],
    [
      'with zeros of either sign',
      (text) => text,
      changed('.PV', (cell, i) => (i % 5 === 0 ? '-0.00' : cell)),
    ],
    [
      'with many digits and exponents',
      (text) => text,
      changed('.OP', (cell, i) => (i % 3 === 0 ? `${cell}e0` : `${cell}12345678901234567`)),
    ],
    ['with seconds since 1970', (text) => text, changed('time', (_, i) => String(1_772_604_000 + 2 * i))],
    [
      'with clock time without a zone',
      (text) => text,
      changed('time', (cell) => cell.replace('T', ' ').replace('Z', '')),
    ],
    [
      'with gaps and repeated stamps',
      (text) => text,
      changed('time', (_, i) => stamps[i < 200 || i >= 400 ? i : i < 203 ? 199 : i - 3]!),
    ],
  ])('%s', async (_, encode, change = (columns) => columns) => {
    const file = fileOf(encode(textOf(change(wide()))));
    const records = await spooled(file, map);
    const single = loops.map(({ columns }, k) =>
      readLoop(fileOf(encode(textOf(change({ time: stamps, ...columns })))), map[k]!),
    );
    expect(records.map(facts)).toEqual(single.map(facts));
    expect(records[0]!.source).toBe(basename(file));
    expect(records[0]!.sha256).toBe(createHash('sha256').update(readFileSync(file)).digest('hex'));
  });

  it('in Latin-1, which shows only when a megabyte has been read', async () => {
    const others = {
      '31-FC-104.MODE': stamps.map((_, i) => (i < 40 ? 'MAN' : 'AUTO')),
      remark: stamps.map((_, i) => (i < 690 ? ' '.repeat(3000) : 'entleert \u00fcber Nacht')),
    };
    const encode = (columns: Columns): Buffer => Buffer.from(textOf({ ...columns, ...others }), 'latin1');
    const stated = { ...map[0]!, mode: '31-FC-104.MODE' };
    const file = fileOf(encode(wide()));
    const [record] = await spooled(file, [stated]);
    const single = readLoop(fileOf(encode({ time: stamps, ...loops[0]!.columns })), stated);
    expect(facts(record!)).toEqual(facts(single));
    expect(record!.logging.manualShare).toBeCloseTo(40 / rows, 12);
    // The word itself comes out as it was written.
    await expect(spooled(file, [{ ...stated, travel: 'remark' }])).rejects.toThrow(
      /Row 692 .* the text "entleert \u00fcber Nacht"/,
    );
  });

  it('with a time, quality, mode and travel of their own', async () => {
    const own = (tag: string, k: number): Columns => ({
      [`${tag}.PV TIME`]: stamps,
      [`${tag}.PV`]: wandering(7 + k, 50),
      [`${tag}.PV QUALITY`]: stamps.map((_, i) => (i % 100 === 9 ? 'Bad' : 'Good')),
      [`${tag}.OP TIME`]: stamps.map((stamp) => stamp.replace('Z', '.250Z')),
      [`${tag}.OP`]: wandering(9, 40 + k),
      [`${tag}.MODE`]: stamps.map((_, i) => (i < 100 ? 'MAN' : 'AUTO')),
      [`${tag}.TRAVEL`]: wandering(9.3, 41 + k),
    });
    const tags = ['31-FC-104', '31-LC-140'];
    const stated = tags.map((tag) => ({
      tag,
      pv: `${tag}.PV`,
      op: `${tag}.OP`,
      mode: `${tag}.MODE`,
      travel: `${tag}.TRAVEL`,
      pvRange: { low: '0 l/s', high: '99 l/s' },
    }));
    const file = fileOf(textOf(Object.assign({}, ...tags.map(own))));
    const records = await spooled(file, stated);
    const single = tags.map((tag, k) => readLoop(fileOf(textOf(own(tag, k))), stated[k]!));
    expect(records.map(facts)).toEqual(single.map(facts));
    expect(records[1]!.logging).toMatchObject({ skew: 0.25, modeLogged: true });
    expect(records[1]!.travel).not.toBeNull();
  });

  it('with a date column, a clock column, a stated format and zone, and a line of units', async () => {
    const german = (columns: Columns): string => {
      const { time, ...others } = columns;
      const split = {
        Date: time!.map((stamp) => `${stamp.slice(8, 10)}.${stamp.slice(5, 7)}.${stamp.slice(0, 4)}`),
        Time: time!.map((stamp) => stamp.slice(11, 19)),
      };
      const text = textOf({ ...split, ...others }, ';');
      return text.replace(
        '\n',
        `\n;;${Object.keys(others)
          .map((name) => (name.endsWith('OP') ? '%' : 'l/s'))
          .join(';')}\n`,
      );
    };
    const stated = map.map((loop) => ({
      ...loop,
      timeFormat: 'dd.MM.yyyy HH:mm:ss',
      zone: 'Europe/Athens',
      pvRange: { low: 0, high: 120 },
    }));
    const records = await spooled(fileOf(german(wide())), stated);
    const single = loops.map(({ columns }, k) =>
      readLoop(fileOf(german({ time: stamps, ...columns })), stated[k]!),
    );
    expect(records.map(facts)).toEqual(single.map(facts));
    expect(records[0]).toMatchObject({ start: '2026-03-04T04:00:00.000Z', pvUnit: 'l/s' });
  });

  it('from a workbook', async () => {
    const book = (columns: Columns): Uint8Array => {
      const sheet = xlsx.utils.aoa_to_sheet([
        Object.keys(columns),
        ...stamps.map((stamp, i) =>
          Object.entries(columns).map(([name, cells]) => (name === 'time' ? stamp : Number(cells[i]))),
        ),
      ]);
      return xlsx.write({ SheetNames: ['a'], Sheets: { a: sheet } }, { type: 'buffer', bookType: 'xlsx' });
    };
    const records = await spooled(fileOf(book(wide()), 'xlsx'), map);
    const single = loops.map(({ columns }, k) =>
      readLoop(fileOf(book({ time: stamps, ...columns }), 'xlsx'), map[k]!),
    );
    expect(records.map(facts)).toEqual(single.map(facts));
  });
});

describe('a long export gives the records that readLoop gives of single files', () => {
  /** Rows of some loops by time, with a quality; a cell that repeats is not stored. */
  const long = (some: typeof loops): string[] => [
    'Time,Tag,Value,Quality',
    ...stamps.flatMap((stamp, i) =>
      some.flatMap(({ columns }) =>
        Object.entries(columns)
          .filter(([, cells]) => cells[i] !== cells[i - 1])
          .map(([name, cells]) => `${stamp},${name},${cells[i]},${i % 50 === 3 ? 'Bad' : 'Good'}`),
      ),
    ),
  ];
  const bySignal = (some: typeof loops): string[] => {
    const [header, ...rest] = long(some);
    return [header!, ...rest.sort((a, b) => a.split(',')[1]!.localeCompare(b.split(',')[1]!))];
  };

  it.each([
    ['by time', long],
    ['tag by tag', bySignal],
  ])('%s', async (_, order) => {
    const file = fileOf(order(loops).join('\n'));
    const records = await spooled(file, [...map].reverse());
    const single = loops.map((loop, k) => readLoop(fileOf(order([loop]).join('\n')), map[k]!)).reverse();
    expect(records.map(facts)).toEqual(single.map(facts));
    expect(records[0]!.notes.map(({ code }) => code)).toEqual(
      expect.arrayContaining(['long-export', 'bad-quality']),
    );
  });

  it('and says so where a loop of the map has no rows', async () => {
    const file = fileOf(long(loops).join('\n'));
    await expect(
      spooled(file, [map[0]!, { tag: '31-TC-9', pv: '31-TC-9.PV', op: '31-TC-9.OP' }]),
    ).rejects.toThrow(/no row of the tag "31-TC-9\.PV", PV of 31-TC-9/);
    await expect(spooled(file, [{ tag: '31-TC-9', pv: '31-TC-9.PV', op: '31-TC-9.OP' }])).rejects.toThrow(
      /none of the tags that the map names\. Tags found: "31-FC-104\.SP"/,
    );
    await expect(spooled(file, [{ ...map[0]!, time: 'When' }])).rejects.toThrow(
      /no column "When" for the time/,
    );
    await expect(
      spooled(file, [
        { ...map[0]!, time: 'When' },
        { ...map[1]!, time: 'Time' },
      ]),
    ).rejects.toThrow(/names 2 time columns .*one value a row/);
  });
});

describe('a spooled export tells mistakes with the row of the export', () => {
  const wrong = wide();
  it.each<[string, Columns, RegExp]>([
    [
      'of a number',
      { ...wrong, '31-FC-104.PV': wandering(7, 0).map((cell, i) => (i === 500 ? '12x' : cell)) },
      /^Row 502 of the column "31-FC-104\.PV" has the text "12x"/,
    ],
    [
      'of a stamp',
      { ...wrong, time: stamps.map((stamp, i) => (i === 400 ? 'noon' : stamp)) },
      /^Row 402 has the time stamp "noon" in the column "time"/,
    ],
    [
      'of time that goes backwards',
      { ...wrong, time: stamps.map((stamp, i) => (i === 400 ? stamps[100]! : stamp)) },
      /row 402 is stamped 2026-03-04T06:03:20Z, after 2026-03-04T06:13:18Z in row 401/,
    ],
    [
      'of a column without numbers',
      { ...wrong, '31-FC-104.OP': stamps.map(() => 'Bad') },
      /column "31-FC-104\.OP" of The file export-\d+\.csv has no number/,
    ],
    [
      'of a comma that may be either',
      { ...wrong, '31-FC-104.PV': stamps.map((_, i) => (i === 650 ? '"1,234"' : String(i))) },
      /numbers such as "1,234" \(row 652\)/,
    ],
  ])('%s', async (_, columns, message) => {
    await expect(spooled(fileOf(textOf(columns)), [map[0]!])).rejects.toThrow(message);
  });

  it('while the other loops are read', async () => {
    const columns = { ...wrong, '31-FC-104.PV': stamps.map(() => 'x') };
    const found = await spoolExport(
      fileOf(textOf(columns)),
      { loops: map.map((loop, order) => ({ order, ...loop })) },
      join(folder, 'others'),
    );
    expect(() => readSpooled(found[0]!)).toThrow(/Row 2 of the column "31-FC-104\.PV"/);
    expect(readSpooled(found[2]!).pv.length).toBe(rows);
  });

  it('and of a row that is wider than the header, or a quotation mark that is never closed', async () => {
    const text = textOf(wide());
    const open = text.slice(0, text.indexOf('\n', 20_000) + 1);
    const unclosed = open + text.slice(open.length).replace(/\n([^,]*),/, '\n$1,"');
    const line = open.split('\n').length + 1;
    for (const read of [
      (file: string) => spooled(file, map),
      async (file: string) => [readLoop(file, map[0]!)],
    ]) {
      await expect(read(fileOf(unclosed))).rejects.toThrow(
        `quotation mark on line ${line} that is never closed`,
      );
    }
    const at = text.indexOf('\n', 30_000);
    await expect(spooled(fileOf(`${text.slice(0, at)},77${text.slice(at)}`), map)).rejects.toThrow(
      /has 11 cells on line \d+ but 10 column names/,
    );
  });

  it('and of a map that leaves a column open or names one that is not there', async () => {
    const file = fileOf(textOf(wide()));
    const { op: _, ...open } = map[0]!;
    await expect(spooled(file, [open, map[1]!])).rejects.toThrow(
      /does not say which column is OP of 31-FC-104\. Fill in its column "op"/,
    );
    await expect(spooled(file, [open])).rejects.toThrow(/states PV and OP of no loop/);
    await expect(spooled(file, [{ ...map[0]!, sp: 'SP', pv: '31-FC-104.pv' }])).rejects.toThrow(
      /does not fit its map: there is no column "SP" for SP of 31-FC-104\. Columns found: "31-FC-104\.SP"/,
    );
    const twice = fileOf(textOf(wide()).replace('31-LC-140.PV', '31-FC-104.PV'));
    await expect(spooled(twice, [map[0]!])).rejects.toThrow(
      /"31-FC-104\.PV", PV of 31-FC-104, stands in the header twice/,
    );
  });

  it('at once, when no loop can be read with the stamps', async () => {
    const file = fileOf(textOf({ ...wide(), time: stamps.map((_, i) => `day ${i}`) }));
    await expect(
      spoolExport(file, { loops: [{ order: 0, ...map[0]! }] }, join(folder, 'stamps')),
    ).rejects.toThrow(/Row 2 has the time stamp "day 0"/);
  });
});
