/**
 * The two-parameter valve model: travel from controller output by dead band plus stick band S and slip jump J.
 *
 * With fs = (S + J)/2 and fd = (S - J)/2 (all in % of span) the stem stays where it is while
 * |OP - travel| <= fs, then jumps to OP -/+ fd. The variants differ in what comes after the jump:
 *
 * - `slides-on`: travel follows OP at the distance fd until OP turns back, then it sticks
 *   (Choudhury, Thornhill, Shah 2005, Control Eng. Practice 13:641-658; Kano et al. 2004, DYCOPS);
 * - `sticks-again`: the stem sticks after every jump (He, Wang, Pottmann, Qin 2007, Ind. Eng. Chem. Res. 46:4549-4560).
 *
 * Both break loose on the same condition, which is why one walk serves both. Quasi-static: mass, speed and
 * actuator lag are not in it; the stem of `stem.ts` has them.
 */
import { refuseUnknownOptions, WrongUse } from '../errors';

export type ValveModel = 'slides-on' | 'sticks-again';

export interface TwoParameterOptions {
  /** Dead band plus stick band, % of span, >= 0. */
  readonly S: number;
  /** Slip jump, %, 0 <= J <= S. */
  readonly J: number;
  /** Default `slides-on`. */
  readonly model?: ValveModel;
  /**
   * How far OP may turn back, as a share of S, before `slides-on` counts it as a reversal. The published element
   * has 0, and there also sticks when OP stands still; noise on OP resets it at every sample. Default 0.02.
   */
  readonly tolerance?: number;
  /** Travel before the first sample, %. Default: the first OP. */
  readonly start?: number;
}

/**
 * Travel as pieces: from sample `from[i]` on it is `offset[i] + slope[i] * OP`, slope 0 (stuck) or 1 (sliding).
 * Filled by {@link walkTwoParameter}; `count` pieces are valid.
 */
export interface TravelPieces {
  count: number;
  readonly from: Int32Array;
  readonly slope: Uint8Array;
  readonly offset: Float64Array;
}

/** Room for the pieces of a record of `samples` samples. */
export function createTravelPieces(samples: number): TravelPieces {
  const room = samples + 1;
  return {
    count: 0,
    from: new Int32Array(room),
    slope: new Uint8Array(room),
    offset: new Float64Array(room),
  };
}

/**
 * Walks the element over `op` and writes its pieces. `blend` mixes two landing points of `sticks-again`: 0 lands
 * at OP -/+ fd as published, 1 moves by exactly J. `tolerance` is absolute here, in %. Nothing is checked.
 */
export function walkTwoParameter(
  op: Float64Array,
  S: number,
  J: number,
  slidesOn: boolean,
  tolerance: number,
  blend: number,
  start: number,
  pieces: TravelPieces,
): void {
  const { from, slope, offset } = pieces;
  const breakAt = (S + J) / 2;
  const behind = (S - J) / 2;
  const stopsStick = tolerance === 0;
  const samples = op.length;
  let count = 1;
  let travel = start;
  let k = 0;
  from[0] = 0;
  slope[0] = 0;
  offset[0] = travel;
  while (k < samples) {
    const high = travel + breakAt;
    const low = travel - breakAt;
    while (k < samples && op[k] <= high && op[k] >= low) k++;
    if (k === samples) break;
    const direction = op[k] > high ? 1 : -1;
    from[count] = k;
    if (!slidesOn) {
      travel = (1 - blend) * (op[k] - direction * behind) + blend * (travel + direction * J);
      slope[count] = 0;
      offset[count++] = travel;
      k++;
      continue;
    }
    slope[count] = 1;
    offset[count++] = -direction * behind;
    let extreme = op[k];
    k++;
    for (; k < samples; k++) {
      const ahead = direction * (op[k] - extreme);
      if (ahead > 0 || (ahead === 0 && !stopsStick)) extreme = op[k];
      else if (-ahead > tolerance || stopsStick) break;
    }
    travel = extreme - direction * behind;
    if (k === samples) break;
    from[count] = k;
    slope[count] = 0;
    offset[count++] = travel;
    if (op[k] > travel + breakAt || op[k] < travel - breakAt) count--;
  }
  pieces.count = count;
}

/** Writes the travel that the pieces stand for into `travel`, % (same length as `op`). */
export function travelFromPieces(pieces: TravelPieces, op: Float64Array, travel: Float64Array): void {
  for (let i = 0; i < pieces.count; i++) {
    const end = i + 1 < pieces.count ? pieces.from[i + 1] : op.length;
    const offset = pieces.offset[i];
    if (pieces.slope[i] === 0) travel.fill(offset, pieces.from[i], end);
    else for (let k = pieces.from[i]; k < end; k++) travel[k] = op[k] + offset;
  }
}

/**
 * Travel of the two-parameter element, % of span, for controller output `op`, % of span (same length).
 *
 * @throws WrongUse for S or J outside 0 <= J <= S, a tolerance outside 0..1, or an unknown option.
 */
export function twoParameterValve(op: Float64Array, options: TwoParameterOptions): Float64Array {
  refuseUnknownOptions('twoParameterValve', options, ['S', 'J', 'model', 'tolerance', 'start']);
  const { S, J, model = 'slides-on', tolerance = 0.02, start = op[0] ?? 0 } = options;
  if (!(S >= 0 && J >= 0 && J <= S)) {
    throw new WrongUse(
      `The two-parameter valve needs 0 <= J <= S in % of span; it was given S = ${S} and J = ${J}.`,
    );
  }
  if (!(tolerance >= 0 && tolerance <= 1)) {
    throw new WrongUse(`The reversal tolerance is a share of S from 0 to 1; it was given ${tolerance}.`);
  }
  const pieces = createTravelPieces(op.length);
  walkTwoParameter(op, S, J, model === 'slides-on', tolerance * S, 0, start, pieces);
  const travel = new Float64Array(op.length);
  travelFromPieces(pieces, op, travel);
  return travel;
}
