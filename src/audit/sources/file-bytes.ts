/** Reads a stretch of a file, and takes the fingerprint of a whole one. */
import { createHash } from 'node:crypto';
import { closeSync, createReadStream, openSync, readSync } from 'node:fs';

/** Bytes `from` to `to` (left out); fewer where the file ends before. */
export function bytesOf(path: string, from: number, to: number): Buffer {
  const file = openSync(path, 'r');
  try {
    const bytes = Buffer.alloc(to - from);
    let done = 0;
    for (let got = 1; got > 0 && done < bytes.length; done += got) {
      got = readSync(file, bytes, done, bytes.length - done, from + done);
    }
    return bytes.subarray(0, done);
  } finally {
    closeSync(file);
  }
}

/** SHA-256 of a file, 64 hexadecimal digits. */
export async function sha256Of(path: string): Promise<string> {
  const hash = createHash('sha256');
  for await (const bytes of createReadStream(path, { highWaterMark: 1 << 20 })) hash.update(bytes);
  return hash.digest('hex');
}
