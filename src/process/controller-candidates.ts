/** The controllers that could have made OP's moves, and the choice between them. */
import {
  columns,
  constantColumn,
  opColumn,
  pvBend,
  pvIntegral,
  pvMove,
  type Scans,
  type Shift,
  type Sums,
  shifts,
  spIntegral,
  spMove,
} from './controller-sums';
import { type Solved, solveNormal } from './normal-equations';

export interface Candidate {
  readonly form: 'P' | 'PI' | 'PID' | 'I';
  readonly proportionalOn: 'error' | 'pv';
  readonly pvShift: Shift;
  readonly spShift: Shift;
  /** % per PV unit, where the error of each scan is added up over the scan. */
  readonly gain: number;
  /** Gain over integral time, % per PV unit and s; 0 without integral action. */
  readonly integral: number;
  /** Gain times derivative time, % s per PV unit; 0 without derivative action. */
  readonly derivative: number;
  /** Integral action on what was taken off SP and PV as level, % per s; 0 when SP was logged. */
  readonly constant: number;
  /** Sum of squares of OP's moves that is left. */
  readonly squares: number;
}

/** Improvement of the squared misfit, over its error, that a further setting must bring (own choice, about 4.5 sigma). */
const worthASetting = 20;
/**
 * Misfit, over that of the plainer reading, at which a shift or action on PV alone is believed (own choices). The right
 * shift explains far more than its neighbours; a log that is too slow lets the process pass for a controller one sample
 * off, a little better than the true one.
 */
const betterWhenShifted = 0.5;
const betterOnPv = 0.95;
/** Share of OP's mean square below which a misfit is lost among the digits of the sums. */
export const lostInDigits = 1e-9;

/** A regressor as a weighted sum of table columns. */
type Regressor = readonly { readonly column: number; readonly weight: number }[];

/**
 * The best candidate over forms and shifts.
 *
 * @param sp `none` when not logged (a constant set point is then fitted), `still` when it does not move
 * @returns null when none can be solved with settings that a controller can have
 */
export function bestCandidate(sums: Sums, sp: 'none' | 'still' | 'moves'): Candidate | null {
  let best: Candidate | null = null;
  for (const pvShift of shifts) {
    for (const spShift of sp === 'moves' ? shifts : ([0] as const)) {
      for (const proportionalOn of sp === 'moves' ? (['error', 'pv'] as const) : (['error'] as const)) {
        const candidate = bestForm(sums, sp === 'none', { pvShift, spShift, proportionalOn });
        if (candidate === null) continue;
        const shifted = pvShift !== 0 || spShift !== 0;
        const needed = shifted ? betterWhenShifted : betterOnPv;
        if (best === null || candidate.squares < needed * best.squares) best = candidate;
      }
    }
  }
  return best;
}

/** The simplest form to which no further setting adds. */
function bestForm(
  sums: Sums,
  withoutSp: boolean,
  kind: Pick<Candidate, 'pvShift' | 'spShift' | 'proportionalOn'>,
): Candidate | null {
  const { pvShift, spShift } = kind;
  const { period } = sums;
  const error = (ofSp: number, ofPv: number, weight: number): Regressor => [
    ...(withoutSp ? [] : [{ column: ofSp, weight }]),
    { column: ofPv, weight: -weight },
  ];
  const move =
    kind.proportionalOn === 'error'
      ? error(spMove(spShift), pvMove(pvShift), 1)
      : [{ column: pvMove(pvShift), weight: -1 }];
  const integral = error(spIntegral(spShift), pvIntegral(pvShift), 1);
  const bend = [{ column: pvBend(pvShift), weight: -1 }];
  const constant = withoutSp ? [[{ column: constantColumn, weight: 1 }]] : [];

  const candidate = (form: Candidate['form'], regressors: readonly Regressor[]): Candidate | null => {
    const solved = solveOn(sums, regressors);
    if (solved === null) return null;
    const next = [...solved.coefficients];
    const gain = form === 'I' ? 0 : next.shift()!;
    const rate = form === 'P' ? 0 : next.shift()!;
    const derivative = form === 'PID' ? next.shift()! : 0;
    // All three act in one direction in any controller. Half a scan of integral action belongs to the gain when the
    // log is slower than the controller.
    const proportional = gain + (rate * period) / 2;
    const sound =
      form === 'I' ||
      form === 'P' ||
      (proportional * rate > 0 && (form === 'PI' || proportional * derivative > 0));
    if (!sound) return null;
    const { squares } = solved;
    return { form, ...kind, gain, integral: rate, derivative, constant: next[0] ?? 0, squares };
  };
  // Neighbouring moves over an interval share all but one scan, so that rows count for less.
  const rows = sums.rows / sums.interval;
  const least = lostInDigits * sums.table[opColumn * columns + opColumn]!;
  const worth = (simple: Candidate, more: Candidate): boolean =>
    (simple.squares - more.squares) * rows > worthASetting * Math.max(least, more.squares);

  // Integral action alone: the error of each scan added up, or by the trapezium rule where the log is slower. The
  // latter is written as the former with half a scan's action less at the move.
  const trapezium = candidate('I', [
    [...integral, ...error(spMove(spShift), pvMove(pvShift), -period / 2)],
    ...constant,
  ]);
  const simple = [
    candidate('P', [move]),
    candidate('I', [integral, ...constant]),
    trapezium && { ...trapezium, gain: (-trapezium.integral * period) / 2 },
  ];
  let best = simple.reduce((a, b) => (a === null || (b !== null && b.squares < a.squares) ? b : a));
  const pi = candidate('PI', [move, integral, ...constant]);
  if (pi !== null && (best === null || worth(best, pi))) best = pi;
  const pid = candidate('PID', [move, integral, bend, ...constant]);
  // Derivative action must also take a tenth off the misfit (own choice): it is easily confused with a shift.
  if (pid !== null && (best === null || (worth(best, pid) && pid.squares < 0.9 * best.squares))) best = pid;
  return best;
}

function solveOn(sums: Sums, regressors: readonly Regressor[]): Solved | null {
  const product = (a: Regressor, b: Regressor): number => {
    let sum = 0;
    for (const left of a) {
      for (const right of b) {
        sum += left.weight * right.weight * sums.table[left.column * columns + right.column]!;
      }
    }
    return sum;
  };
  const op = [{ column: opColumn, weight: 1 }];
  return solveNormal(
    regressors.map((a) => Float64Array.from(regressors, (b) => product(a, b))),
    Float64Array.from(regressors, (a) => product(a, op)),
    product(op, op),
  );
}

/** Moves of OP from scan to scan as the candidate makes them, %; 0 at the first. */
export function predictedMoves(candidate: Candidate, scans: Scans): Float64Array {
  const pv = scans.pv[shifts.indexOf(candidate.pvShift)]!;
  const sp = scans.sp?.[shifts.indexOf(candidate.spShift)] ?? new Float64Array(pv.length);
  const moves = new Float64Array(pv.length);
  for (let j = 1; j < pv.length; j++) {
    const moveOfPv = pv[j]! - pv[j - 1]!;
    const moveOfSp = candidate.proportionalOn === 'error' ? sp[j]! - sp[j - 1]! : 0;
    const bend = j > 1 ? (moveOfPv - pv[j - 1]! + pv[j - 2]!) / scans.period : 0;
    moves[j] =
      candidate.gain * (moveOfSp - moveOfPv) +
      (candidate.integral * (sp[j]! - pv[j]!) + candidate.constant) * scans.period -
      candidate.derivative * bend;
  }
  return moves;
}
