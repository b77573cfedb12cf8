/** The mapping of an export that holds many loops: which of its columns, or tags, are the signals of which loop. */
import type { Range, Response, Service } from '../../record/loop-record';
import type { StatedRange } from '../../record/units';

/** What the map says of one loop. Whatever is not stated is assumed at reading, and noted there. */
export interface MappedLoop {
  /** Position in the whole map, from 0; it stays when only some loops are taken. */
  readonly order: number;
  readonly tag: string;
  readonly service?: Service;
  readonly response?: Response;
  readonly pvRange?: StatedRange;
  /** OP at which the valve is closed and open, % of OP span (split range). */
  readonly valveRange?: Range;
  /** Names of columns in a wide export, of tags in a long one; the time is a column in both. */
  readonly time?: string;
  readonly sp?: string;
  readonly pv?: string;
  readonly op?: string;
  readonly mode?: string;
  readonly travel?: string;
  /** Luxon's tokens, where stamps are neither ISO 8601 nor numbers since 1970. */
  readonly timeFormat?: string;
  readonly zone?: string;
  /** For the person who checks the map; never read. */
  readonly comment?: string;
}

export interface ExportMap {
  readonly loops: readonly MappedLoop[];
}

/** A loop of which the map states enough to read it. */
export type ReadableLoop = MappedLoop & { readonly pv: string; readonly op: string };

export function isReadable(loop: MappedLoop): loop is ReadableLoop {
  return loop.pv !== undefined && loop.op !== undefined;
}
