/**
 * Packs cells of one column into bytes and back. Nothing that reading looks at is lost: numbers come back as numbers of
 * the same value, an empty cell as an empty cell, and any other text as it was.
 *
 * Decimal numbers, as a historian writes them, are kept as whole numbers of their last digit, each as its difference from
 * the one before: one or two bytes a sample.
 */
import { deflateRawSync, inflateRawSync } from 'node:zlib';
import type { Cell } from '../../record/table';

/** What a block holds; a block turns into the next kind when a cell does not fit. */
const DECIMAL = 0;
const FLOAT = 1;
const TEXT = 2;
/** Bytes before the cells: kind, decimals, whether there are empty cells, one unused; then the number of cells. */
const HEAD = 8;

const anyNumber = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;
/** Digits that a double always holds. */
const surely = 15;

/** The cells of one block, gathered one by one. */
export class CellBlock {
  length = 0;
  /** Whether a text has a comma in it, which may be a decimal comma. */
  hasComma = false;
  private kind = DECIMAL;
  /** Whole number of the last digit, or the number itself in a FLOAT block. */
  private readonly numbers: Float64Array;
  private readonly decimals: Uint8Array;
  private readonly empty: Uint8Array;
  private anyEmpty = false;
  /** In a TEXT block: the cells one behind the other, where each ends, and which of them are numbers. */
  private bytes: Buffer = Buffer.alloc(0);
  private readonly ends: Uint32Array;
  private readonly isNumber: Uint8Array;

  /**
   * @param size cells that it takes
   * @param asText whether texts stay as they are even where they look like numbers: stamps, modes, qualities
   */
  constructor(
    private readonly size: number,
    private readonly asText: boolean,
  ) {
    this.numbers = new Float64Array(size);
    this.decimals = new Uint8Array(size);
    this.empty = new Uint8Array(size);
    this.ends = new Uint32Array(size);
    this.isNumber = new Uint8Array(size);
    this.clear();
  }

  get full(): boolean {
    return this.length === this.size;
  }

  clear(): void {
    this.length = 0;
    this.hasComma = false;
    this.kind = this.asText ? TEXT : DECIMAL;
    this.anyEmpty = false;
  }

  add(cell: Cell): void {
    const at = this.length++;
    if (this.kind === TEXT) {
      this.addText(at, cell);
      return;
    }
    this.empty[at] = 0;
    this.decimals[at] = 0;
    if (typeof cell === 'number') {
      this.addNumber(at, cell);
      return;
    }
    if (this.addDecimal(at, cell)) return;
    const text = cell.trim();
    if (text === '') {
      this.empty[at] = 1;
      this.anyEmpty = true;
      this.numbers[at] = 0;
    } else if (anyNumber.test(text) && Number.isFinite(Number(text))) {
      this.addNumber(at, Number(text));
    } else {
      this.length--;
      this.turnToText();
      this.add(cell);
    }
  }

  private addNumber(at: number, value: number): void {
    this.turnToFloat();
    this.numbers[at] = value;
  }

  /** Takes an ordinary decimal number such as 12, -0.5 or 40.25, digit by digit; false when it is something else. */
  private addDecimal(at: number, text: string): boolean {
    const negative = text.charCodeAt(0) === 45;
    const from = negative ? 1 : 0;
    const end = text.length;
    let whole = 0;
    let point = -1;
    for (let i = from; i < end; i++) {
      const digit = text.charCodeAt(i) - 48;
      if (digit >= 0 && digit <= 9) whole = 10 * whole + digit;
      else if (digit === -2 && point < 0 && i > from) point = i;
      else return false;
    }
    const digits = end - from - (point < 0 ? 0 : 1);
    if (digits === 0 || digits > surely || point === end - 1) return false;
    if (negative && whole === 0) return false; // minus zero
    const decimals = point < 0 ? 0 : end - 1 - point;
    const signed = negative ? -whole : whole;
    if (this.kind === FLOAT) this.numbers[at] = signed / 10 ** decimals;
    else {
      this.numbers[at] = signed;
      this.decimals[at] = decimals;
    }
    return true;
  }

  private turnToFloat(): void {
    if (this.kind === FLOAT) return;
    for (let i = 0; i < this.length; i++) this.numbers[i] = this.numbers[i]! / 10 ** this.decimals[i]!;
    this.kind = FLOAT;
  }

  /** Copied as bytes: a piece of a long text would keep the whole of it in memory. */
  private addText(at: number, cell: Cell): void {
    const text = String(cell);
    const from = at === 0 ? 0 : this.ends[at - 1]!;
    const needed = from + 3 * text.length;
    if (this.bytes.length < needed) {
      this.bytes = Buffer.concat([this.bytes.subarray(0, from)], 2 * Math.max(needed, 16 * this.size));
    }
    this.ends[at] = from + this.bytes.write(text, from);
    this.isNumber[at] = typeof cell === 'number' ? 1 : 0;
    this.hasComma ||= !this.asText && text.includes(',');
  }

  /** What was taken as a number becomes its shortest text again. */
  private turnToText(): void {
    this.turnToFloat();
    this.kind = TEXT;
    for (let i = 0; i < this.length; i++) {
      const value = this.numbers[i]!;
      this.addText(i, this.empty[i] === 1 ? '' : Object.is(value, -0) ? '-0' : String(value));
    }
  }

  /** @returns the block in bytes of its own */
  pack(): Buffer {
    if (this.kind === TEXT) {
      const n = this.length;
      const ends = Buffer.from(this.ends.buffer, 0, 4 * n);
      const parts = [ends, this.isNumber.subarray(0, n), this.bytes.subarray(0, this.ends[n - 1] ?? 0)];
      return Buffer.concat([this.head(0), deflateRawSync(Buffer.concat(parts), { level: 1 })]);
    }
    const n = this.length;
    const marks = this.anyEmpty ? deflateRawSync(this.empty.subarray(0, n), { level: 1 }) : Buffer.alloc(0);
    const places = this.kind === DECIMAL ? this.placesInCommon() : null;
    const parts =
      places === null
        ? [this.head(0), sized(marks), deflateRawSync(this.bytesOfFloats(), { level: 1 })]
        : [this.head(places), sized(marks), this.differences(places)];
    return Buffer.concat(parts);
  }

  /** Decimals with which every number of the block is whole; null when that leaves the range of whole numbers. */
  private placesInCommon(): number | null {
    let most = 0;
    for (let i = 0; i < this.length; i++) most = Math.max(most, this.decimals[i]!);
    for (let i = 0; i < this.length; i++) {
      const more = most - this.decimals[i]!;
      if (more > 0 && Math.abs(this.numbers[i]!) * 10 ** more > 10 ** surely) {
        this.turnToFloat();
        return null;
      }
    }
    return most;
  }

  private bytesOfFloats(): Buffer {
    const { buffer, byteOffset } = this.numbers;
    return Buffer.from(buffer, byteOffset, 8 * this.length);
  }

  private differences(places: number): Buffer {
    const bytes = Buffer.allocUnsafe(10 * this.length);
    let at = 0;
    let before = 0;
    for (let i = 0; i < this.length; i++) {
      const now = this.empty[i] === 1 ? before : this.numbers[i]! * 10 ** (places - this.decimals[i]!);
      const step = now - before;
      before = now;
      // Signs go into the lowest bit, seven bits a byte, the highest bit says that more follow.
      let rest = step < 0 ? -2 * step - 1 : 2 * step;
      while (rest >= 128) {
        bytes[at++] = (rest % 128) + 128;
        rest = Math.floor(rest / 128);
      }
      bytes[at++] = rest;
    }
    return bytes.subarray(0, at);
  }

  private head(places: number): Buffer {
    const head = Buffer.alloc(HEAD);
    head[0] = this.kind;
    head[1] = places;
    head[2] = this.kind !== TEXT && this.anyEmpty ? 1 : 0;
    head.writeUInt32LE(this.length, 4);
    return head;
  }
}

function sized(bytes: Buffer): Buffer {
  const size = Buffer.alloc(4);
  size.writeUInt32LE(bytes.length);
  return Buffer.concat([size, bytes]);
}

/** The cells of a packed block. Numbers come as numbers; a block that had other texts in it comes as texts. */
export function unpackCells(bytes: Buffer): readonly Cell[] {
  const [kind, places, hasEmpty] = bytes;
  const n = bytes.readUInt32LE(4);
  if (kind === TEXT) return textsOf(inflateRawSync(bytes.subarray(HEAD)), n);
  const marksSize = bytes.readUInt32LE(HEAD);
  const from = HEAD + 4 + marksSize;
  const marks = hasEmpty === 1 ? inflateRawSync(bytes.subarray(HEAD + 4, from)) : null;
  const numbers = kind === FLOAT ? floatsOf(bytes.subarray(from)) : decimalsOf(bytes, from, n, places!);
  if (marks === null) return numbers;
  return numbers.map((value, i): Cell => (marks[i] === 1 ? '' : value));
}

function textsOf(bytes: Buffer, n: number): Cell[] {
  const cells: Cell[] = [];
  let from = 5 * n;
  for (let i = 0; i < n; i++) {
    const to = 5 * n + bytes.readUInt32LE(4 * i);
    const text = bytes.toString('utf8', from, to);
    cells.push(bytes[4 * n + i] === 1 ? Number(text) : text);
    from = to;
  }
  return cells;
}

function floatsOf(packed: Buffer): number[] {
  const bytes = inflateRawSync(packed);
  return Array.from({ length: bytes.length / 8 }, (_, i) => bytes.readDoubleLE(8 * i));
}

function decimalsOf(bytes: Buffer, from: number, n: number, places: number): number[] {
  const numbers = new Array<number>(n);
  const divisor = 10 ** places;
  let at = from;
  let now = 0;
  for (let i = 0; i < n; i++) {
    let step = 0;
    let weight = 1;
    for (;;) {
      const byte = bytes[at++]!;
      step += (byte & 127) * weight;
      if (byte < 128) break;
      weight *= 128;
    }
    now += step % 2 === 1 ? -(step + 1) / 2 : step / 2;
    numbers[i] = now / divisor;
  }
  return numbers;
}
