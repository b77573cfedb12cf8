/**
 * Strokes read against what drives the stem (command or actuator pressure): the spring's line midway between the ways
 * up and down, and how far the drive has to be off that line for the stem to break loose and to keep moving.
 */
import { leastSquares } from '../signal/least-squares';
import type { LegMotion, StemMotion } from './stem-motion';
import { average } from './straight-line';

/** drive = offset + slope x travel on the spring's line; drive in its own unit, travel in %. */
export interface SpringLine {
  readonly offset: number;
  readonly slope: number;
  readonly slopeError: number;
}

export interface LegLevels {
  readonly leg: LegMotion;
  /** Off the spring's line, unit of the drive, signed with the leg: at the first movement after the turn; */
  readonly firstBreak: number | null;
  /** at the last movement of the leg; null when it did not move. */
  readonly lastMovement: number | null;
  /** while it slides without sticking, mean; null when it does not. */
  readonly sliding: number | null;
  /** Number of samples behind `sliding`. */
  readonly slidingSamples: number;
  /** Change of the drive in one sample. */
  readonly pace: number;
  /** Jump of slips that are not told apart, by the saw-tooth that they leave; null without. */
  readonly hiddenJump: number | null;
}

export interface StrokeLevels {
  readonly legs: readonly LegLevels[];
  /** At which the stem breaks loose out of a rest between two slips in one direction, one a slip. */
  readonly breaks: readonly number[];
  /** At which it comes to rest after a slip, one a slip. */
  readonly afterSlips: readonly number[];
  /** Slip jump, unit of the drive: of slips that are told apart, or as their sum shows; null where it slides. */
  readonly jump: number | null;
}

/** Samples on either side of a moment from which a noisy drive is taken. */
const linedReach = 4;
/** Fewest samples of sliding from which a level is taken. */
const fewest = 5;
/** Scatter while it seems to slide, over that of noise, from which slips too fast to tell apart are behind it. */
const hiddenSlips = 1.8;
const fewestForScatter = 20;
/** Fewest slips whose rests give a level; share of a leg that has to slide so that it slides as a whole. */
const fewestSlips = 3;
const slidesMostly = 0.6;

/**
 * The spring's line from all samples after the first movement of each leg, with one constant more for the direction.
 * null when the stem did not move both ways.
 */
export function springLine(drive: Float64Array, travel: Float64Array, motion: StemMotion): SpringLine | null {
  const x: number[] = [];
  const w: number[] = [];
  const way: number[] = [];
  for (const { leg, moves } of motion.legs) {
    if (moves === null) continue;
    for (let k = moves; k <= leg.to; k++) {
      x.push(travel[k]!);
      w.push(drive[k]!);
      way.push(leg.direction);
    }
  }
  const centre = average(x);
  const both = way.includes(1) && way.includes(-1);
  if (!both || x.length < 10) return null;
  const centred = Float64Array.from(x, (value) => value - centre);
  if (centred.every((value) => value === 0)) return null;
  const { coefficients, standardErrors } = leastSquares(
    [centred, Float64Array.from(way)],
    Float64Array.from(w),
  );
  const slope = coefficients[1]!;
  return { offset: coefficients[0]! - slope * centre, slope, slopeError: standardErrors[1]! };
}

/**
 * @param noise standard deviation of the noise of drive and travel together, unit of the drive
 * @param settles samples after a movement begins until the actuator's lag is over
 * @param logged for a drive that was measured: its own noise, and the hidden jumps, one a leg, as the command, which
 *   has no noise, shows them
 */
export function strokeLevels(
  drive: Float64Array,
  travel: Float64Array,
  motion: StemMotion,
  { offset, slope }: SpringLine,
  noise: number,
  settles: number,
  logged?: { readonly noise: number; readonly hiddenJumps: readonly (number | null)[] },
): StrokeLevels {
  const breaks: number[] = [];
  const afterSlips: number[] = [];
  const moving = motion.legs.filter(({ moves }) => moves !== null);
  const off = (direction: number, w: number, x: number): number => direction * (w - offset - slope * x);
  const paceOf = ({ leg, moves }: LegMotion): number =>
    (leg.direction * (drive[leg.to]! - drive[moves!]!)) / Math.max(1, leg.to - moves!);
  const slid = new Map<LegMotion, number[]>();
  for (const motionOfLeg of moving) {
    const { direction } = motionOfLeg.leg;
    const pace = paceOf(motionOfLeg);
    const wholeSlides = motionOfLeg.stretches
      .filter(({ slides }) => slides)
      .reduce((sum, { from, to }) => sum + to - from, 0);
    const mostly = wholeSlides > slidesMostly * (motionOfLeg.leg.to - motionOfLeg.moves!);
    for (const stretch of motionOfLeg.stretches) {
      if (stretch.slides && !mostly) continue;
      if (stretch.slides) {
        // The first samples still carry the slip, and the actuator getting up to speed.
        const skipped = Math.max(settles, Math.ceil(0.1 * (stretch.to - stretch.from)));
        const from = Math.min(stretch.to, stretch.from + skipped);
        const values = Array.from({ length: stretch.to - from }, (_, i) =>
          off(direction, drive[from + i]!, travel[from + i]!),
        );
        if (values.length >= fewest) slid.set(motionOfLeg, [...(slid.get(motionOfLeg) ?? []), ...values]);
        continue;
      }
      // A slip came, on average, half a sample before it was seen.
      if (stretch.afterSlip) afterSlips.push(off(direction, drive[stretch.from]!, stretch.level) - pace / 2);
      if (stretch.beforeSlip) breaks.push(off(direction, drive[stretch.to - 1]!, stretch.level) + pace / 2);
    }
  }
  const restLevel = afterSlips.length >= fewestSlips ? average(afterSlips) : null;

  // Slips that follow each other too fast, or are too small, to be told apart leave a saw-tooth around the mean level.
  const hiddenIn = new Map<LegMotion, number>();
  for (const [leg, values] of slid) {
    if (logged) {
      const known = logged.hiddenJumps[motion.legs.indexOf(leg)];
      if (known) hiddenIn.set(leg, known);
      continue;
    }
    const scatter = values.length >= fewestForScatter ? varianceAroundLine(values) : 0;
    if (scatter > hiddenSlips * noise * noise) hiddenIn.set(leg, Math.sqrt(12 * (scatter - noise * noise)));
  }
  const told = breaks.length > 0 && restLevel !== null ? average(breaks) - restLevel : null;
  const hiddenMostly = hiddenIn.size > slid.size / 2 ? average([...hiddenIn.values()]) : null;

  const driveAt = (leg: LegMotion, at: number): number => {
    // A noisy drive is taken from the line through some samples around.
    const reach = (logged?.noise ?? 0) > 0.2 * paceOf(leg) ? linedReach : 0;
    return reach === 0
      ? between(drive, at)
      : onLine(
          drive,
          at,
          Math.max(leg.leg.from, Math.round(at) - reach),
          Math.min(leg.leg.to, Math.round(at) + reach),
        );
  };
  const legs = motion.legs.map((leg): LegLevels => {
    if (leg.moves === null) {
      return {
        leg,
        firstBreak: null,
        lastMovement: null,
        sliding: null,
        slidingSamples: 0,
        pace: 0,
        hiddenJump: null,
      };
    }
    const values = slid.get(leg) ?? [];
    const hidden = hiddenIn.get(leg) ?? null;
    const end = values.slice(-Math.max(20, Math.ceil(values.length / 4)));
    const last = leg.stretches[leg.stretches.length - 1]!;
    const restsAtEnd = !last.slides && restLevel !== null;
    const slidingAtEnd = values.length > 0 ? average(end) - (hidden ?? 0) / 2 : restLevel;
    const restsFirst = !leg.stretches[0]!.slides && leg.jump > 0 && restLevel !== null;
    return {
      leg,
      // Where it rests after the jump, the jump tells more than the moment of it, which is known to a sample only.
      firstBreak: restsFirst
        ? slope * leg.jump + restLevel
        : hidden !== null && leg.bend !== null
          ? off(leg.leg.direction, driveAt(leg, leg.bend), leg.rest) + hidden / 2
          : off(leg.leg.direction, driveAt(leg, leg.breaks!), leg.rest),
      lastMovement: restsAtEnd ? restLevel : slidingAtEnd,
      sliding: values.length > 0 && hidden === null ? average(values) : null,
      slidingSamples: values.length,
      pace: paceOf(leg),
      hiddenJump: hidden,
    };
  });
  return { legs, breaks, afterSlips, jump: told ?? hiddenMostly };
}

function between(values: Float64Array, at: number): number {
  const place = Math.min(values.length - 1, Math.max(0, at));
  const k = Math.min(values.length - 2, Math.floor(place));
  return values[k]! + (place - k) * (values[k + 1]! - values[k]!);
}

/** Value at `at` of the line through samples `from` to `to`. */
function onLine(values: Float64Array, at: number, from: number, to: number): number {
  const n = to - from + 1;
  if (n < 3) return between(values, at);
  const middle = (from + to) / 2;
  let sum = 0;
  let across = 0;
  let along = 0;
  for (let k = from; k <= to; k++) {
    sum += values[k]!;
    across += (k - middle) * values[k]!;
    along += (k - middle) ** 2;
  }
  return sum / n + (across / along) * (at - middle);
}

function varianceAroundLine(values: readonly number[]): number {
  const n = values.length;
  if (n < fewest) return 0;
  const middle = (n - 1) / 2;
  const centre = average(values);
  let across = 0;
  let along = 0;
  let squares = 0;
  values.forEach((value, i) => {
    across += (i - middle) * (value - centre);
    along += (i - middle) ** 2;
    squares += (value - centre) ** 2;
  });
  return (squares - (across * across) / along) / (n - 2);
}
