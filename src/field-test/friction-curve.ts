/**
 * Friction against the speed of the stem, from strokes at several steady speeds, and the plainest law that the points
 * support: a relay, a relay with a viscous slope, a step down from standing to moving friction, or the Stribeck curve.
 */
import type { Estimate } from '../estimate/stiction-fit';
import type { Note } from '../record/loop-record';
import { leastSquares } from '../signal/least-squares';
import { threeDigits } from '../signal/three-digits';
import type { FrictionPoint } from '../valve/friction-law';
import { slopeIn } from './straight-line';
import type { LegLevels } from './stroke-levels';
import type { TestRecord } from './test-record';

/** m/s and N; `low` and `high` are the ends of the 90 % interval of the force. */
export interface FrictionCurvePoint extends FrictionPoint {
  readonly low: number;
  readonly high: number;
}

export type FrictionLawName = 'relay' | 'relay with viscous slope' | 'step-down' | 'Stribeck';

export interface FittedLaw {
  readonly law: FrictionLawName;
  /** N at rest and just moving, N s/m, m/s; only those that the law has. */
  readonly static: number;
  readonly coulomb: number;
  readonly viscous: number;
  readonly stribeckSpeed: number | null;
  readonly parameters: number;
  /** Sum of squared misfits over their variances, and that plus parameters x ln(points). */
  readonly chiSquare: number;
  readonly criterion: number;
}

export interface FrictionCurve {
  /** The first is at rest. `measuredFriction` of the valve room takes them as they are; see also {@link stemPoints}. */
  readonly points: readonly FrictionCurvePoint[];
  /** The plainest law that does as well as any. */
  readonly chosen: FittedLaw;
  /** Every law tried, plainest first. */
  readonly laws: readonly FittedLaw[];
}

export interface FrictionCurveInput {
  readonly record: TestRecord;
  /** % */
  readonly travel: Float64Array;
  readonly levels: readonly LegLevels[];
  /** Friction at rest, unit of the pressure. */
  readonly standing: Estimate;
  /** N per unit of the pressure. */
  readonly force: number;
  /** m */
  readonly stroke: number;
  /** Of pressure and travel together, unit of the pressure. */
  readonly noise: number;
}

/** Steady speeds that a curve needs, samples of sliding that each needs in either direction (own choice). */
export const fewestSpeeds = 5;
const fewestSamples = 20;
/** Strokes whose speeds differ by less than this share are one speed. */
const sameSpeed = 0.15;
/** Error that a point keeps however many samples it has, share of its force: travel and pressure have their own. */
const least = 0.004;
/**
 * A law with more parameters is taken only where the criterion of Schwarz (1978, Ann. Statist. 6:461-464) is lower by
 * more than this: "strong" evidence on the scale of Kass and Raftery (1995, J. Am. Stat. Assoc. 90:773-795; from memory).
 */
const clearlyBetter = 6;
const level90 = 1.645;
/** Points of the law between rest and the slowest stroke. */
const pointsOfLaw = 12;

/** null, with a note, for fewer than five steady speeds with enough samples in both directions. */
export function frictionCurve(input: FrictionCurveInput, notes: Note[]): FrictionCurve | null {
  const { standing, force } = input;
  const speeds = steadySpeeds(input);
  if (speeds.length < fewestSpeeds) {
    notes.push({
      code: 'no-friction-curve',
      text: `How friction changes with speed is not resolved: ${speeds.length} steady speed${speeds.length === 1 ? '' : 's'} with at least ${fewestSamples} samples of sliding both ways, and ${fewestSpeeds} are needed.`,
    });
    return null;
  }
  const atRest = force * standing.value;
  const restError = Math.max((force * (standing.high - standing.low)) / 2 / level90, least * atRest);
  const measured = [{ speed: 0, force: atRest, error: restError }, ...speeds];
  const points = measured.map((point) => ({
    speed: point.speed,
    force: point.force,
    low: Math.max(0, point.force - level90 * point.error),
    high: point.force + level90 * point.error,
  }));
  const laws = fitLaws(measured);
  const best = Math.min(...laws.map(({ criterion }) => criterion));
  const chosen = laws.find(({ criterion }) => criterion <= best + clearlyBetter)!;
  notes.push({
    code: 'friction-law',
    text: `Over ${speeds.length} speeds the plainest law that does as well as any is: ${chosen.law}.`,
  });
  if (chosen.chiSquare > 3 * measured.length) {
    notes.push({
      code: 'friction-law-poor',
      text: `No law tried runs within the errors of the points (${threeDigits(chosen.chiSquare)} against ${measured.length} expected): use the points, not the law.`,
    });
  }
  return { points, chosen, laws };
}

/**
 * Points for `measuredFriction`: the measured ones and, between rest and the slowest stroke, where nothing was measured,
 * some of the law that was taken. Straight lines from rest to the slowest stroke would make the stem stick far too long.
 */
export function stemPoints({ points, chosen }: FrictionCurve): FrictionPoint[] {
  const [rest, slowest, ...faster] = points;
  const between = Array.from({ length: pointsOfLaw }, (_, i) => {
    const speed = slowest!.speed * 10 ** (-2 * (1 - i / pointsOfLaw));
    return { speed, force: forceAt(chosen, speed) };
  });
  return [rest!, ...between, slowest!, ...faster].map(({ speed, force }) => ({ speed, force }));
}

/** Friction, N, of a fitted law at a speed, m/s. */
export function forceAt({ static: rest, coulomb, viscous, stribeckSpeed }: FittedLaw, speed: number): number {
  if (speed === 0) return rest;
  const excess = stribeckSpeed === null ? 0 : (rest - coulomb) * Math.exp(-((speed / stribeckSpeed) ** 2));
  return coulomb + excess + viscous * speed;
}

interface SpeedPoint {
  readonly speed: number;
  readonly force: number;
  /** Standard error of the force. */
  readonly error: number;
}

function steadySpeeds({ record, travel, levels, force, stroke, noise }: FrictionCurveInput): SpeedPoint[] {
  const perSample = stroke / 100 / record.samplePeriod;
  const slid = levels
    .filter(({ sliding, slidingSamples }) => sliding !== null && slidingSamples >= fewestSamples)
    .map(({ leg, sliding, slidingSamples }) => {
      const longest = leg.stretches.reduce((a, b) => (b.to - b.from > a.to - a.from ? b : a));
      const n = longest.to - longest.from;
      const from = longest.from + Math.ceil(0.1 * n);
      const speed = Math.abs(slopeIn(travel, from, longest.to)) * perSample;
      return { speed, direction: leg.leg.direction, level: sliding!, samples: slidingSamples };
    })
    .sort((a, b) => a.speed - b.speed);
  const groups: (typeof slid)[] = [];
  for (const one of slid) {
    const last = groups[groups.length - 1];
    if (last && one.speed <= last[0]!.speed * (1 + sameSpeed)) last.push(one);
    else groups.push([one]);
  }
  return groups.flatMap((group): SpeedPoint[] => {
    const ways = [1, -1].map((direction) => group.filter((one) => one.direction === direction));
    if (ways.some((way) => way.length === 0)) return [];
    const means = ways.map((way) => way.reduce((sum, one) => sum + one.level, 0) / way.length);
    const samples = group.reduce((sum, one) => sum + one.samples, 0);
    const value = (force * (means[0]! + means[1]!)) / 2;
    const speed = group.reduce((sum, one) => sum + one.speed, 0) / group.length;
    return [{ speed, force: value, error: Math.max((force * noise) / Math.sqrt(samples), least * value) }];
  });
}

function fitLaws(points: readonly SpeedPoint[]): FittedLaw[] {
  const n = points.length;
  const weights = Float64Array.from(points, ({ error }) => 1 / error);
  const weighted = (of: (point: SpeedPoint) => number): Float64Array =>
    Float64Array.from(points, (point, i) => of(point) * weights[i]!);
  const y = weighted(({ force }) => force);
  const fit = (
    law: FrictionLawName,
    columns: readonly ((point: SpeedPoint) => number)[],
    extra: number,
    read: (c: Float64Array) => Pick<FittedLaw, 'static' | 'coulomb' | 'viscous' | 'stribeckSpeed'>,
  ): FittedLaw[] => {
    const { coefficients, residuals } = leastSquares(columns.map(weighted), y, { intercept: false });
    const numbers = read(coefficients);
    // Friction that falls below nothing, a negative slope or a step up is no law.
    if (numbers.viscous < 0 || numbers.coulomb < 0 || numbers.static < numbers.coulomb) return [];
    const chiSquare = residuals.reduce((sum, value) => sum + value * value, 0);
    const parameters = columns.length + extra;
    return [{ law, ...numbers, parameters, chiSquare, criterion: chiSquare + parameters * Math.log(n) }];
  };
  const one = (): number => 1;
  const speed = (point: SpeedPoint): number => point.speed;
  const rest = (point: SpeedPoint): number => (point.speed === 0 ? 1 : 0);
  const laws = [
    ...fit('relay', [one], 0, ([c]) => ({ static: c!, coulomb: c!, viscous: 0, stribeckSpeed: null })),
    ...fit('relay with viscous slope', [one, speed], 0, ([c, b]) => ({
      static: c!,
      coulomb: c!,
      viscous: b!,
      stribeckSpeed: null,
    })),
    ...fit('step-down', [one, rest], 0, ([c, s]) => ({
      static: c! + s!,
      coulomb: c!,
      viscous: 0,
      stribeckSpeed: null,
    })),
    ...fit('step-down', [one, rest, speed], 0, ([c, s, b]) => ({
      static: c! + s!,
      coulomb: c!,
      viscous: b!,
      stribeckSpeed: null,
    })),
  ];
  // The Stribeck speed on a fine grid, the rest by least squares; from half the slowest speed to the fastest.
  const moving = points.filter((point) => point.speed > 0).map((point) => point.speed);
  const low = Math.min(...moving) / 2;
  const high = Math.max(...moving);
  const tried = Array.from({ length: 60 }, (_, i) => low * (high / low) ** (i / 59));
  for (const slope_ of [false, true]) {
    const curves = tried.flatMap((vs) => {
      const fades = (point: SpeedPoint): number => Math.exp(-((point.speed / vs) ** 2));
      const columns = slope_ ? [one, fades, speed] : [one, fades];
      return fit('Stribeck', columns, 1, ([c, s, b]) => ({
        static: c! + s!,
        coulomb: c!,
        viscous: b ?? 0,
        stribeckSpeed: vs,
      }));
    });
    if (curves.length > 0) laws.push(curves.reduce((a, b) => (b.chiSquare < a.chiSquare ? b : a)));
  }
  return laws.sort((a, b) => a.parameters - b.parameters);
}
