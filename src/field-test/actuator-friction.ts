/**
 * Friction from a diagnostic stroke: actuator pressure against travel gives the spring (the line midway between the ways
 * up and down), the bench set (where that line begins and ends) and the friction (how far the pressure has to be off
 * it), standing and moving.
 *
 * Process forces on the plug shift the line and are in the bench set; friction is the same on both sides of it only where
 * packing, guides and seals work the same both ways.
 */
import type { Estimate } from '../estimate/stiction-fit';
import type { Note } from '../record/loop-record';
import { conversion } from '../record/units';
import { threeDigits } from '../signal/three-digits';
import { type FrictionCurve, frictionCurve } from './friction-curve';
import { meanOf, type ReadingErrors } from './means';
import { type StrokeFindings, settlingSamples, slowPace } from './read-stroke';
import { restNoise } from './stem-motion';
import { average } from './straight-line';
import { type LegLevels, type SpringLine, springLine, strokeLevels } from './stroke-levels';
import type { TestRecord } from './test-record';

/** A pressure and the force that it is on the diaphragm or piston, N; null without the area. */
export interface FrictionAmount {
  readonly pressure: Estimate;
  readonly force: Estimate | null;
}

export interface ActuatorFriction {
  /** Pressure that the spring takes over the whole travel. */
  readonly springRange: Estimate;
  /** N/mm; null without area and stroke. */
  readonly springRate: Estimate | null;
  /** Pressure on the spring's line at 0 and 100 % of travel. */
  readonly benchSet: { readonly closed: Estimate; readonly open: Estimate };
  /** What the pressure has to change by on reversal, from the last movement to the next one: standing plus moving friction. */
  readonly frictionBand: FrictionAmount;
  /** Against the stem while it moves, and what it takes to break loose after a reversal. */
  readonly moving: FrictionAmount;
  readonly standing: FrictionAmount;
  /** null where strokes at fewer than five steady speeds leave it not resolved; a note says so. */
  readonly curve: FrictionCurve | null;
  /** The spring's line: pressure = offset + slope x travel. */
  readonly line: SpringLine;
  /** Rated travel as stated, m; null when not. */
  readonly stroke: number | null;
  /** 1 where more pressure gives more travel, -1 where it gives less. */
  readonly sense: 1 | -1;
  readonly notes: readonly Note[];
}

export interface ActuatorSize {
  /** m2; null when not stated. */
  readonly area: number | null;
  /** m; null when not stated. */
  readonly stroke: number | null;
}

/** Half the size of slips that leave no more scatter than noise explains, over the noise (from the limit on that scatter). */
const unseenSlip = 1.6;

/** null, with a note in `notes`, where the strokes do not show it. */
export function actuatorFriction(
  record: TestRecord,
  stroke: StrokeFindings,
  { area, stroke: length }: ActuatorSize,
  notes: Note[],
): ActuatorFriction | null {
  const travel = record.travel!;
  const logged = record.pressure!;
  const unit = record.pressureUnit || 'bar';
  const { motion, line: commandLine } = stroke;
  const plain = springLine(logged, travel, motion);
  if (plain === null || plain.slope === 0 || stroke.levels === null || commandLine === null) {
    notes.push({
      code: 'no-friction',
      text: 'Spring and friction are not resolved: the stem has to move both ways at least once.',
    });
    return null;
  }
  const sense = plain.slope > 0 ? 1 : -1;
  const pressure = sense > 0 ? logged : logged.map((value) => -value);
  const line = sense > 0 ? plain : springLine(pressure, travel, motion)!;
  const ownNoise = restNoise(record.op, pressure);
  const noise = Math.hypot(ownNoise, line.slope * motion.noise);
  const levels = strokeLevels(
    pressure,
    travel,
    motion,
    line,
    noise,
    settlingSamples(stroke.lag, record.samplePeriod),
    {
      noise: ownNoise,
      hiddenJumps: stroke.levels.legs.map(
        ({ hiddenJump }) => hiddenJump && (hiddenJump * line.slope) / commandLine.slope,
      ),
    },
  );
  const moved = levels.legs.filter(({ leg }) => leg.moves !== null);
  const hidden = levels.breaks.length === 0 && levels.jump !== null ? levels.jump : 0;

  // Legs weigh as much up as down, so that an offset of the line falls out.
  const restLevel = levels.afterSlips.length > 0 ? average(levels.afterSlips) : null;
  const movingOf = (leg: LegLevels): number | null =>
    (leg.sliding ?? restLevel ?? leg.lastMovement) as number | null;
  const turned = levels.legs.filter(
    ({ leg }, i) =>
      leg.moves !== null && i > 0 && levels.legs[i - 1]!.leg.leg.direction !== leg.leg.direction,
  );
  // The moment of breaking loose is known to a sample: slow strokes tell it best, and the slowest ones alone are taken.
  const slowest = Math.min(...turned.map((leg) => leg.pace));
  const slow = turned.filter((leg) => leg.pace <= slowPace * slowest);
  const errors: ReadingErrors = { each: noise / 2, shared: slowest / Math.sqrt(12) };
  // Where it comes to rest after a slip is known to the part of a sample that the slip took.
  const slips = restLevel !== null || hidden > 0;
  const mean = balanced(
    slow,
    movingOf,
    { each: noise / Math.sqrt(20), shared: Math.hypot(slips ? slowest / 2 : 0, 0.15 * hidden) },
    unit,
  );
  // Slips that noise hides altogether make the mean while it seems to slide lie up to half their size too high.
  const moving = mean && !slips ? { ...mean, low: Math.max(0, mean.low - unseenSlip * noise) } : mean;
  const bands = levels.legs.flatMap((now, i) => {
    const before = levels.legs[i - 1];
    if (!slow.includes(now) || !before || before.pace > slowPace * slowest) return [];
    return before &&
      before.leg.leg.direction !== now.leg.leg.direction &&
      before.lastMovement !== null &&
      now.firstBreak !== null
      ? [before.lastMovement + now.firstBreak]
      : [];
  });
  const standing = balanced(slow, (leg) => leg.firstBreak, errors, unit);
  if (moving === null || standing === null || bands.length === 0) {
    notes.push({ code: 'no-friction', text: 'Friction is not resolved: too few reversals moved the stem.' });
    return null;
  }
  const slopes = moved.flatMap(({ leg }) => slopeOf(pressure, travel, leg.moves!, leg.leg.to));
  const slope = meanOf(slopes.length > 0 ? slopes : [line.slope], { each: line.slopeError }, unit);
  const half = Math.min((slope.high - slope.low) / 2, 0.2 * line.slope);
  const perPercent: Estimate = { value: line.slope, low: line.slope - half, high: line.slope + half, unit };
  const toPascal = conversion(unit, 'Pa').factor;
  const scaled = (one: Estimate, factor: number, to: string): Estimate => ({
    value: one.value * factor,
    low: one.low * factor,
    high: one.high * factor,
    unit: to,
  });
  const amount = (one: Estimate): FrictionAmount => ({
    pressure: one,
    force: area === null ? null : scaled(one, toPascal * area, 'N'),
  });
  const springRate =
    area === null || length === null
      ? null
      : scaled(perPercent, ((100 * toPascal * area) / length) * 1e-3, 'N/mm');
  const at = (percent: number): Estimate => {
    const value = sense * (line.offset + line.slope * percent);
    const error = half * Math.abs(percent - average(travel)) + (1.645 * noise) / Math.sqrt(moved.length);
    return { value, low: value - error, high: value + error, unit };
  };
  const own: Note[] = [];
  if (area === null || length === null) {
    own.push({
      code: 'no-forces',
      text: 'Forces and the spring rate need the effective area of the actuator and the rated travel: state both (options "area" and "stroke").',
    });
  }
  if (hidden > 0) {
    own.push({
      code: 'slips-in-pressure',
      text: 'Slips follow each other too fast to be seen one by one; standing and moving friction are from the scatter they leave.',
    });
  }
  const curve =
    area === null || length === null
      ? null
      : frictionCurve(
          { record, travel, levels: moved, standing, force: toPascal * area, stroke: length, noise },
          own,
        );
  const force = (one: FrictionAmount): string =>
    `${threeDigits(one.pressure.value)} ${unit}${one.force ? ` (${threeDigits(one.force.value)} N)` : ''}`;
  const found: ActuatorFriction = {
    springRange: scaled(perPercent, 100, unit),
    springRate,
    benchSet: { closed: at(0), open: at(100) },
    frictionBand: amount(meanOf(bands, errors, unit)),
    moving: amount(moving),
    standing: amount(standing),
    curve,
    line: { offset: plain.offset, slope: plain.slope, slopeError: plain.slopeError },
    stroke: length,
    sense,
    notes: own,
  };
  notes.push({
    code: 'friction',
    text: `From pressure and travel: spring range ${threeDigits(found.springRange.value)} ${unit}${springRate ? `, spring rate ${threeDigits(springRate.value)} N/mm` : ''}, bench set ${threeDigits(found.benchSet.closed.value)} to ${threeDigits(found.benchSet.open.value)} ${unit}, friction band ${force(found.frictionBand)}, friction standing ${force(found.standing)} and moving ${force(found.moving)}.`,
  });
  notes.push(...own);
  return found;
}

/** Mean of what legs up and legs down give, each way with the same weight. */
function balanced(
  legs: readonly LegLevels[],
  of: (leg: LegLevels) => number | null,
  errors: ReadingErrors,
  unit: string,
): Estimate | null {
  const ways = [1, -1].map((direction) =>
    legs.filter(({ leg }) => leg.leg.direction === direction).flatMap((leg) => of(leg) ?? []),
  );
  if (ways.some((values) => values.length === 0)) return null;
  const means = ways.map(average);
  const centre = (means[0]! + means[1]!) / 2;
  const readings = ways.flatMap((values, i) => values.map((value) => value - means[i]! + centre));
  return meanOf(readings, errors, unit);
}

/** Slope of the drive on travel within a leg; nothing where the stem hardly moves. */
function slopeOf(drive: Float64Array, travel: Float64Array, from: number, to: number): number[] {
  const n = to - from + 1;
  if (n < 10) return [];
  const x = average(travel.subarray(from, to + 1));
  const w = average(drive.subarray(from, to + 1));
  let along = 0;
  let across = 0;
  for (let k = from; k <= to; k++) {
    along += (travel[k]! - x) ** 2;
    across += (travel[k]! - x) * (drive[k]! - w);
  }
  return along > 0 ? [across / along] : [];
}
