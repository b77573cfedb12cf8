/** Reads an export in text of any size: comma, semicolon or tab between its columns. */
import { createHash } from 'node:crypto';
import { createReadStream, statSync } from 'node:fs';
import { Readable } from 'node:stream';
import { type ParseError, parse } from 'papaparse';
import { UnreadableInput } from '../../errors';
import { encodingsOf, judged, refuseOpenQuote, separatorOf } from '../../record/delimited';
import { DataRows, headerOf, tableOf } from '../../record/header';
import type { Note } from '../../record/loop-record';
import type { Cell } from '../../record/table';
import type { Batch, ExportReader, OnProgress, ReadThrough, Wanted } from './export-reader';
import { bytesOf } from './file-bytes';

/** Bytes read at a time. The end of lines is judged on the first megabyte, as it is for a file that is read whole. */
const chunkBytes = 1 << 20;
/** Lines that the header and the separator are looked for in; more than are judged, as some may be blank. */
const firstLines = 2 * judged;
/** A row longer than this is a quotation mark that was never closed, or no text at all (own choice). */
const longestRow = 1 << 26;

/** The bytes are no text in the encoding that was tried. */
export class OtherEncoding extends Error {}

/**
 * Encodings in which the file may be read, in the order in which to try them.
 *
 * @throws UnreadableInput for a file that is empty or no text
 */
export function textEncodings(path: string, what: string): readonly [string, string?] {
  const start = bytesOf(path, 0, 65_536);
  if (start.length === 0) throw new UnreadableInput(`${what} is empty.`);
  return encodingsOf(start, what);
}

/**
 * @param encoding one of {@link textEncodings}
 * @throws UnreadableInput when there is no header or no row below it
 * @throws OtherEncoding from here and from reading, when a byte does not fit UTF-8
 */
export function openDelimited(path: string, encoding: string, what: string): ExportReader {
  const text = firstText(path, encoding, what);
  if (text.trim() === '') throw new UnreadableInput(`${what} is empty.`);
  const delimiter = separatorOf(text);
  const { data } = parse<string[]>(text, { delimiter, preview: firstLines });
  const header = headerOf(data, what);

  const read = async (
    wanted: Wanted,
    take: (batch: Batch) => void,
    onProgress: OnProgress,
  ): Promise<ReadThrough> => {
    const hash = createHash('sha256');
    const size = statSync(path).size;
    let rows: (readonly Cell[])[] = [];
    let numbers: number[] = [];
    const handOn = (): void => {
      const batch = { rows, numbers };
      rows = [];
      numbers = [];
      take({
        columns: wanted.columns,
        rows: batch.rows.length,
        cells: (column) => ({ length: batch.rows.length, at: (row) => batch.rows[row]![column] ?? '' }),
        rowNumber: (row) => batch.numbers[row]!,
      });
    };
    const data = new DataRows(header, what, (row, at) => {
      rows.push(row);
      numbers.push(at + 1);
    });
    let at = 0;
    let sinceRow = 0;
    async function* pieces(): AsyncGenerator<string> {
      const decoder = decoderFor(encoding);
      let done = 0;
      for await (const bytes of createReadStream(path, { highWaterMark: chunkBytes })) {
        hash.update(bytes);
        yield decode(decoder, bytes, true);
        done += bytes.length;
        sinceRow += bytes.length;
        onProgress(Math.min(1, done / size));
        if (sinceRow > longestRow) {
          throw new UnreadableInput(
            `${what} has a row that does not end, from line ${at + 1} on: is there a quotation mark that is never closed?`,
          );
        }
      }
      yield decode(decoder, new Uint8Array(), false);
    }
    await eachChunk(Readable.from(pieces()), delimiter, (chunk, errors) => {
      refuseOpenQuote(errors, what, at);
      if (chunk.length > 0) sinceRow = 0;
      for (const row of chunk) data.add(row, at++);
      if (rows.length > 0) handOn();
    });
    const notes: Note[] = data.end();
    if (rows.length > 0) handOn();
    return { sha256: hash.digest('hex'), notes };
  };
  return { first: { ...tableOf(data, what), notes: header.notes }, read };
}

/** Rows of a stream of text, in as many chunks as come. What `take` throws ends the reading. */
function eachChunk(
  text: Readable,
  delimiter: string,
  take: (rows: string[][], errors: ParseError[]) => void,
): Promise<void> {
  return new Promise((done, failed) => {
    parse<string[]>(text, {
      delimiter,
      chunk: ({ data, errors }) => take(data, errors),
      complete: () => done(),
      error: (error) => {
        text.destroy();
        failed(error);
      },
    });
  });
}

/** The first lines, whole ones only. */
function firstText(path: string, encoding: string, what: string): string {
  const size = statSync(path).size;
  for (let length = chunkBytes; ; length *= 4) {
    const whole = length >= size;
    const text = decode(decoderFor(encoding), bytesOf(path, 0, length), !whole);
    if (whole) return text;
    const end = Math.max(text.lastIndexOf('\n'), text.lastIndexOf('\r'));
    if (text.split(/\r\n|\r|\n/, firstLines + 1).length > firstLines) return text.slice(0, end);
    if (length >= longestRow) {
      throw new UnreadableInput(
        `${what} has fewer than ${firstLines} lines in its first ${length >> 20} MB: it is no table of one row a line.`,
      );
    }
  }
}

function decoderFor(encoding: string): TextDecoder {
  return new TextDecoder(encoding, { fatal: encoding === 'utf-8' });
}

function decode(decoder: TextDecoder, bytes: Uint8Array, stream: boolean): string {
  try {
    return decoder.decode(bytes, { stream });
  } catch {
    throw new OtherEncoding();
  }
}
