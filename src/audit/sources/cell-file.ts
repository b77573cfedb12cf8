/** A file with the cells of many columns, written block by block as they come and read one column at a time. */
import { closeSync, openSync, readSync, writeSync } from 'node:fs';
import { UnreadableInput } from '../../errors';
import type { Cell, CellColumn } from '../../record/table';
import { CellBlock, unpackCells } from './cell-block';

/** Where the cells of a column are found; plain data. */
export interface ColumnPlace {
  readonly length: number;
  /** Cells in each block but the last. */
  readonly blockSize: number;
  /** Position in the file of the list of its blocks, and how many there are. */
  readonly list: number;
  readonly blocks: number;
  /** Whether numbers have to be given back as texts: there is a comma in some cell, which may be a decimal comma. */
  readonly asTexts: boolean;
}

/** Memory for cells that wait to be written, over all columns (own choice). */
const waitingBytes = 48_000_000;
/** Cells in a block: fewer are packed badly, more gain nothing. */
const [fewest, most] = [128, 8192];
const bytesACell = 15;
/** Bytes gathered before they are written. */
const gathered = 1 << 20;

/** Writes columns of cells side by side. */
export class CellFileWriter {
  /** Cells in a block of a column. */
  readonly blockSize: number;
  private file: number | null;
  private position = 0;
  private waiting: Buffer[] = [];
  private waitingLength = 0;

  /** @param columns how many are written at the same time */
  constructor(path: string, columns: number) {
    const size = Math.floor(waitingBytes / bytesACell / columns);
    this.blockSize = Math.max(fewest, Math.min(most, size));
    this.file = openSync(path, 'w');
  }

  /** @param asText whether its texts stay as they are even where they look like numbers */
  column(asText: boolean): CellColumnWriter {
    return new CellColumnWriter(this, asText);
  }

  /** Appends bytes and says where they begin. */
  append(bytes: Uint8Array): number {
    const at = this.position;
    this.waiting.push(Buffer.from(bytes));
    this.position += bytes.length;
    this.waitingLength += bytes.length;
    if (this.waitingLength >= gathered) this.flush();
    return at;
  }

  /** Writes what waits and closes the file; its length in bytes. */
  end(): number {
    this.flush();
    this.close();
    return this.position;
  }

  /** Closes the file as it is; nothing when it is closed already. */
  close(): void {
    if (this.file !== null) closeSync(this.file);
    this.file = null;
  }

  private flush(): void {
    const bytes = Buffer.concat(this.waiting);
    for (let done = 0; done < bytes.length; ) done += writeSync(this.file!, bytes, done);
    this.waiting = [];
    this.waitingLength = 0;
  }
}

export class CellColumnWriter {
  length = 0;
  private readonly block: CellBlock;
  /** Beginning and length of each block, in turn. */
  private readonly places: number[] = [];
  private commas = false;

  constructor(
    private readonly file: CellFileWriter,
    asText: boolean,
  ) {
    this.block = new CellBlock(file.blockSize, asText);
  }

  add(cell: Cell): void {
    this.block.add(cell);
    this.length++;
    if (this.block.full) this.write();
  }

  /** Ends the column. */
  end(): ColumnPlace {
    if (this.block.length > 0) this.write();
    const list = Float64Array.from(this.places);
    return {
      length: this.length,
      blockSize: this.file.blockSize,
      list: this.file.append(new Uint8Array(list.buffer)),
      blocks: list.length / 2,
      asTexts: this.commas,
    };
  }

  private write(): void {
    this.commas ||= this.block.hasComma;
    const bytes = this.block.pack();
    this.places.push(this.file.append(bytes), bytes.length);
    this.block.clear();
  }
}

/** Reads the columns of a file of cells. Close it when done. */
export class CellFileReader {
  private readonly file: number;

  constructor(private readonly path: string) {
    this.file = openSync(path, 'r');
  }

  /** One block is held at a time: read the cells in order. */
  column(place: ColumnPlace): CellColumn {
    const list = this.bytes(place.list, 16 * place.blocks);
    let held = -1;
    let cells: readonly Cell[] = [];
    return {
      length: place.length,
      at: (row) => {
        const block = Math.floor(row / place.blockSize);
        if (block !== held) {
          held = block;
          const at = 16 * block;
          cells = unpackCells(this.bytes(list.readDoubleLE(at), list.readDoubleLE(at + 8)));
          if (place.asTexts) cells = cells.map(String);
        }
        return cells[row - block * place.blockSize];
      },
    };
  }

  close(): void {
    closeSync(this.file);
  }

  private bytes(position: number, length: number): Buffer {
    const bytes = Buffer.allocUnsafe(length);
    for (let done = 0; done < length; ) {
      const got = readSync(this.file, bytes, done, length - done, position + done);
      if (got === 0)
        throw new UnreadableInput(
          `The work file ${this.path} is shorter than it was written. Start the audit again.`,
        );
      done += got;
    }
    return bytes;
  }
}
