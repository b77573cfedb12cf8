/** What is stated of a loop before it is read; everything is optional, and what is not stated is assumed and noted. */
import { refuseUnknownOptions, WrongUse } from '../errors';
import type { Range, Response, Service } from './loop-record';
import type { StatedRange } from './units';

export interface ReadLoopOptions {
  /** Tag of the loop, needed where the export holds several. Default: from the column names, else the file name. */
  readonly tag?: string;
  /** Default: from the first letter of an ISA-5.1 tag, noted; else `other`. */
  readonly service?: Service;
  /** Default: from the service, noted. */
  readonly response?: Response;
  /**
   * Range of PV: numbers, or texts with units such as `0 l/s` and `30 l/s`, which are converted to the unit of PV.
   * Default: not known; PV is then shown without a share of its range.
   */
  readonly pvRange?: StatedRange;
  /**
   * Unit in which PV and SP are wanted. Where the export names another one, they are converted (mathjs); where it
   * names none, they are taken to be in this unit. Default: the unit of the export, else that of the range.
   */
  readonly pvUnit?: string;
  /**
   * OP at which this valve is closed (low) and open (high), % of OP span, for a split range; OP is then given in % of
   * travel. Default: OP's whole span is the travel.
   */
  readonly valveRange?: Range;
  /** Names of columns, or of tags in a long export. Default: found by their names, noted. */
  readonly time?: string;
  readonly sp?: string;
  readonly pv?: string;
  readonly op?: string;
  readonly travel?: string;
  readonly mode?: string;
  /** Format of the stamps in luxon's tokens, e.g. `dd.MM.yyyy HH:mm:ss`. Default: ISO 8601, or numbers since 1970. */
  readonly timeFormat?: string;
  /** Zone of stamps that carry none: an IANA name, UTC, or a distance such as UTC+2. Default: UTC, noted. */
  readonly zone?: string;
}

const OPTIONS = [
  'tag',
  'service',
  'response',
  'pvRange',
  'pvUnit',
  'valveRange',
  'time',
  'sp',
  'pv',
  'op',
  'travel',
  'mode',
  'timeFormat',
  'zone',
] as const;

const services: readonly Service[] = ['flow', 'pressure', 'level', 'temperature', 'other'];
const responses: readonly Response[] = ['self-regulating', 'integrating', 'unknown'];

/** @throws WrongUse for unknown options, services and responses */
export function checkReadOptions(where: string, options: ReadLoopOptions): void {
  refuseUnknownOptions(where, options, OPTIONS);
  refuseUnknownValue('service', options.service, services);
  refuseUnknownValue('response', options.response, responses);
}

function refuseUnknownValue(option: string, value: string | undefined, known: readonly string[]): void {
  if (value !== undefined && !known.includes(value)) {
    throw new WrongUse(`The option "${option}" is one of ${known.join(', ')}. Received "${value}".`);
  }
}
