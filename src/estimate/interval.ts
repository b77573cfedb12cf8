/**
 * Intervals of S and J from refits on overlapping parts of the record. Plain likelihood intervals are far too
 * narrow here: the model's own error dominates the noise, and the refits show it.
 */
import type { Estimate } from './stiction-fit';

export interface PartFit {
  readonly S: number;
  readonly J: number;
}

/** Sample ranges of the five overlapping parts, each a third of the record. */
export function recordParts(samples: number): { from: number; to: number }[] {
  const length = Math.floor(samples / 3);
  return Array.from({ length: 5 }, (_, i) => {
    const from = Math.round((i * (samples - length)) / 4);
    return { from, to: from + length };
  });
}

const unit = '% of OP span';

export interface Intervals {
  readonly S: Estimate;
  readonly J: Estimate;
  /** Spread of J over the parts as a share of S. */
  readonly spreadJ: number;
  readonly spreadS: number;
}

/** 90 % intervals of `S` and `J` from the fits of the parts. */
export function intervalsFromParts(S: number, J: number, parts: readonly PartFit[]): Intervals {
  const spread = (values: number[]): number => {
    const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
    return Math.sqrt(
      values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / Math.max(1, values.length - 1),
    );
  };
  const sdS = spread(parts.map((part) => part.S));
  const sdJ = spread(parts.map((part) => part.J));
  const halfS = (3 * sdS) / Math.sqrt(5) + 0.08 * S;
  const halfJ = (3 * sdJ) / Math.sqrt(5) + 0.08 * S;
  return {
    S: { value: S, low: Math.max(0, S - halfS), high: S + halfS, unit },
    J: { value: J, low: Math.max(0, J - halfJ), high: Math.min(J + halfJ, S + halfS), unit },
    spreadS: sdS / S,
    spreadJ: sdJ / S,
  };
}
