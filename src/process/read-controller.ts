/**
 * Reads the controller out of what was logged: from SP, PV and OP alone, which action, gain, integral and derivative
 * time, limits and scan period reproduce OP's moves, and how well.
 *
 * The velocity form of the ideal controller is linear in its settings,
 *
 *   OP(k) - OP(k-m) = Kc [e(k) - e(k-m)] + Kc/Ti (integral of e from k-m to k) + Kc Td [change of -dPV/dt],
 *
 * so that they follow from least squares. m is one sample where OP's moves stand out of its rounding, else as many as
 * they need.
 */
import { WrongUse } from '../errors';
import { resolution } from '../signal/resolution';
import { mean } from '../signal/statistics';
import { bestCandidate, type Candidate, lostInDigits, predictedMoves } from './controller-candidates';
import { columns, opColumn, type Scans, shifts, sumOver } from './controller-sums';
import { findScan } from './scan';

export interface ControllerReading {
  readonly form: 'P' | 'PI' | 'PID' | 'I';
  /**
   * % of OP per PV unit, above 0 when OP rises with SP - PV (reverse action), below 0 for direct action. For form `I`:
   * % per second and PV unit, the integral time then stands at 1 s.
   */
  readonly gain: number;
  /** s; null without integral action. */
  readonly integralTime: number | null;
  /** s; null without derivative action. */
  readonly derivativeTime: number | null;
  /** Whether proportional action follows the error, or PV alone (set-point steps give no kick). */
  readonly proportionalOn: 'error' | 'pv';
  /** Values at which OP was held although the controller pulled further, %; null where it never was. */
  readonly limits: { readonly low: number | null; readonly high: number | null };
  /** Samples from one move of OP to the next; 1 also when the controller scans faster than the log. */
  readonly scanSamples: number;
  /** The same in s. */
  readonly scanPeriod: number;
  /** OP at sample k follows PV at sample k - pvShift and SP at sample k - spShift; -1, 0 or 1. */
  readonly pvShift: number;
  readonly spShift: number;
  /** Set point that was read, when none was logged and it was taken as constant; else null. */
  readonly constantSetPoint: number | null;
  /** Share of the mean square of OP's moves over `interval` that the controller reproduces, 0..1, and the rest. */
  readonly explains: number;
  readonly residualShare: number;
  /** Samples over which moves were compared. */
  readonly interval: number;
  /** OP as the controller gives it one scan ahead, from OP one scan before, %. As long as OP. */
  readonly reproduced: Float64Array;
}

/** Fewer scans than this tell nothing (own choice: ten for each of three settings). */
const fewestScans = 30;
/** Moves this many times the rounding step leave rounding less than 1 % of their mean square (1/6 / 5^2). */
const movesOverRounding = 5;
/** Half of OP's moves explained is where a longer interval is tried (own choice). */
const wellExplained = 0.5;
/** Mean square misfit, over that of the rounding step, that rounding alone leaves (1/6), with half as much again. */
const roundingAlone = 0.25;

/**
 * Identifies the controller behind OP.
 *
 * @param sp set point, PV units; null when not logged: it is then taken as constant and read too
 * @param pv process variable, engineering units
 * @param op controller output, %
 * @param samplePeriod s
 * @returns null when OP or PV does not move, when there are fewer than 30 scans, or when no candidate can be solved
 * @throws WrongUse when lengths differ or the sample period is not above 0
 *
 * Limits: a log slower than the controller hides what it did in between; gain and integral time then stay about
 * right while `explains` falls. A cycle that is a pure sine fits any phase, so a wrong column can be explained too.
 * A derivative filter slower than the scan makes the derivative time read low.
 */
export function readController(
  sp: Float64Array | null,
  pv: Float64Array,
  op: Float64Array,
  samplePeriod: number,
): ControllerReading | null {
  const n = op.length;
  if (pv.length !== n || (sp !== null && sp.length !== n)) {
    throw new WrongUse(
      `A controller is read from SP, PV and OP of one length. Received ${sp?.length ?? 'no'}, ${pv.length} and ${n} samples.`,
    );
  }
  if (!(samplePeriod > 0)) {
    throw new WrongUse(`The sample period must be above 0 s. Received ${samplePeriod}.`);
  }
  const scan = findScan(op);
  // The first scan that has a sample on either side of it.
  const start = scan.phase > 0 ? scan.phase : scan.every;
  const count = Math.floor((n - 2 - start) / scan.every) + 1;
  const step = resolution(op);
  if (count < fewestScans || step === 0 || resolution(pv) === 0) return null;

  // PV and SP are taken from their common level, so that the sums keep their digits.
  const level = mean(pv);
  const period = scan.every * samplePeriod;
  const at = (signal: Float64Array, shift: number): Float64Array =>
    Float64Array.from({ length: count }, (_, j) => signal[start + j * scan.every - shift]! - level);
  const output = Float64Array.from({ length: count }, (_, j) => op[start + j * scan.every]!);
  const scans: Scans = {
    pv: shifts.map((shift) => at(pv, shift)),
    sp: sp === null ? null : shifts.map((shift) => at(sp, shift)),
    op: output,
    held: heldAtExtreme(output),
    period,
  };
  const spIs = sp === null ? 'none' : sp.some((value) => value !== sp[0]) ? 'moves' : 'still';

  let best: { candidate: Candidate; interval: number; explains: number; meanSquare: number } | null = null;
  let interval = resolvedInterval(output, step);
  for (let tries = 0; tries < 5 && interval <= count / 10; tries++, interval *= 2) {
    const sums = sumOver(scans, interval);
    const total = sums.table[opColumn * columns + opColumn]!;
    const candidate = total > 0 ? bestCandidate(sums, spIs) : null;
    if (candidate !== null) {
      const explains = Math.max(0, 1 - candidate.squares / total);
      const meanSquare = candidate.squares / sums.rows;
      if (best === null || explains > best.explains) best = { candidate, interval, explains, meanSquare };
    }
    if (best !== null && best.explains >= wellExplained) break;
  }
  if (best === null) return null;

  const { candidate } = best;
  // Where the log shows every scan, the controller adds up the error of its own scan. Where it does not, the integral
  // between two samples is better had by the trapezium rule: half a step of integral action goes to the gain.
  const everyScan =
    scan.every > 1 || best.meanSquare <= roundingAlone * step * step || 1 - best.explains <= lostInDigits;
  const gain =
    everyScan && candidate.gain * candidate.integral >= 0
      ? candidate.gain
      : candidate.gain + (candidate.integral * period) / 2;
  const moves = predictedMoves(candidate, scans);
  const limits = limitsOf(scans, moves, step);
  const reproduced = Float64Array.from(op);
  for (let j = 1; j < count; j++) {
    const value = Math.min(
      limits.high ?? Infinity,
      Math.max(limits.low ?? -Infinity, output[j - 1]! + moves[j]!),
    );
    const from = start + j * scan.every;
    // Between two scans OP stands still, as the controller means it to.
    reproduced[from] = value;
    for (let i = from + 1; i < Math.min(n, from + scan.every); i++) reproduced[i] = op[i - 1]!;
  }
  return {
    form: candidate.form,
    gain: candidate.form === 'I' ? candidate.integral : gain,
    integralTime: candidate.form === 'I' ? 1 : candidate.integral !== 0 ? gain / candidate.integral : null,
    derivativeTime: candidate.derivative !== 0 ? candidate.derivative / gain : null,
    proportionalOn: candidate.proportionalOn,
    limits,
    scanSamples: scan.every,
    scanPeriod: period,
    pvShift: candidate.pvShift,
    spShift: candidate.spShift,
    constantSetPoint:
      sp !== null ? null : candidate.integral === 0 ? null : level + candidate.constant / candidate.integral,
    explains: best.explains,
    residualShare: 1 - best.explains,
    interval: best.interval * scan.every,
    reproduced,
  };
}

/** Scans over which OP's moves stand out of its rounding, or stand out most where none do: a power of two. */
function resolvedInterval(output: Float64Array, step: number): number {
  let largest = { interval: 1, meanSquare: 0 };
  for (let interval = 1; interval < output.length / 20; interval *= 2) {
    let squares = 0;
    for (let j = interval; j < output.length; j++) squares += (output[j]! - output[j - interval]!) ** 2;
    const meanSquare = squares / (output.length - interval);
    if (meanSquare > largest.meanSquare) largest = { interval, meanSquare };
    if (meanSquare >= (movesOverRounding * step) ** 2) break;
  }
  return largest.interval;
}

/** Marks scans at the lowest or highest value of the record, where OP stays there for three scans at least once. */
function heldAtExtreme(output: Float64Array): Uint8Array {
  const marks = new Uint8Array(output.length);
  for (const extreme of [Math.min, Math.max]) {
    const value = output.reduce((a, b) => extreme(a, b));
    const held = output.some((v, j) => v === value && output[j + 1] === value && output[j + 2] === value);
    if (held) for (let j = 0; j < output.length; j++) if (output[j] === value) marks[j] = 1;
  }
  return marks;
}

/** An extreme counts as a limit when OP was held there while, on most of those scans, it was pulled further out. */
function limitsOf(
  { op, held }: Scans,
  moves: Float64Array,
  step: number,
): { low: number | null; high: number | null } {
  const middle = mean(op);
  const found = { low: null as number | null, high: null as number | null };
  for (const side of ['low', 'high'] as const) {
    const outward = side === 'high' ? 1 : -1;
    let scans = 0;
    let pulled = 0;
    let value: number | null = null;
    for (let j = 1; j < op.length; j++) {
      if (!held[j] || !held[j - 1] || (op[j]! - middle) * outward < 0) continue;
      value = op[j]!;
      scans++;
      if (moves[j]! * outward > step / 2) pulled++;
    }
    if (scans > 0 && pulled > scans / 2) found[side] = value;
  }
  return found;
}
