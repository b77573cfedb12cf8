/** Opens an export of many loops by what its first bytes say it is: Parquet, an Excel workbook, or text. */
import { statSync } from 'node:fs';
import { basename } from 'node:path';
import { UnreadableInput } from '../../errors';
import { OtherEncoding, openDelimited, textEncodings } from './delimited-export';
import type { ExportReader } from './export-reader';
import { bytesOf } from './file-bytes';
import { openParquet } from './parquet-export';
import { openWorkbook } from './workbook-export';

/** How an export is called in messages. */
export function calledExport(path: string): string {
  return `The file ${basename(path)}`;
}

/**
 * Does something with an export. Text is tried as UTF-8 first and, where a byte of it does not fit, all over again as
 * Latin-1: then `work` is called a second time.
 *
 * @throws UnreadableInput for a file that is not there, is empty, or is none of the kinds that are read
 */
export async function withExport<Value>(
  path: string,
  work: (reader: ExportReader) => Promise<Value>,
): Promise<Value> {
  const what = calledExport(path);
  const start = magicOf(path).toString('latin1');
  if (start === 'PAR1') return work(await openParquet(path, what));
  if (start.startsWith('PK') || start === '\u00d0\u00cf\u0011\u00e0') return work(openWorkbook(path, what));
  const [encoding, other] = textEncodings(path, what);
  try {
    return await work(openDelimited(path, encoding, what));
  } catch (error) {
    if (!(error instanceof OtherEncoding) || other === undefined) throw error;
    return work(openDelimited(path, other, what));
  }
}

function magicOf(path: string): Buffer {
  try {
    if (statSync(path).isDirectory()) {
      throw new UnreadableInput(`"${path}" is a folder. Give the file of one export.`);
    }
    return bytesOf(path, 0, 4);
  } catch (error) {
    if (error instanceof UnreadableInput) throw error;
    const { code, message } = error as NodeJS.ErrnoException;
    if (code === 'ENOENT') throw new UnreadableInput(`There is no file "${path}". Check the path.`);
    throw new UnreadableInput(`${calledExport(path)} cannot be read (${message}).`);
  }
}
