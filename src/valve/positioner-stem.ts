/**
 * A stem driven by a positioner with a band: it moves only when the command is off by more than the band, then goes
 * all the way to where the command was, with a lag. In the two-parameter model that is S = J = band, sticks again.
 */
import { refuseUnknownOptions, WrongUse } from '../errors';
import type { SteppableValve } from './steppable-valve';

export interface PositionerStemOptions {
  /** Largest difference between command and travel that is left alone, % of span. Default 1. */
  readonly band?: number;
  /** Time constant of the move, s. Default 1. 0 makes moves instant. */
  readonly lag?: number;
  /** Travel at the beginning, %. Default 50. */
  readonly startTravel?: number;
}

/** A move counts as finished when this share of the band is left. */
const FINISHED = 0.01;

/**
 * A positioner-driven stem that is moved on sample by sample. The command is looked at once a call of `advance`; a
 * move under way takes a new target only when the command leaves the old one by more than the band.
 *
 * @throws WrongUse for a negative band or lag, or an unknown option
 */
export function createPositionerStem(options: PositionerStemOptions = {}): SteppableValve {
  refuseUnknownOptions('createPositionerStem', options, ['band', 'lag', 'startTravel']);
  const { band = 1, lag = 1, startTravel = 50 } = options;
  if (!(band >= 0 && lag >= 0)) {
    throw new WrongUse(`A positioner's band and lag must be 0 or more. Received ${band} and ${lag}.`);
  }
  let travel = startTravel;
  let target = startTravel;
  return {
    get travel(): number {
      return travel;
    },
    advance(op: number, dt: number): number {
      if (Math.abs(op - target) > band) target = op;
      if (travel !== target) {
        travel = lag > 0 ? target + (travel - target) * Math.exp(-dt / lag) : target;
        if (Math.abs(travel - target) <= FINISHED * band) travel = target;
      }
      return travel;
    },
  };
}
