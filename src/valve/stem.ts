/**
 * The stem of a spring-and-diaphragm valve as a moving mass: actuator lag, spring, friction law, and lost motion
 * in the linkage behind it.
 *
 *   mass x'' = spring (stroke drive/100 - x) - friction(x'),   drive: OP behind a first-order lag, %
 *
 * At rest friction balances the drive up to its breakaway force: the stem then stays where it is, to the last
 * digit, and costs one comparison a sample. While it slides, mass, spring, viscous friction and a drive that
 * changes along a straight line are solved exactly (matrix exponential of the linear part); the rest of the friction
 * law is a predictor-corrector term whose error sets the step. The moment of breaking loose and the moment of
 * zero speed are located; at zero speed the stem sticks when the drive is below the breakaway force. That leaves no
 * chattering around zero speed.
 */
import { refuseUnknownOptions, WrongUse } from '../errors';
import { type FrictionLaw, relayFriction, stribeckFriction } from './friction-law';
import { runValve, type SteppableValve } from './steppable-valve';

/**
 * The textbook valve (Kayihan, Doyle 2000, Control Eng. Practice 8:799-812, as reused in Garcia 2008, Control Eng.
 * Practice 16:1231-1243; values from memory): kg, N/m, m, N, N, N s/m, m/s.
 */
export const TEXTBOOK_VALVE = {
  mass: 1.361,
  spring: 52538,
  stroke: 0.1016,
  coulomb: 1423,
  static: 1708,
  viscous: 612.9,
  stribeckSpeed: 2.54e-4,
} as const;

export interface StemOptions {
  /** Moving mass, kg. Default 1.361, the textbook valve's, as are spring and stroke. */
  readonly mass?: number;
  /** Spring rate, N/m. Default 52 538. */
  readonly spring?: number;
  /** Travel from 0 to 100 %, m. Default 0.1016. */
  readonly stroke?: number;
  /** Friction in N over m/s. Default: viscous friction of the textbook valve alone, which neither sticks nor rings. */
  readonly friction?: FrictionLaw;
  /** Time constant of the air between controller output and drive, s. Default 0: the drive is OP. */
  readonly actuatorLag?: number;
  /** Lost motion in the linkage behind the stem, % of travel from one flank to the other. Default 0. */
  readonly backlash?: number;
  /** OP at which the stem begins at rest, %, its travel unless that is given. Default 50. */
  readonly startOp?: number;
  /** Travel at the beginning, %. Default: `startOp`. */
  readonly startTravel?: number;
}

const STEM_OPTIONS = [
  'mass',
  'spring',
  'stroke',
  'friction',
  'actuatorLag',
  'backlash',
  'startOp',
  'startTravel',
] as const;

/**
 * Largest and smallest step while sliding and the one that begins a slip, s, and the position error allowed in a
 * step, % of stroke. A slip begins with a short step because its error shows only once the stem has some speed.
 */
const LARGEST_STEP = 0.1;
const FIRST_STEP = 1e-4;
const SMALLEST_STEP = 1e-7;
const POSITION_ERROR = 1e-4;
/** A drive beyond the breakaway force by less than this, % of stroke, does not move the stem. */
const ROUNDING = 1e-9;

/** The linear part (mass, spring, viscous friction) carried over one step: e11 ... e22 is its matrix exponential. */
interface LinearStep {
  readonly h: number;
  readonly e11: number;
  readonly e12: number;
  readonly e21: number;
  readonly e22: number;
}

function linearStep(mass: number, spring: number, viscous: number, h: number): LinearStep {
  const decay = viscous / (2 * mass);
  const square = decay * decay - spring / mass;
  const root = Math.sqrt(Math.abs(square));
  const shrink = Math.exp(-decay * h);
  let even: number;
  let odd: number;
  if (root * h < 1e-4) {
    even = shrink * (1 + (square * h * h) / 2);
    odd = shrink * h * (1 + (square * h * h) / 6);
  } else if (square > 0) {
    // exp(-decay h) cosh(root h) and its partner, in a form that cannot overflow.
    const slow = Math.exp((root - decay) * h);
    const fast = Math.exp((-root - decay) * h);
    even = (slow + fast) / 2;
    odd = (slow - fast) / (2 * root);
  } else {
    even = shrink * Math.cos(root * h);
    odd = (shrink * Math.sin(root * h)) / root;
  }
  return { h, e11: even + decay * odd, e12: odd, e21: -(spring / mass) * odd, e22: even - decay * odd };
}

/**
 * A stem that is moved on sample by sample.
 *
 * @throws WrongUse for a mass, spring or stroke that is not above 0, a negative lag or backlash, or an unknown option
 */
export function createStem(options: StemOptions = {}): SteppableValve {
  refuseUnknownOptions('createStem', options, STEM_OPTIONS);
  const {
    mass = TEXTBOOK_VALVE.mass,
    spring = TEXTBOOK_VALVE.spring,
    stroke = TEXTBOOK_VALVE.stroke,
    friction = relayFriction({ viscous: TEXTBOOK_VALVE.viscous }),
    actuatorLag = 0,
    backlash = 0,
    startOp = 50,
    startTravel = startOp,
  } = options;
  need({ mass, spring, stroke }, (value) => value > 0, 'above 0');
  need({ actuatorLag, backlash }, (value) => value >= 0, '0 or more');
  need({ startOp, startTravel }, () => true, 'a finite number');

  const viscous = friction.viscous;
  const newtonPerPercent = (spring * stroke) / 100;
  const holds = friction.breakaway / newtonPerPercent + ROUNDING;
  const largest = actuatorLag > 0 ? Math.min(LARGEST_STEP, actuatorLag / 4) : LARGEST_STEP;
  const allowed = (POSITION_ERROR / 100) * stroke;

  // Halvings of the largest step, made once; steps that end a sample or a slip are made as they come.
  const halvings: LinearStep[] = [];
  for (let h = largest; h > SMALLEST_STEP; h /= 2) halvings.push(linearStep(mass, spring, viscous, h));
  const firstLevel = halvings.findIndex((step) => step.h <= FIRST_STEP);
  let level = firstLevel;

  let drive = startOp;
  let position = startTravel;
  let speed = 0;
  let plug = startTravel;

  /** Drive `t` seconds on, %. */
  const driveAfter = (op: number, t: number): number =>
    actuatorLag > 0 ? op + (drive - op) * Math.exp(-t / actuatorLag) : op;

  /** Friction beyond its viscous part, N, for a stem that moves in `direction`. */
  const resistance = (v: number, direction: number): number => {
    const along = Math.max(0, v * direction);
    return direction * (friction.sliding(along) - viscous * along);
  };

  // Where the last trial step ended: position m, speed m/s, and what the corrector changed in the position.
  let endX = 0;
  let endV = 0;
  let change = 0;

  /** From (x, v) over one step in which the force goes from g0 to g1 along a straight line. */
  const carry = (x: number, v: number, g0: number, g1: number, step: LinearStep): void => {
    const rate = (g1 - g0) / step.h;
    const restV = rate / spring;
    const restX = (g0 - viscous * restV) / spring;
    const dx = x - restX;
    const dv = v - restV;
    endX = restX + restV * step.h + step.e11 * dx + step.e12 * dv;
    endV = restV + step.e21 * dx + step.e22 * dv;
  };

  const tryStep = (
    x: number,
    v: number,
    direction: number,
    from: number,
    to: number,
    step: LinearStep,
  ): void => {
    const before = resistance(v, direction);
    carry(x, v, from - before, to - before, step);
    const predicted = endX;
    carry(x, v, from - before, to - resistance(endV, direction), step);
    change = Math.abs(endX - predicted);
  };

  /** Slides in `direction` until the stem stops or `span` seconds are over. Returns the seconds used. */
  const slide = (op: number, span: number, direction: number): number => {
    let x = (position / 100) * stroke;
    let v = speed;
    let used = 0;
    let force = driveAfter(op, 0) * newtonPerPercent;
    if (v === 0) level = firstLevel;
    for (;;) {
      const left = span - used;
      let step = halvings[level].h < left ? halvings[level] : linearStep(mass, spring, viscous, left);
      let nextForce = driveAfter(op, used + step.h) * newtonPerPercent;
      tryStep(x, v, direction, force, nextForce, step);
      while (change > allowed && level < halvings.length - 1) {
        do level++;
        while (halvings[level].h >= step.h && level < halvings.length - 1);
        step = halvings[level];
        nextForce = driveAfter(op, used + step.h) * newtonPerPercent;
        tryStep(x, v, direction, force, nextForce, step);
      }
      const fromRest = v === 0;
      if (endV * direction <= 0) {
        let time = step.h;
        if (fromRest) {
          endX = x; // the drive exceeds friction by less than rounding: still at rest
        } else {
          // The stem stops inside this step: false position between the speeds at its ends finds when.
          let early = 0;
          let late = step.h;
          let earlyV = v;
          let lateV = endV;
          for (let i = 0; i < 4 && lateV !== 0; i++) {
            const next = early + ((late - early) * earlyV) / (earlyV - lateV);
            if (!(next > early && next < late)) break;
            time = next;
            const part = linearStep(mass, spring, viscous, time);
            tryStep(x, v, direction, force, force + ((nextForce - force) * time) / step.h, part);
            if (endV * direction > 0) {
              early = time;
              earlyV = endV;
            } else {
              late = time;
              lateV = endV;
            }
          }
        }
        used += time;
        x = endX;
        v = 0;
      } else {
        used += step.h;
        x = endX;
        v = endV;
      }
      if (v === 0 || used >= span) break;
      force = nextForce;
      if (change < allowed / 8 && level > 0) level--;
    }
    drive = driveAfter(op, used);
    position = (x / stroke) * 100;
    speed = v;
    return used;
  };

  /** Seconds until the resting stem breaks loose; Infinity when it does not. */
  const timeToBreak = (op: number): number => {
    if (Math.abs(driveAfter(op, 0) - position) > holds) return 0;
    const beyond = Math.abs(op - position) - holds;
    if (beyond <= 0) return Number.POSITIVE_INFINITY;
    const toGo = Math.sign(op - position) * (op - drive);
    return Math.max(0, actuatorLag * Math.log(toGo / beyond));
  };

  return {
    get travel(): number {
      return plug;
    },
    advance(op: number, dt: number): number {
      if (!(Number.isFinite(op) && dt > 0 && Number.isFinite(dt))) {
        throw new WrongUse(`A stem takes a finite OP and a time above 0 s. Received ${op} and ${dt}.`);
      }
      let left = dt;
      while (left > 1e-12 * dt) {
        if (speed === 0) {
          const wait = timeToBreak(op);
          if (wait >= left) {
            drive = driveAfter(op, left);
            break;
          }
          drive = driveAfter(op, wait);
          left -= wait;
          const pulled = Math.abs(drive - position) > holds ? drive : op;
          left -= slide(op, left, Math.sign(pulled - position));
        } else {
          left -= slide(op, left, Math.sign(speed));
        }
        // Motion within one slide goes one way, so the linkage can be moved at its end.
        plug = Math.min(Math.max(plug, position - backlash / 2), position + backlash / 2);
      }
      return plug;
    },
  };
}

/**
 * Travel at the end of each sample, % of span, of a stem that starts at rest with `op[0]` on it.
 *
 * @param op controller output, % of span, each value held for one sample
 * @param samplePeriod s, above 0
 * @throws WrongUse as {@link createStem}, or for a sample period that is not above 0
 */
export function simulateStem(
  op: Float64Array,
  samplePeriod: number,
  options: StemOptions = {},
): Float64Array {
  return runValve(createStem({ startOp: op[0], ...options }), op, samplePeriod);
}

export interface TextbookStemOptions extends Omit<StemOptions, 'mass' | 'spring' | 'stroke' | 'friction'> {
  /** Dead band plus stick band, % of span. */
  readonly S: number;
  /** Slip jump, %, not above S. */
  readonly J: number;
}

/**
 * The textbook valve with its friction scaled so that a slow stroke shows S and J: static friction (S + J)/2 and
 * Coulomb friction (S - J)/2, both in % of the spring's span force; viscous friction and Stribeck speed stay.
 * Above a drive speed of about the Stribeck speed (0.25 %/s) it glides, so that J shows less.
 *
 * @throws WrongUse unless 0 <= J <= S, and as {@link createStem}
 */
export function textbookStem(options: TextbookStemOptions): SteppableValve {
  const { S, J, ...rest } = options;
  return createStem({ ...rest, friction: textbookFriction(S, J) });
}

/** The friction law of {@link textbookStem}: Stribeck curve with viscous friction, N over m/s. */
export function textbookFriction(S: number, J: number): FrictionLaw {
  if (!(J >= 0 && S >= J)) {
    throw new WrongUse(`S and J of a valve must satisfy 0 <= J <= S. Received S = ${S} and J = ${J}.`);
  }
  const newtonPerPercent = (TEXTBOOK_VALVE.spring * TEXTBOOK_VALVE.stroke) / 100;
  return stribeckFriction({
    static: ((S + J) / 2) * newtonPerPercent,
    coulomb: ((S - J) / 2) * newtonPerPercent,
    viscous: TEXTBOOK_VALVE.viscous,
    stribeckSpeed: TEXTBOOK_VALVE.stribeckSpeed,
  });
}

function need(values: Record<string, number>, holds: (value: number) => boolean, what: string): void {
  for (const [name, value] of Object.entries(values)) {
    if (!(Number.isFinite(value) && holds(value))) {
      throw new WrongUse(`The stem's ${name} must be ${what}. Received ${value}.`);
    }
  }
}
