/**
 * Draws the final control assembly of an accuracy case. Never the two-parameter element: a stem with a friction law,
 * or a positioner that moves only beyond a band.
 *
 * Ranges: S 0.4-10 % log; J/S from 0.02 to 0.8, half of them above 0.24; an eighth are positioner-driven with
 * S = J = 0.4-5 % log and a lag of 1-6 s. The stem is the textbook valve with its friction scaled to S and J; Stribeck
 * curve with its speed at 0.003-1 % of stroke per second log, or (one in seven) a step-down; viscous friction 0.7-8
 * times the textbook's, log; actuator lag 0.1-1.5 s log (flow) or 0.3-3 s log. A quarter of the valves are
 * equal-percentage ones of rangeability 30-50. Good valves: S 0.05-0.3 % log, J/S 0 or 0.1-0.3, never a step-down. Worn
 * linkages: 0.8-6 % log of lost motion behind such a stem.
 */

import { stepDownFriction, stribeckFriction } from '../../src/valve/friction-law';
import { createPositionerStem } from '../../src/valve/positioner-stem';
import { createStem, TEXTBOOK_VALVE } from '../../src/valve/stem';
import type { SteppableValve } from '../../src/valve/steppable-valve';
import type { Draw } from './draw';
import type { TestedService } from './plant';

export interface Assembly {
  readonly sort: 'stribeck' | 'step-down' | 'positioner' | 'worn-linkage';
  /** As built, %: what a slow stroke of it would show. */
  readonly S: number;
  readonly J: number;
  /** s; of the move, for a positioner. */
  readonly lag: number;
  /** Rangeability, or null for a linear valve. */
  readonly equalPercentage: number | null;
  /** A new one at rest at this OP. */
  create(startOp: number): SteppableValve;
}

export function drawAssembly(
  draw: Draw,
  service: TestedService,
  condition: 'sticky' | 'good' | 'worn-linkage',
): Assembly {
  const equalPercentage = draw.chance(0.25) ? draw.between(30, 50) : null;
  if (condition === 'sticky' && draw.chance(1 / 8)) {
    const band = draw.logBetween(0.4, 5);
    const lag = draw.between(1, 6);
    return {
      sort: 'positioner',
      S: band,
      J: band,
      lag,
      equalPercentage,
      create: (startOp) => createPositionerStem({ band, lag, startTravel: startOp }),
    };
  }
  const sticky = condition === 'sticky';
  const S = sticky ? draw.logBetween(0.4, 10) : draw.logBetween(0.05, 0.3);
  const J =
    S * (sticky ? 0.8 * 0.025 ** (draw.between(0, 1) ** 1.6) : draw.oneOf([0, draw.between(0.1, 0.3)]));
  const backlash = condition === 'worn-linkage' ? draw.logBetween(0.8, 6) : 0;
  const lag = service === 'flow' ? draw.logBetween(0.1, 1.5) : draw.logBetween(0.3, 3);
  const newtonPerPercent = (TEXTBOOK_VALVE.spring * TEXTBOOK_VALVE.stroke) / 100;
  const law = {
    static: ((S + J) / 2) * newtonPerPercent,
    coulomb: ((S - J) / 2) * newtonPerPercent,
    viscous: TEXTBOOK_VALVE.viscous * draw.logBetween(0.7, 8),
  };
  const stribeckSpeed = (draw.logBetween(0.003, 1) / 100) * TEXTBOOK_VALVE.stroke;
  const stepDown = draw.chance(1 / 7) && sticky;
  const friction = stepDown ? stepDownFriction(law) : stribeckFriction({ ...law, stribeckSpeed });
  return {
    sort: backlash > 0 ? 'worn-linkage' : stepDown ? 'step-down' : 'stribeck',
    S: S + backlash,
    J,
    lag,
    equalPercentage,
    create: (startOp) => createStem({ friction, actuatorLag: lag, backlash, startOp }),
  };
}
