/**
 * Friction laws of a stem: the force that holds it at rest and the force against it while it slides.
 * All forces are in N and speeds in m/s, unless the caller uses another consistent pair.
 */
import { refuseUnknownOptions, WrongUse } from '../errors';

export interface FrictionLaw {
  /** Largest drive force that friction balances at rest. */
  readonly breakaway: number;
  /** The part of the sliding force that grows in proportion to speed (force per speed); it is in `sliding` too. */
  readonly viscous: number;
  /** Force against the motion at `speed` > 0. */
  sliding(speed: number): number;
}

export interface RelayFrictionOptions {
  /** Force at rest and at every speed. Default 0: no friction. */
  readonly coulomb?: number;
  /** Force per speed on top of it. Default 0: the pure relay. */
  readonly viscous?: number;
}

/**
 * Coulomb friction (a relay), with viscous friction on top when that is given. No static excess, so no slip jump.
 *
 * @throws WrongUse for a negative or missing number, or an unknown option
 */
export function relayFriction(options: RelayFrictionOptions = {}): FrictionLaw {
  refuseUnknownOptions('relayFriction', options, ['coulomb', 'viscous']);
  const { coulomb = 0, viscous = 0 } = options;
  needNotNegative({ coulomb, viscous });
  return { breakaway: coulomb, viscous, sliding: (speed) => coulomb + viscous * speed };
}

export interface StepDownFrictionOptions {
  /** Force at rest; at least `coulomb`. Default: `coulomb`. */
  readonly static?: number;
  /** Force as soon as the stem slides. Default 0. */
  readonly coulomb?: number;
  /** Force per speed on top of it. Default 0. */
  readonly viscous?: number;
}

/**
 * Static friction that drops to Coulomb friction in a step as soon as the stem slides, with viscous friction on top.
 *
 * @throws WrongUse for a negative number, static below Coulomb friction, or an unknown option
 */
export function stepDownFriction(options: StepDownFrictionOptions = {}): FrictionLaw {
  refuseUnknownOptions('stepDownFriction', options, ['static', 'coulomb', 'viscous']);
  const { coulomb = 0, viscous = 0 } = options;
  const breakaway = options.static ?? coulomb;
  needNotNegative({ static: breakaway, coulomb, viscous });
  needStaticAbove(breakaway, coulomb);
  return { breakaway, viscous, sliding: (speed) => coulomb + viscous * speed };
}

export interface StribeckFrictionOptions extends StepDownFrictionOptions {
  /** Speed over which the static excess fades. Default 2.54e-4, in m/s, the textbook valve's (see `stem.ts`). */
  readonly stribeckSpeed?: number;
}

/**
 * The Stribeck curve: coulomb + (static - coulomb) exp(-(speed/stribeckSpeed)^2) + viscous speed
 * (form as in Armstrong-Helouvry, Dupont, Canudas de Wit 1994, Automatica 30:1083-1138; formula from memory).
 *
 * @throws WrongUse for a negative number, static below Coulomb friction, a Stribeck speed that is not above 0, or
 *   an unknown option
 */
export function stribeckFriction(options: StribeckFrictionOptions = {}): FrictionLaw {
  refuseUnknownOptions('stribeckFriction', options, ['static', 'coulomb', 'viscous', 'stribeckSpeed']);
  const { coulomb = 0, viscous = 0, stribeckSpeed = 2.54e-4 } = options;
  const breakaway = options.static ?? coulomb;
  needNotNegative({ static: breakaway, coulomb, viscous });
  needStaticAbove(breakaway, coulomb);
  if (!(stribeckSpeed > 0 && Number.isFinite(stribeckSpeed))) {
    throw new WrongUse(`The Stribeck speed must be above 0. Received ${stribeckSpeed}.`);
  }
  const excess = breakaway - coulomb;
  return {
    breakaway,
    viscous,
    sliding: (speed) => {
      const ratio = speed / stribeckSpeed;
      // Beyond six Stribeck speeds the rest of the excess is below 3e-16 of it.
      return coulomb + (ratio < 6 ? excess * Math.exp(-ratio * ratio) : 0) + viscous * speed;
    },
  };
}

/** One measured point of a friction curve. */
export interface FrictionPoint {
  readonly speed: number;
  readonly force: number;
}

/**
 * A law through measured points, straight between them. The first point must be at speed 0 and gives the force
 * at rest; beyond the last one the line through the last two goes on (held level where that would fall).
 *
 * @throws WrongUse for fewer than two points, a first speed other than 0, speeds that do not rise, negative forces
 */
export function measuredFriction(points: readonly FrictionPoint[]): FrictionLaw {
  if (points.length < 2) {
    throw new WrongUse(`A measured friction law needs at least two points. Received ${points.length}.`);
  }
  points.forEach(({ speed, force }, i) => {
    const rises = i === 0 ? speed === 0 : speed > points[i - 1].speed;
    if (!rises || !(force >= 0) || !Number.isFinite(speed) || !Number.isFinite(force)) {
      throw new WrongUse(
        'Points of a friction law start at speed 0, their speeds rise and no force is negative. ' +
          `Point ${i + 1} has speed ${speed} and force ${force}.`,
      );
    }
  });
  const speeds = points.map((point) => point.speed);
  const forces = points.map((point) => point.force);
  const last = points.length - 1;
  const slopeAt = (i: number): number => (forces[i + 1] - forces[i]) / (speeds[i + 1] - speeds[i]);
  const viscous = Math.max(0, slopeAt(last - 1));
  return {
    breakaway: forces[0],
    viscous,
    sliding: (speed) => {
      if (speed >= speeds[last]) return forces[last] + viscous * (speed - speeds[last]);
      let i = 0;
      while (speed >= speeds[i + 1]) i++;
      return forces[i] + slopeAt(i) * (speed - speeds[i]);
    },
  };
}

function needNotNegative(values: Record<string, number>): void {
  for (const [name, value] of Object.entries(values)) {
    if (!(value >= 0 && Number.isFinite(value))) {
      throw new WrongUse(`Friction "${name}" must be a number of 0 or more. Received ${value}.`);
    }
  }
}

function needStaticAbove(breakaway: number, coulomb: number): void {
  if (breakaway < coulomb) {
    throw new WrongUse(
      `Static friction cannot be below Coulomb friction. Received ${breakaway} below ${coulomb}.`,
    );
  }
}
