/** Moves a stem with the friction curve that was measured along the command of the test it was measured in. */
import { refuseUnknownOptions, WrongUse } from '../errors';
import { measuredFriction } from '../valve/friction-law';
import { simulateStem } from '../valve/stem';
import { stemPoints } from './friction-curve';
import type { ValveTestFindings } from './read-valve-test';

export interface SimulateStrokeOptions {
  /** Moving mass, kg. Default 1.361, the textbook valve's; it matters only while the stem jumps. */
  readonly mass?: number;
}

export interface SimulatedStroke {
  /** %, one value a sample. */
  readonly travel: Float64Array;
  /** Root mean square distance from the measured travel, %. */
  readonly distance: number;
}

/**
 * Travel of a stem with the measured spring and friction curve for the logged command, brought to the scale of the
 * measured travel.
 *
 * @throws WrongUse for an unknown option, and where the test gave no friction curve
 */
export function simulateStroke(
  { record, stroke, friction }: ValveTestFindings,
  options: SimulateStrokeOptions = {},
): SimulatedStroke {
  refuseUnknownOptions('simulateStroke', options, ['mass']);
  const line = stroke?.line;
  if (!friction?.curve || !friction.springRate || !friction.stroke || !line || !stroke) {
    throw new WrongUse(
      'Only a test that gave a friction curve can be simulated with it: strokes at five steady speeds or more, with actuator pressure, area and stroke.',
    );
  }
  const measured = record.travel!;
  const scaled = simulateStem(record.op, record.samplePeriod, {
    ...options,
    spring: 1000 * friction.springRate.value,
    // The stem works in % of command; of its travel that is a little more or less.
    stroke: friction.stroke / line.slope,
    friction: measuredFriction(stemPoints(friction.curve)),
    actuatorLag: stroke.lag ?? 0,
    startTravel: line.offset + line.slope * measured[0]!,
  });
  const travel = scaled.map((value) => (value - line.offset) / line.slope);
  const squares = travel.reduce((sum, value, k) => sum + (value - measured[k]!) ** 2, 0);
  return { travel, distance: Math.sqrt(squares / travel.length) };
}
