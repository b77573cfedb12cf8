/**
 * Intervals of S and J. Plain likelihood intervals are far too narrow here: the model's own error dominates the noise.
 * Three things are added up instead, each as a share of S: how far refits on parts of the record spread; how far other
 * histories of the travel that explain PV nearly as well lie apart; and a floor. Factors set on simulated loops so
 * that 90 % intervals hold the truth about as often as they say.
 */

import { countReversals } from '../oscillation/reversals';
import { quantile } from '../signal/statistics';
import type { Estimate } from './stiction-fit';

export interface PartFit {
  readonly S: number;
  readonly J: number;
}

/** Another history of the travel, with what it costs more than the best, in units of negative log likelihood. */
export interface Alternative extends PartFit {
  readonly excess: number;
}

const unit = '% of OP span';
const floor = 0.05;
/** 3 standard deviations over the square root of five parts. */
const partFactor = 3 / Math.sqrt(5);
/** Excess at which an alternative counts a third (1/e) of the best; wide, as the likelihood is overconfident. */
const alternativeScale = 40;
const roomFactor = 0.02;
const leastTurn = 0.25;

/** Sample ranges of five overlapping parts, each a third of the record. */
export function recordParts(samples: number): { from: number; to: number }[] {
  const length = Math.floor(samples / 3);
  return Array.from({ length: 5 }, (_, i) => {
    const from = Math.round((i * (samples - length)) / 4);
    return { from, to: from + length };
  });
}

/**
 * How far OP moves beyond what it takes to break loose, as a share of S: the median swing between turns less S, plus
 * the spread of the middles of the swings. Near 0 the valve only hops between two places, PV shows nothing but
 * process gain times jump, and J cannot be told from the gain.
 */
export function roomBeyondS(op: Float64Array, S: number): number {
  const range = quantile(op, 0.98) - quantile(op, 0.02);
  const { at } = countReversals(op, leastTurn * range);
  if (at.length < 3) return 0;
  const swings = Float64Array.from({ length: at.length - 1 }, (_, i) => Math.abs(op[at[i + 1]] - op[at[i]]));
  const middles = Array.from(swings, (_, i) => (op[at[i + 1]] + op[at[i]]) / 2);
  return Math.max(0, quantile(swings, 0.5) / S - 1) + spreadOf(middles) / S;
}

export interface Intervals {
  readonly S: Estimate;
  readonly J: Estimate;
  /** Spread of J over the parts, and over the alternatives, as shares of S. */
  readonly partsJ: number;
  readonly alternativesJ: number;
}

export function intervalsOf(
  { S, J }: PartFit,
  parts: readonly PartFit[],
  alternatives: readonly Alternative[],
  room: number,
): Intervals {
  const weights = alternatives.map(({ excess }) => Math.exp(-excess / alternativeScale));
  const total = weights.reduce((sum, weight) => sum + weight, 0);
  const apart = (pick: (fit: PartFit) => number, from: number): number =>
    Math.sqrt(
      alternatives.reduce((sum, fit, i) => sum + weights[i] * (pick(fit) - from) ** 2, 0) /
        Math.max(total, 1),
    ) / S;
  const partsS = spreadOf(parts.map((part) => part.S)) / S;
  const partsJ = spreadOf(parts.map((part) => part.J)) / S;
  const alternativesS = apart((fit) => fit.S, S);
  const alternativesJ = apart((fit) => fit.J, J);
  const halfS = S * (partFactor * partsS + alternativesS + floor);
  const halfJ = S * (partFactor * partsJ + alternativesJ + floor + roomFactor / Math.max(room, 0.05));
  return {
    S: { value: S, low: Math.max(0, S - halfS), high: S + halfS, unit },
    J: { value: J, low: Math.max(0, J - halfJ), high: Math.min(J + halfJ, S + halfS), unit },
    partsJ,
    alternativesJ,
  };
}

function spreadOf(values: readonly number[]): number {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  const squares = values.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  return Math.sqrt(squares / Math.max(1, values.length - 1));
}
