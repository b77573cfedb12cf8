/**
 * The values of values.json as Parquet, written by parquet-wasm (the Rust implementation of Apache Arrow) and by
 * @dsnp/parquetjs, which share no code with the reader or with each other.
 *
 * Run in a folder of its own, as the project does not depend on them:
 *   npm install parquet-wasm@0.8.0 apache-arrow@21.2.0 @dsnp/parquetjs@1.9.3
 *   node PATH-TO/tests/reference/exports/parquet.mjs PATH-TO/tests/reference/exports
 * It writes wide.parquet (stamps in UTC, ms, row groups of 100 rows, Snappy), long.parquet (clock time without a zone, microseconds, tags by
 * dictionary, Zstandard) and wide-gzip.parquet (by @dsnp/parquetjs) into that folder.
 */
import { readFileSync, writeFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { join } from 'node:path';

const require = createRequire(join(process.cwd(), 'package.json'));
const arrow = require('apache-arrow');
const parquet = require('parquet-wasm');
const { ParquetSchema, ParquetWriter } = require('@dsnp/parquetjs');

const folder = process.argv[2];
const { start, period, loops } = JSON.parse(readFileSync(join(folder, 'values.json'), 'utf8'));
const signals = Object.entries(loops).flatMap(([tag, all]) =>
  Object.entries(all).map(([signal, cells]) => ({ name: `${tag}.${signal}`, cells })),
);
const n = signals[0].cells.length;
const ms = Array.from({ length: n }, (_, i) => Date.parse(start) + 1000 * period * i);

function write(name, columns, options) {
  const table = new arrow.Table(Object.fromEntries(columns));
  const wasm = parquet.Table.fromIPCStream(arrow.tableToIPC(table, 'stream'));
  writeFileSync(join(folder, name), parquet.writeParquet(wasm, options));
}

const doubles = (cells) => arrow.vectorFromArray(cells, new arrow.Float64());
const texts = (cells) => arrow.vectorFromArray(cells, new arrow.Utf8());

write(
  'wide.parquet',
  [
    ['time', arrow.vectorFromArray(ms, new arrow.TimestampMillisecond('UTC'))],
    ...signals.map(({ name, cells }) => [name, typeof cells[0] === 'string' ? texts(cells) : doubles(cells)]),
  ],
  new parquet.WriterPropertiesBuilder()
    .setCompression(parquet.Compression.SNAPPY)
    .setMaxRowGroupSize(100)
    .build(),
);

const rows = ms.flatMap((time, i) =>
  signals
    .filter(({ name }) => !name.endsWith('MODE'))
    .map(({ name, cells }) => ({ time, name, value: cells[i] ?? 0, quality: cells[i] === null ? 0 : 192 })),
);
write(
  'long.parquet',
  [
    ['time', arrow.vectorFromArray(rows.map(({ time }) => time), new arrow.TimestampMicrosecond())],
    ['tag', arrow.vectorFromArray(rows.map(({ name }) => name), new arrow.Dictionary(new arrow.Utf8(), new arrow.Int32()))],
    ['value', doubles(rows.map(({ value }) => value))],
    ['quality', arrow.vectorFromArray(rows.map(({ quality }) => quality), new arrow.Int32())],
  ],
  new parquet.WriterPropertiesBuilder()
    .setCompression(parquet.Compression.ZSTD)
    .setMaxRowGroupSize(500)
    .build(),
);

const schema = new ParquetSchema({
  time: { type: 'TIMESTAMP_MILLIS', compression: 'GZIP' },
  ...Object.fromEntries(
    signals.map(({ name, cells }) => [
      // This writer takes a point in a name for a path.
      name.replaceAll('.', '/'),
      { type: typeof cells[0] === 'string' ? 'UTF8' : 'DOUBLE', optional: true, compression: 'GZIP' },
    ]),
  ),
});
const writer = await ParquetWriter.openFile(schema, join(folder, 'wide-gzip.parquet'), { rowGroupSize: 90 });
for (let i = 0; i < n; i++) {
  const row = { time: new Date(ms[i]) };
  for (const { name, cells } of signals) if (cells[i] !== null) row[name.replaceAll('.', '/')] = cells[i];
  await writer.appendRow(row);
}
await writer.close();
