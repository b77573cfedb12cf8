/** What was logged of one loop, after reading: evenly spaced, aligned, in known units. Plain read-only data. */

/** Kind of service; the first letter of an ISA-5.1 tag gives it when it is not stated (and a note says so). */
export type Service = 'flow' | 'pressure' | 'level' | 'temperature' | 'other';

/** How the PV answers a lasting move of the valve. */
export type Response = 'self-regulating' | 'integrating' | 'unknown';

/** Something that was assumed, seen or left out, to be shown beside the numbers. */
export interface Note {
  readonly code: string;
  readonly text: string;
}

/** Low and high end of a range, in the unit of the signal. */
export interface Range {
  readonly low: number;
  readonly high: number;
}

/** What reading found out about the way the data were logged. Shares are 0..1 of the samples. */
export interface LoggingFacts {
  /** Rows of the export, and how many were left out because time did not move on (duplicates). */
  readonly rows: number;
  readonly duplicates: number;
  /** Places where the time step is more than 1.5 times the usual one, and the longest of them in seconds. */
  readonly gaps: number;
  readonly longestGap: number;
  /** Share of samples in manual (or another mode that is not automatic), and of bad quality. */
  readonly manualShare: number;
  readonly badShare: number;
  /** Share of samples that were carried forward or interpolated to a common time grid. */
  readonly filledShare: number;
  /** Median distance between the stamps of PV and OP, s; 0 for a wide export with one time column. */
  readonly skew: number;
  /** Whether a controller mode column was there. */
  readonly modeLogged: boolean;
  /** Share of the export that the record keeps (its longest usable automatic stretch). */
  readonly keptShare: number;
}

export interface LoopRecord {
  /** Tag of the loop, e.g. `31-FC-104`. */
  readonly loop: string;
  readonly service: Service;
  readonly response: Response;
  /** File name without folders, or `data frame`. */
  readonly source: string;
  /** SHA-256 of the bytes read (of the columns, for a data frame), 64 hexadecimal digits. */
  readonly sha256: string;
  /** Time of the first sample, ISO 8601. */
  readonly start: string;
  /** Seconds between samples. */
  readonly samplePeriod: number;
  /** Process variable, engineering units. All arrays have one value a sample and the same length. */
  readonly pv: Float64Array;
  /** Set point, engineering units; null when not logged. */
  readonly sp: Float64Array | null;
  /** Controller output, % of OP span (% of travel when a valve range was stated). */
  readonly op: Float64Array;
  /** Measured valve travel, %; null when not logged or not alive. */
  readonly travel: Float64Array | null;
  /** Unit of PV as stated, '' when unknown. */
  readonly pvUnit: string;
  /** PV range as stated; null when not stated. */
  readonly pvRange: Range | null;
  readonly logging: LoggingFacts;
  readonly notes: readonly Note[];
}
