/** The two-parameter element one OP at a time, for loops in which the next OP depends on its travel. */
import { refuseUnknownOptions, WrongUse } from '../errors';
import type { SteppableValve } from './steppable-valve';
import type { TwoParameterOptions } from './two-parameter';

/**
 * A two-parameter valve that is moved on sample by sample; it moves at once, so the time of a step does not matter.
 * The same element as `twoParameterValve`, to which its options and variants belong; `start` is 50 by default here.
 *
 * With `tolerance` 0 the published `slides-on` element also sticks when OP stands still: then take one step a scan.
 *
 * @throws WrongUse for S or J outside 0 <= J <= S, a negative tolerance, or an unknown option
 */
export function createTwoParameterValve(options: TwoParameterOptions): SteppableValve {
  refuseUnknownOptions('createTwoParameterValve', options, ['S', 'J', 'model', 'tolerance', 'start']);
  const { S, J, model = 'slides-on', tolerance = 0.02, start = 50 } = options;
  if (!(J >= 0 && S >= J && tolerance >= 0)) {
    throw new WrongUse(
      `The two-parameter valve needs 0 <= J <= S and a tolerance of 0 or more; it was given S = ${S}, J = ${J} and ` +
        `${tolerance}.`,
    );
  }
  const breakAt = (S + J) / 2;
  const behind = (S - J) / 2;
  const back = tolerance * S;
  let travel = start;
  /** 1 or -1 while it slides, 0 while it sticks. */
  let direction = 0;
  let extreme = start;
  return {
    get travel(): number {
      return travel;
    },
    advance(op: number): number {
      if (direction !== 0) {
        const ahead = direction * (op - extreme);
        if (ahead > 0 || (back > 0 && -ahead <= back)) {
          if (ahead > 0) extreme = op;
          travel = op - direction * behind;
          return travel;
        }
        travel = extreme - direction * behind;
        direction = 0;
      }
      if (Math.abs(op - travel) > breakAt) {
        const side = Math.sign(op - travel);
        travel = op - side * behind;
        if (model === 'slides-on') {
          direction = side;
          extreme = op;
        }
      }
      return travel;
    },
  };
}
