/**
 * Reads strokes (ramps of the command up and down): dead band, resolution, hysteresis, and S and J of both variants of
 * the two-parameter valve. Travel is needed; where the actuator pressure was logged too, its lag behind the command is
 * taken out, so that the stroke reads as if it had been slow.
 */
import { reversalTolerance } from '../estimate/search';
import type { Estimate } from '../estimate/stiction-fit';
import type { Note } from '../record/loop-record';
import { threeDigits } from '../signal/three-digits';
import {
  createTravelPieces,
  travelFromPieces,
  type ValveModel,
  walkTwoParameter,
} from '../valve/two-parameter';
import { lagged, pressureLag } from './actuator-lag';
import { type CommandLeg, commandLegs } from './command';
import { meanOf } from './means';
import { type StemMotion, stemMotion } from './stem-motion';
import { average } from './straight-line';
import { type SpringLine, type StrokeLevels, springLine, strokeLevels } from './stroke-levels';
import type { TestRecord } from './test-record';

/** S and J of one variant of the two-parameter valve, fitted to the strokes. */
export interface FittedVariant {
  readonly model: ValveModel;
  readonly S: number;
  readonly J: number;
  /** Share of the travel's variance around the reversals that it explains, 0..1. */
  readonly explains: number;
}

export interface StrokeFindings {
  readonly deadBand: Estimate | null;
  readonly resolution: Estimate | null;
  readonly hysteresis: Estimate | null;
  readonly S: Estimate | null;
  readonly J: Estimate | null;
  /** The better one first. */
  readonly variants: readonly FittedVariant[];
  readonly legs: readonly CommandLeg[];
  /** Lag between command and actuator that was taken out, s; null when it is not known. */
  readonly lag: number | null;
  /** The command behind that lag, %. */
  readonly drive: Float64Array;
  readonly motion: StemMotion;
  readonly line: SpringLine | null;
  readonly levels: StrokeLevels | null;
  /** One reading a reversal: where the command stood at the last movement and at the next one, % of drive. */
  readonly reversals: readonly { readonly from: number; readonly to: number; readonly travel: number }[];
  /** Where the ways up and down are furthest apart: drive, and travel on either way, %. */
  readonly separation: { readonly drive: number; readonly up: number; readonly down: number } | null;
  readonly notes: readonly Note[];
}

const band = '% of span';
/** Bins along the stroke in which the ways up and down are compared. */
const bins = 15;
const fewestInBin = 4;
/** Legs up to this many times as fast as the slowest one are read for the dead band (own choice). */
export const slowPace = 1.5;
/** Slips after the first movement that the fit of S and J counts (own choice). */
const slipsCounted = 2.5;

/** @param statedLag of the actuator behind the command, s, where no pressure was logged; null when not known */
export function readStroke(record: TestRecord, statedLag: number | null): StrokeFindings {
  const { op, samplePeriod } = record;
  const travel = record.travel!;
  const notes: Note[] = [];
  const legs = commandLegs(op);
  const lag = record.pressure ? pressureLag(op, record.pressure, samplePeriod) : statedLag;
  const drive = lag === null ? op : lagged(op, lag, samplePeriod);
  let motion = stemMotion(op, drive, 1, travel, legs);
  let line = springLine(drive, travel, motion);
  if (line && line.slope > 0) {
    motion = stemMotion(op, drive, 1 / line.slope, travel, legs);
    line = springLine(drive, travel, motion);
  }
  const empty = {
    deadBand: null,
    resolution: null,
    hysteresis: null,
    S: null,
    J: null,
    variants: [],
    legs,
    lag,
    drive,
    motion,
    line: null,
    levels: null,
    reversals: [],
    separation: null,
  };
  if (line === null || !(line.slope > 0)) {
    notes.push({
      code: 'no-dead-band',
      text: 'Nothing is resolved: the stem has to move both ways, with the command, at least once.',
    });
    return { ...empty, notes };
  }
  const noise = line.slope * motion.noise;
  const levels = strokeLevels(drive, travel, motion, line, noise, settlingSamples(lag, samplePeriod));
  // The standards ask for a slow stroke: of several the slowest are read.
  const slowest = Math.min(...levels.legs.filter((one) => one.pace > 0).map((one) => one.pace));
  const pace = slowPace * slowest;
  if (lag === null) {
    notes.push({
      code: 'lag-not-known',
      text: `No actuator pressure was logged: each second that the actuator lags behind the command adds ${threeDigits((2 * slowest) / samplePeriod)} % to the dead band at this pace.`,
    });
  } else if (lag > 0.05 * samplePeriod) {
    notes.push({
      code: 'lag-taken-out',
      text: `The actuator lags ${threeDigits(lag)} s behind the command${record.pressure ? ', by its pressure' : ', as stated'}; this was taken out, as it would look like dead band.`,
    });
  }

  const readings: number[] = [];
  const reversals: { from: number; to: number; travel: number }[] = [];
  levels.legs.forEach((now, i) => {
    const before = levels.legs[i - 1];
    if (!before || before.lastMovement === null || now.firstBreak === null) return;
    if (before.leg.leg.direction === now.leg.leg.direction || Math.max(before.pace, now.pace) > pace) return;
    readings.push(before.lastMovement + now.firstBreak);
    const centre = line.offset + line.slope * now.leg.rest;
    const { direction } = now.leg.leg;
    reversals.push({
      from: centre - direction * before.lastMovement,
      to: centre + direction * now.firstBreak,
      travel: now.leg.rest,
    });
  });
  // Command and travel of one row may be up to half a sample apart, the same way in all strokes: twice that at a turn.
  const errors = { each: noise / 2, shared: (2 * slowest) / Math.sqrt(12) };
  const deadBand = readings.length > 0 ? meanOf(readings, errors, band) : null;
  if (!deadBand)
    notes.push({ code: 'no-dead-band', text: 'The dead band is not resolved: no reversal moved the stem.' });

  const jumps = levels.breaks.length;
  // Single slips are many; the saw-tooth that hidden ones leave is known to a tenth or so (own simulation).
  const jumpErrors =
    jumps > 0
      ? { each: noise, shared: Math.hypot(slowest / Math.sqrt(12), 0.02 * levels.jump!) }
      : { each: noise, shared: Math.hypot(slowest / Math.sqrt(12), 0.1 * (levels.jump ?? 0)) };
  const J = levels.jump === null ? null : meanOf([levels.jump], jumpErrors, band);
  const bound = Math.max(2 * pace, 4.5 * noise);
  const firstJumps = motion.legs.filter(({ jump }) => jump > 0).map(({ jump }) => jump * line.slope);
  const jumpsFirst = firstJumps.length > motion.legs.length / 2 ? meanOf(firstJumps, errors, band) : null;
  const resolution = J ?? { value: bound / 2, low: 0, high: bound, unit: band };
  if (!J) {
    notes.push({
      code: 'resolution-below-stroke',
      text: `The stem slides without stops that this stroke could show: the resolution is known only to be at most ${threeDigits(bound)} %. A step test with small steps tells more.`,
    });
  } else if (jumps === 0) {
    notes.push({
      code: 'slips-not-single',
      text: 'Slips follow each other too fast for this sampling to show them one by one; their size is from the scatter that they leave.',
    });
  }
  const { hysteresis, separation } = separationOf(drive, travel, motion, line, deadBand);
  if (!hysteresis) {
    notes.push({
      code: 'no-hysteresis',
      text: 'Hysteresis is not resolved: the ways up and down do not pass enough common positions.',
    });
  }

  // The two-parameter valve sees the drive, and the travel brought to its scale.
  const scaled = travel.map((x) => line.offset + line.slope * x);
  const startJump = J?.value ?? jumpsFirst?.value ?? 0;
  const variants = deadBand
    ? fitVariants(drive, scaled, motion, line, deadBand.value, Math.min(startJump, deadBand.value))
    : [];
  const [best, other] = variants;
  const S = best && deadBand ? around(best.S, deadBand) : null;
  const fromSlips = J ?? jumpsFirst;
  const fittedJump = best
    ? around(best.J, fromSlips ?? { value: bound / 2, low: 0, high: bound, unit: band })
    : null;
  const agrees = fittedJump && S && fittedJump.high - fittedJump.low < Math.max(S.value, 2 * bound);
  if (best && other) {
    const said = ({ model, S: s, J: j, explains }: FittedVariant): string =>
      `${model}: S ${threeDigits(s)} %, J ${threeDigits(j)} %, ${(100 * explains).toFixed(2)} % of the travel around the reversals explained`;
    notes.push({ code: 'both-variants', text: `Fitted to the strokes: ${said(best)}; ${said(other)}.` });
  }
  if (!agrees)
    notes.push({
      code: 'no-J',
      text: 'J is not resolved: the slips and the fitted valve do not agree on it.',
    });
  return {
    ...empty,
    deadBand,
    resolution,
    hysteresis,
    S,
    J: agrees ? fittedJump : null,
    variants,
    line,
    levels,
    reversals,
    separation,
    notes,
  };
}

/** Samples until a first-order lag has settled to within one per cent. */
export function settlingSamples(lag: number | null, samplePeriod: number): number {
  return lag === null ? 0 : Math.ceil((5 * lag) / samplePeriod);
}

/** The fitted value with an interval that takes in that of the direct reading. */
function around(value: number, direct: Estimate): Estimate {
  const half = (direct.high - direct.low) / 2;
  return {
    value,
    low: Math.max(0, Math.min(direct.low, value - half)),
    high: Math.max(direct.high, value + half),
    unit: direct.unit,
  };
}

function separationOf(
  drive: Float64Array,
  travel: Float64Array,
  motion: StemMotion,
  line: SpringLine,
  deadBand: Estimate | null,
): Pick<StrokeFindings, 'hysteresis' | 'separation'> {
  const none = { hysteresis: null, separation: null };
  if (!deadBand) return none;
  const ways = [1, -1].map((direction) =>
    motion.legs.filter(({ leg, moves }) => leg.direction === direction && moves !== null),
  );
  const samples = ways.map((legs) =>
    legs.flatMap(({ leg, moves }) => Array.from({ length: leg.to - moves! + 1 }, (_, i) => moves! + i)),
  );
  const range = samples.map((at) => {
    const values = at.map((k) => drive[k]!);
    return [Math.min(...values), Math.max(...values)] as const;
  });
  const low = Math.max(range[0]![0], range[1]![0]);
  const high = Math.min(range[0]![1], range[1]![1]);
  if (!(high > low)) return none;
  const found: { drive: number; up: number; down: number; error: number }[] = [];
  for (let bin = 0; bin < bins; bin++) {
    const from = low + ((high - low) * bin) / bins;
    const to = low + ((high - low) * (bin + 1)) / bins;
    const centre = (from + to) / 2;
    const [up, down] = samples.map((at) =>
      at
        .filter((k) => drive[k]! >= from && drive[k]! < to)
        .map((k) => travel[k]! - (drive[k]! - centre) / line.slope),
    );
    if (up!.length < fewestInBin || down!.length < fewestInBin) continue;
    const [a, b] = [spread(up!), spread(down!)];
    found.push({ drive: centre, up: a.mean, down: b.mean, error: Math.hypot(a.error, b.error) });
  }
  if (found.length === 0) return none;
  const widest = found.reduce((best, one) => (one.down - one.up > best.down - best.up ? one : best));
  const apart = widest.down - widest.up;
  const error = 1.645 * widest.error;
  const taken = (value: number): number => value / line.slope;
  return {
    hysteresis: {
      value: Math.max(0, apart - taken(deadBand.value)),
      low: Math.max(0, apart - error - taken(deadBand.high)),
      high: Math.max(0, apart + error - taken(deadBand.low)),
      unit: '% of travel',
    },
    separation: { drive: widest.drive, up: widest.up, down: widest.down },
  };
}

function spread(values: readonly number[]): { mean: number; error: number } {
  const n = values.length;
  const mean = average(values);
  const squares = values.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  return { mean, error: Math.sqrt(squares / (n - 1) / n) };
}

/**
 * Both variants, fitted to travel around the reversals, the better one first. Each leg starts anew from where the stem
 * rests and counts some slips (half an S where it slides): over a whole stroke the moments of slips drift apart, and the
 * fit would find any S and J but the right ones.
 */
function fitVariants(
  drive: Float64Array,
  travel: Float64Array,
  motion: StemMotion,
  line: SpringLine,
  S: number,
  J: number,
): FittedVariant[] {
  const windows = motion.legs.slice(1).flatMap(({ leg, moves, restFrom, rest }, i) => {
    if (moves === null || motion.legs[i]!.leg.direction === leg.direction) return [];
    const reach = J > 0 ? slipsCounted * J : 0.5 * S;
    let to = moves;
    while (to < leg.to && leg.direction * (drive[to]! - drive[moves]!) < reach) to++;
    return [
      {
        drive: drive.subarray(restFrom, to + 1),
        travel: travel.subarray(restFrom, to + 1),
        rest: line.offset + line.slope * rest,
      },
    ];
  });
  const samples = Math.max(...windows.map((one) => one.drive.length));
  const pieces = createTravelPieces(samples);
  const model = new Float64Array(samples);
  const whole = windows.reduce((sum, one) => sum + squaresAround(one.travel), 0);
  const left = (s: number, j: number, slidesOn: boolean): number => {
    let sum = 0;
    for (const one of windows) {
      walkTwoParameter(one.drive, s, j, slidesOn, reversalTolerance * s, 0, one.rest, pieces);
      travelFromPieces(pieces, one.drive, model);
      for (let k = 0; k < one.drive.length; k++) sum += (model[k]! - one.travel[k]!) ** 2;
    }
    return whole > 0 ? sum / whole : 1;
  };
  return (['slides-on', 'sticks-again'] as const)
    .map((variant): FittedVariant => {
      const slidesOn = variant === 'slides-on';
      let best = { S, J, left: left(S, J, slidesOn) };
      for (let step = 0.06 * S; step > 0.002 * S; ) {
        let next = best;
        for (const a of [-1, 0, 1]) {
          for (const b of [-1, 0, 1]) {
            const s = best.S + a * step;
            const j = best.J + b * step;
            if (!(s > 0 && j >= 0 && j <= s)) continue;
            const there = left(s, j, slidesOn);
            if (there < next.left - 1e-12) next = { S: s, J: j, left: there };
          }
        }
        if (next === best) step /= 2;
        else best = next;
      }
      return { model: variant, S: best.S, J: best.J, explains: Math.max(0, 1 - best.left) };
    })
    .sort((a, b) => b.explains - a.explains);
}

function squaresAround(values: Float64Array): number {
  const centre = average(values);
  return values.reduce((sum, value) => sum + (value - centre) ** 2, 0);
}
