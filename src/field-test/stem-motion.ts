/**
 * How the stem moved during strokes: per leg of the command where it rested after the turn, when it broke loose, and
 * whether it went on in slips or slid. Works on travel alone, so that the same movements can be read against the
 * command and against the pressure in the actuator.
 */
import { quantile } from '../signal/statistics';
import type { CommandLeg } from './command';

/** A stretch of one leg, samples `from` to `to` (not included), in which the stem rests or slides all the time. */
export interface StemStretch {
  readonly from: number;
  readonly to: number;
  readonly slides: boolean;
  /** Mean travel, %. */
  readonly level: number;
  /** Whether a slip stands before it, and one (or the first movement of the leg) after it. */
  readonly afterSlip: boolean;
  readonly beforeSlip: boolean;
}

export interface LegMotion {
  readonly leg: CommandLeg;
  /** Travel at which the stem rests after the turn, %, and the first sample of that rest. */
  readonly rest: number;
  readonly restFrom: number;
  /** First sample that shows the stem moving with the leg; null when it never does. */
  readonly moves: number | null;
  /** Size of the jump with which it breaks loose, %, signed with the leg; 0 where it starts to slide without one. */
  readonly jump: number;
  /** Sample, fractional, at which it broke loose: midway into the sample of a jump, or where the slide starts. */
  readonly breaks: number | null;
  /** Sample, fractional, at which the line along which it then goes meets the rest; null where it rests after the jump. */
  readonly bend: number | null;
  /** After the first movement. */
  readonly stretches: readonly StemStretch[];
  /** Sizes of the slips, %, all above 0; the first movement is not among them. */
  readonly slips: readonly number[];
}

export interface StemMotion {
  /** Standard deviation of the noise on travel, %, rounding included. */
  readonly noise: number;
  readonly legs: readonly LegMotion[];
}

/** A travel counts as moved when it is off by this many times its noise, in two samples in a row. */
const clearOfNoise = 4.5;
/** Samples of a command that stands still from which the noise is taken. */
const fewestStill = 15;
/** Median size of the second difference of white noise of deviation 1. */
const normalMiddle = 0.6744897501960817 * Math.sqrt(6);
/**
 * Samples of a stretch whose noise is taken by itself; which of the stretches counts as quiet; and what white noise is
 * over the noise of that one (own simulation).
 */
const quietWindow = 12;
const quiet = { share: 0.1, factor: 1.55 };
/** A slip is a sample's move beyond what sliding gives by this many times the noise of a difference. */
const slipOverNoise = 5;

/**
 * Noise of a signal, its unit, from its second differences: where the command stands still when that is long enough,
 * else in the quietest stretches (a stem that rests shows noise alone); or what rounding leaves where that is more.
 */
export function restNoise(op: Float64Array, values: Float64Array): number {
  const rounded = stepOf(values) / Math.sqrt(12);
  const bend = (k: number): number => values[k - 1]! - 2 * values[k]! + values[k + 1]!;
  const still: number[] = [];
  for (let k = 3; k + 1 < values.length; k++) {
    if (op[k - 3] === op[k + 1] && op[k - 2] === op[k] && op[k - 1] === op[k]) still.push(Math.abs(bend(k)));
  }
  if (still.length >= fewestStill) {
    // The median tells which of them are moves; the others count with their squares, which are surer than a median.
    const largest = (clearOfNoise * Math.sqrt(6) * quantile(Float64Array.from(still), 0.5)) / normalMiddle;
    const quietOnes = still.filter((size) => size <= largest);
    const squares = quietOnes.reduce((total, size) => total + size * size, 0);
    return Math.max(rounded, Math.sqrt(squares / quietOnes.length / 6));
  }
  const local: number[] = [];
  for (let from = 0; from + quietWindow <= values.length; from += quietWindow) {
    let squares = 0;
    for (let k = from + 1; k < from + quietWindow - 1; k++) squares += bend(k) ** 2;
    local.push(Math.sqrt(squares / (quietWindow - 2) / 6));
  }
  if (local.length === 0) return rounded;
  return Math.max(rounded, quiet.factor * quantile(Float64Array.from(local), quiet.share));
}

/** Smallest difference between neighbouring samples that differ: the step of a rounded signal. */
function stepOf(values: Float64Array): number {
  const sizes: number[] = [];
  for (let k = 1; k < values.length; k++) {
    const size = Math.abs(values[k]! - values[k - 1]!);
    if (size > 1e-9) sizes.push(size);
  }
  if (sizes.length < 10) return 0;
  sizes.sort((a, b) => a - b);
  const least = sizes[0]!;
  // Rounded where nearly every difference is a multiple of the least one.
  const whole = sizes.filter((size) => Math.abs(size / least - Math.round(size / least)) < 0.02).length;
  return whole > 0.95 * sizes.length ? least : 0;
}

/**
 * @param op command, %; only where it stands still matters here
 * @param drive what moves the stem, any unit (command behind the actuator's lag, or pressure), one value a sample
 * @param gain travel, %, per unit of `drive`, above 0
 * @param travel %
 */
export function stemMotion(
  op: Float64Array,
  drive: Float64Array,
  gain: number,
  travel: Float64Array,
  legs: readonly CommandLeg[],
): StemMotion {
  const noise = restNoise(op, travel);
  return {
    noise,
    legs: legs.map((leg) => legMotion(drive, gain, travel, leg, noise)),
  };
}

function legMotion(
  drive: Float64Array,
  gain: number,
  travel: Float64Array,
  leg: CommandLeg,
  noise: number,
): LegMotion {
  const { from, to, direction } = leg;
  const y = (k: number): number => direction * travel[k]!;
  const ahead = (a: number, b: number): number => direction * gain * (drive[b]! - drive[a]!);
  const clear = Math.max(clearOfNoise * noise, 1e-6);

  // Rest after the turn: the stem may still follow the old direction for a while.
  let restFrom = from;
  let sum = 0;
  let count = 0;
  let first = -1;
  for (let k = from; k <= to; k++) {
    const level = count > 0 ? sum / count : y(k);
    if (y(k) < level - clear) {
      restFrom = k;
      sum = y(k);
      count = 1;
      continue;
    }
    if (y(k) > level + clear && (k === to || y(k + 1) > level + clear)) {
      first = k;
      break;
    }
    sum += y(k);
    count++;
  }
  if (first < 0) {
    return {
      leg,
      rest: direction * (sum / Math.max(1, count)),
      restFrom,
      moves: null,
      jump: 0,
      breaks: null,
      bend: null,
      stretches: [],
      slips: [],
    };
  }

  // The step a sample that sliding gives, and what more than it is a slip.
  const pace = ahead(first, to) / Math.max(1, to - first);
  const slipSize = Math.max(slipOverNoise * Math.SQRT2 * noise, pace, 1e-6);
  const events: number[] = [];
  for (let k = first + 1; k <= to; k++) {
    if (y(k) - y(k - 1) - Math.max(0, ahead(k - 1, k)) > slipSize) events.push(k);
  }

  const isEvent = new Set(events);

  const next = events.find((k) => k > first + 1) ?? to + 1;
  const length = Math.max(4, Math.ceil((6 * clear) / Math.max(pace, 1e-9)));
  const broken = breakLoose({
    y,
    ahead,
    pace,
    restFrom,
    level: sum / Math.max(1, count),
    first,
    after: span(first, Math.min(next, to + 1, first + length)),
  });
  const { rest, breaks, bend } = broken;
  let { jump } = broken;

  const starts = [first, ...events.filter((k, i) => k !== (i > 0 ? events[i - 1]! : first) + 1)];
  const ends = starts.map((k) => {
    let end = k;
    while (isEvent.has(end + 1)) end++;
    return end;
  });
  const stretches: StemStretch[] = starts.map((_, i) => {
    const a = ends[i]!;
    const b = i + 1 < starts.length ? starts[i + 1]! : to + 1;
    // A slip may take some samples to run out: where the stem comes to rest shows in the later half.
    const level = mean(span(Math.floor((a + b) / 2), b), (k) => travel[k]!);
    return {
      from: a,
      to: b,
      slides: slides(a, b),
      level,
      afterSlip: i > 0 || jump > 0,
      beforeSlip: i + 1 < starts.length,
    };
  });
  // The jump out of the rest after the turn, by where it ends.
  if (jump > 0 && stretches[0]!.slides === false) jump = Math.max(0, direction * stretches[0]!.level - rest);
  const slips = stretches.slice(1).map((next, i) => {
    const before = stretches[i]!;
    const endOf = before.slides
      ? mean(span(Math.max(before.from, before.to - 3), before.to), y)
      : direction * before.level;
    const startOf = next.slides
      ? mean(span(next.from, Math.min(next.to, next.from + 3)), y)
      : direction * next.level;
    return Math.max(0, startOf - endOf);
  });
  return { leg, rest: direction * rest, restFrom, moves: first, jump, breaks, bend, stretches, slips };

  function slides(a: number, b: number): boolean {
    const n = b - a;
    const moved = ahead(a, b - 1);
    if (n < 4 || moved <= 0) return false;
    const half = Math.floor(n / 2);
    const gained = mean(span(b - half, b), y) - mean(span(a, a + half), y);
    const wouldBe = mean(span(b - half, b), (k) => ahead(a, k)) - mean(span(a, a + half), (k) => ahead(a, k));
    // Where noise hides the difference, a stretch between two slips rests.
    if (wouldBe < 3 * noise * Math.sqrt(4 / n) && events.length > 1) return false;
    return gained > 0.5 * wouldBe;
  }
}

interface BreakingLoose {
  /** Travel along the leg, its rise as sliding gives it between two samples, and that in one sample. */
  readonly y: (k: number) => number;
  readonly ahead: (a: number, b: number) => number;
  readonly pace: number;
  readonly restFrom: number;
  /** Mean level of the rest, as far as nothing was seen to move. */
  readonly level: number;
  /** First sample that shows movement, and the samples from there to the next slip. */
  readonly first: number;
  readonly after: readonly number[];
}

/** How a stem breaks loose: the rest goes over in a jump to another rest or to a slide, or in a bend where a slide begins. */
function breakLoose({ y, ahead, pace, restFrom, level, first, after }: BreakingLoose): {
  rest: number;
  jump: number;
  breaks: number;
  bend: number | null;
} {
  const asRest = spreadOf(after.map(y));
  const asSlide = spreadOf(after.map((k) => y(k) - ahead(first, k)));
  if (asRest.deviation < asSlide.deviation) {
    return { rest: level, jump: asRest.mean - level, breaks: first - 0.5, bend: null };
  }
  const size = asSlide.mean - level;
  const meets = first - size / Math.max(pace, 1e-12);
  const early = span(Math.max(restFrom, Math.floor(meets)), first);
  const misfit = (of: (k: number) => number): number =>
    early.reduce((total, k) => total + (y(k) - of(k)) ** 2, 0);
  const asJump = misfit(() => level);
  const asBend = misfit((k) => level + Math.max(0, (k - meets) * pace));
  if (asJump < asBend && size > 1.5 * pace) {
    return { rest: level, jump: Math.max(0, size - pace / 2), breaks: first - 0.5, bend: meets };
  }
  // The slide began before it showed: those samples are no part of the rest.
  const rest = mean(span(restFrom, Math.max(restFrom + 1, Math.min(first, Math.floor(meets)))), y);
  const breaks = first - (asSlide.mean - rest) / Math.max(pace, 1e-12);
  return { rest, jump: 0, breaks, bend: breaks };
}

function span(from: number, to: number): number[] {
  return Array.from({ length: Math.max(0, to - from) }, (_, i) => from + i);
}

function mean(at: readonly number[], value: (k: number) => number): number {
  let sum = 0;
  for (const k of at) sum += value(k);
  return at.length > 0 ? sum / at.length : 0;
}

function spreadOf(values: readonly number[]): { mean: number; deviation: number; count: number } {
  const centre = values.reduce((sum, value) => sum + value, 0) / values.length;
  const squares = values.reduce((sum, value) => sum + (value - centre) ** 2, 0);
  return { mean: centre, deviation: Math.sqrt(squares / values.length), count: values.length };
}
