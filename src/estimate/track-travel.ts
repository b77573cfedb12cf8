/**
 * Follows the travel of a real valve through a record with several live hypotheses at once.
 *
 * The two-parameter element slips exactly at |OP - travel| = (S + J)/2 and lands exactly at OP -/+ (S - J)/2. A real
 * stem does so only roughly, and one slip told a few samples late spoils every comparison with PV after it. Here a
 * hypothesis may slip a little early or late, land a little short or far, stay put or slide on; each liberty has
 * a price, each sample's prediction error of PV has one too, and the cheapest history wins (beam search). The price
 * is in units of negative log likelihood, so histories under different S, J and gain can be compared.
 *
 * Limits: one slip a sample; hypotheses that differ only in a past that no longer matters are merged.
 */
import { poleOf } from './objective';

export interface TrackSettings {
  readonly S: number;
  readonly J: number;
  /** Size of the process gain, PV units per % (per % and sample when integrating). */
  readonly gain: number;
  /** Process lags and dead time, samples. */
  readonly lag: number;
  readonly secondLag: number;
  readonly delay: number;
  /** Coefficients of the disturbance filter; the second is null for a self-regulating process. */
  readonly theta: number;
  readonly secondTheta: number | null;
  /** Variance of the one-step prediction error of PV. */
  readonly variance: number;
}

export interface Track {
  /** % */
  readonly travel: Float64Array;
  /** What the liberties taken cost together. */
  readonly penalty: number;
}

/** Hypotheses kept alive when not stated. */
const usualWidth = 16;
/** Standard deviation of the moment of a slip, as OP beyond the break-away point in shares of S. */
const breakSpread = 0.05;
/** Standard deviation of the landing point in shares of S. */
const landSpread = 0.05;
/** Price of any departure from the element, on top of its size, so that many small ones do not pass for a slip. */
const libertyPrice = 2;
/** Price of a change between sliding on and sticking again. */
const changePrice = 1.5;
/** Landing points tried, in standard deviations short of or beyond the exact one. */
const landings: readonly number[] = [0, -1.2, 1.2];
/** A hypothesis this much dearer than the best is dropped. */
const dropAt = 14;
const tolerance = 0.02;
/** Places at which the stem may rest at the beginning, from OP, in shares of what it takes to break loose. */
const openingShares: readonly number[] = [-1, -0.75, -0.5, -0.25, 0, 0.25, 0.5, 0.75, 1];

/** State of up to `room` hypotheses, one array an item. */
class Hypotheses {
  count = 0;
  readonly travel: Float64Array;
  readonly sliding: Uint8Array;
  /** Whether the last slip slid on. */
  readonly slides: Uint8Array;
  readonly direction: Int8Array;
  /** Sliding: the extreme of OP since the slip. Stuck: the furthest OP has been beyond the break-away point. */
  readonly extreme: Float64Array;
  readonly early: Float64Array;
  readonly lagged: Float64Array;
  readonly once: Float64Array;
  readonly twice: Float64Array;
  readonly lastMove: Float64Array;
  readonly cost: Float64Array;
  readonly penalty: Float64Array;
  /** Last entry in the history, and whether a new one (slope, offset) is due. */
  readonly history: Int32Array;
  readonly due: Uint8Array;
  readonly offset: Float64Array;

  constructor(readonly room: number) {
    this.travel = new Float64Array(room);
    this.sliding = new Uint8Array(room);
    this.slides = new Uint8Array(room);
    this.direction = new Int8Array(room);
    this.extreme = new Float64Array(room);
    this.early = new Float64Array(room);
    this.lagged = new Float64Array(room);
    this.once = new Float64Array(room);
    this.twice = new Float64Array(room);
    this.lastMove = new Float64Array(room);
    this.cost = new Float64Array(room);
    this.penalty = new Float64Array(room);
    this.history = new Int32Array(room);
    this.due = new Uint8Array(room);
    this.offset = new Float64Array(room);
  }

  copyFrom(other: Hypotheses, from: number, to: number): void {
    this.travel[to] = other.travel[from];
    this.sliding[to] = other.sliding[from];
    this.slides[to] = other.slides[from];
    this.direction[to] = other.direction[from];
    this.extreme[to] = other.extreme[from];
    this.early[to] = other.early[from];
    this.lagged[to] = other.lagged[from];
    this.once[to] = other.once[from];
    this.twice[to] = other.twice[from];
    this.lastMove[to] = other.lastMove[from];
    this.cost[to] = other.cost[from];
    this.penalty[to] = other.penalty[from];
    this.history[to] = other.history[from];
  }
}

/** The pieces of every hypothesis' past as one tree, leaves to root. */
class History {
  private readonly at: number[] = [];
  private readonly slope: number[] = [];
  private readonly offset: number[] = [];
  private readonly parent: number[] = [];

  add(sample: number, slope: number, offset: number, parent: number): number {
    this.at.push(sample);
    this.slope.push(slope);
    this.offset.push(offset);
    this.parent.push(parent);
    return this.at.length - 1;
  }

  travel(leaf: number, op: Float64Array): Float64Array {
    const travel = new Float64Array(op.length);
    let end = op.length;
    for (let entry = leaf; entry >= 0; entry = this.parent[entry]) {
      const start = this.at[entry];
      const offset = this.offset[entry];
      if (this.slope[entry] === 0) travel.fill(offset, start, end);
      else for (let k = start; k < end; k++) travel[k] = op[k] + offset;
      end = start;
    }
    return travel;
  }
}

/**
 * The cheapest travel behind `target`: PV after the disturbance filter, with the sign of the process gain taken out,
 * as the objective has it. `op` is OP after the actuator, %, same length. `width`: hypotheses kept alive, at least 5.
 */
export function trackTravel(
  target: Float64Array,
  op: Float64Array,
  settings: TrackSettings,
  width: number = usualWidth,
): Track {
  return new Tracker(target, op, settings, width).run();
}

class Tracker {
  private readonly live: Hypotheses;
  private readonly next: Hypotheses;
  /** Places in `next`, cheapest first. */
  private readonly order: Int32Array;
  private readonly history = new History();
  private readonly breakAt: number;
  private readonly behind: number;
  private readonly breakSd: number;
  private readonly landSd: number;
  private readonly pole: number;
  private readonly secondPole: number;
  private readonly wholeDelay: number;
  private readonly partDelay: number;
  private readonly halfPrecision: number;
  private readonly mergeError: number;
  private best = 0;
  private error = 0;
  private known = false;

  constructor(
    private readonly target: Float64Array,
    private readonly op: Float64Array,
    private readonly settings: TrackSettings,
    private readonly width: number,
  ) {
    this.live = new Hypotheses(Math.max(width, openingShares.length));
    this.next = new Hypotheses(width * 6);
    this.order = new Int32Array(width * 6);
    const { S, J, lag, secondLag, delay, variance, gain } = settings;
    this.breakAt = (S + J) / 2;
    this.behind = (S - J) / 2;
    this.breakSd = breakSpread * S;
    this.landSd = landSpread * S;
    this.pole = poleOf(lag);
    this.secondPole = poleOf(secondLag);
    this.wholeDelay = Math.floor(delay);
    this.partDelay = delay - this.wholeDelay;
    this.halfPrecision = 1 / (2 * variance);
    this.mergeError = (0.5 * Math.sqrt(variance)) / gain;
  }

  run(): Track {
    const { live, op, breakAt } = this;
    for (const share of openingShares) {
      const travel = op[0] + share * breakAt;
      live.travel[live.count] = travel;
      live.history[live.count] = this.history.add(0, 0, travel, -1);
      live.count++;
    }
    for (let k = 1; k < op.length; k++) {
      const at = k + this.wholeDelay;
      this.known = at < op.length;
      this.error = this.known ? this.target[at] : 0;
      this.best = Number.POSITIVE_INFINITY;
      if (this.calm(op[k])) this.stepCalm(op[k]);
      else this.stepBranching(k);
    }
    let cheapest = 0;
    for (let i = 1; i < live.count; i++) if (live.cost[i] < live.cost[cheapest]) cheapest = i;
    return {
      travel: this.history.travel(live.history[cheapest], op),
      penalty: live.penalty[cheapest],
    };
  }

  /** Whether no hypothesis can slip or turn at this OP. */
  private calm(u: number): boolean {
    const { live, breakAt, breakSd } = this;
    const safe = breakAt - 3 * breakSd;
    for (let i = 0; i < live.count; i++) {
      if (live.sliding[i] === 1) {
        if (live.direction[i] * (u - live.extreme[i]) < -tolerance * this.settings.S) return false;
      } else if (Math.abs(u - live.travel[i]) > safe) return false;
    }
    return true;
  }

  private stepCalm(u: number): void {
    const { live } = this;
    for (let i = 0; i < live.count; i++) {
      let move = 0;
      if (live.sliding[i] === 1) {
        const direction = live.direction[i];
        if (direction * (u - live.extreme[i]) > 0) live.extreme[i] = u;
        const travel = u - direction * this.behind;
        move = travel - live.travel[i];
        live.travel[i] = travel;
      } else if (Math.abs(u - live.travel[i]) < this.breakAt - 2 * this.breakSd) live.extreme[i] = 0;
      this.advance(live, i, i, live, move);
      if (live.cost[i] < this.best) this.best = live.cost[i];
    }
    this.drop();
  }

  /** Moves filters and cost of hypothesis `from` on by one sample with travel move `move`, into `to` of `into`. */
  private advance(source: Hypotheses, from: number, to: number, into: Hypotheses, move: number): void {
    const { settings, pole, secondPole, partDelay } = this;
    const input = (1 - partDelay) * move + partDelay * source.lastMove[from];
    const early = secondPole * source.early[from] + (1 - secondPole) * input;
    const lagged = pole * source.lagged[from] + (1 - pole) * early;
    const once = settings.theta * source.once[from] + lagged;
    let out = once;
    if (settings.secondTheta !== null) {
      out = settings.secondTheta * source.twice[from] + once;
      into.twice[to] = out;
    }
    into.early[to] = early;
    into.lagged[to] = lagged;
    into.once[to] = once;
    into.lastMove[to] = move;
    let cost = source.cost[from];
    if (this.known) {
      const off = this.error - settings.gain * out;
      cost += off * off * this.halfPrecision;
    }
    into.cost[to] = cost;
  }

  private drop(): void {
    const { live } = this;
    const limit = this.best + dropAt;
    let kept = 0;
    for (let i = 0; i < live.count; i++) {
      if (live.cost[i] > limit) continue;
      if (kept !== i) live.copyFrom(live, i, kept);
      kept++;
    }
    live.count = kept;
  }

  private branch(
    from: number,
    travel: number,
    sliding: 0 | 1,
    slides: number,
    direction: number,
    extreme: number,
    price: number,
    due: 0 | 1,
    offset: number,
  ): void {
    const { live, next } = this;
    const to = next.count;
    if (to === next.room) return;
    this.advance(live, from, to, next, travel - live.travel[from]);
    next.cost[to] += price;
    if (next.cost[to] > this.best + dropAt) return;
    if (next.cost[to] < this.best) this.best = next.cost[to];
    next.travel[to] = travel;
    next.sliding[to] = sliding;
    next.slides[to] = slides;
    next.direction[to] = direction;
    next.extreme[to] = extreme;
    next.penalty[to] = live.penalty[from] + price;
    next.history[to] = live.history[from];
    next.due[to] = due;
    next.offset[to] = offset;
    next.count++;
  }

  private stepBranching(k: number): void {
    const { live, next, breakAt, behind, breakSd, landSd } = this;
    const u = this.op[k];
    next.count = 0;
    const twoVariances = 2 * breakSd * breakSd;
    for (let i = 0; i < live.count; i++) {
      const travel = live.travel[i];
      const extreme = live.extreme[i];
      const slides = live.slides[i];
      if (live.sliding[i] === 1) {
        const direction = live.direction[i];
        const ahead = direction * (u - extreme);
        if (ahead >= -tolerance * this.settings.S) {
          this.branch(i, u - direction * behind, 1, 1, direction, ahead > 0 ? u : extreme, 0, 0, 0);
        } else {
          const rest = extreme - direction * behind;
          this.branch(i, rest, 0, 1, direction, 0, 0, 1, rest);
        }
        continue;
      }
      const pull = u - travel;
      const beyond = Math.abs(pull) - breakAt;
      const firstBeyond = beyond > 0 && extreme === 0;
      const late = beyond > extreme ? (beyond * beyond - extreme * extreme) / twoVariances : 0;
      if (beyond < 3 * breakSd) {
        const furthest = beyond > extreme ? beyond : beyond < -2 * breakSd ? 0 : extreme;
        this.branch(
          i,
          travel,
          0,
          slides,
          live.direction[i],
          furthest,
          firstBeyond ? late + libertyPrice : late,
          0,
          0,
        );
      }
      if (beyond > -3 * breakSd) {
        const direction = pull > 0 ? 1 : -1;
        const early = beyond > 0 ? 0 : libertyPrice + (beyond * beyond) / twoVariances;
        const exact = u - direction * behind;
        const onPrice = early + (slides === 1 ? 0 : changePrice);
        this.branch(i, exact, 1, 1, direction, u, onPrice, 1, -direction * behind);
        const restPrice = early + (slides === 0 ? 0 : changePrice);
        for (const sds of landings) {
          const rest = exact - direction * sds * landSd;
          if (direction * (rest - travel) <= 0) continue;
          const price = restPrice + (sds === 0 ? 0 : libertyPrice + (sds * sds) / 2);
          this.branch(i, rest, 0, 0, direction, 0, price, 1, rest);
        }
      }
    }
    this.keepBest(k);
  }

  /** Keeps the cheapest hypotheses of `next`, without those that a cheaper one stands for. */
  private keepBest(k: number): void {
    const { live, next, mergeError } = this;
    const { order } = this;
    let count = 0;
    // Sorted by cost as they come in: there are few, and equal ones keep their order.
    for (let i = 0; i < next.count; i++) {
      const cost = next.cost[i];
      if (cost > this.best + dropAt) continue;
      let at = count++;
      for (; at > 0 && next.cost[order[at - 1]] > cost; at--) order[at] = order[at - 1];
      order[at] = i;
    }
    const sameTravel = 0.02 * this.settings.S;
    live.count = 0;
    for (let o = 0; o < count; o++) {
      const i = order[o];
      let standsFor = false;
      for (let l = 0; l < live.count && !standsFor; l++) {
        standsFor =
          live.sliding[l] === next.sliding[i] &&
          live.direction[l] === next.direction[i] &&
          Math.abs(live.travel[l] - next.travel[i]) < sameTravel &&
          Math.abs(live.once[l] - next.once[i]) < mergeError &&
          Math.abs(live.lagged[l] - next.lagged[i]) < mergeError &&
          Math.abs(live.early[l] - next.early[i]) < mergeError;
      }
      if (standsFor) continue;
      const to = live.count;
      live.copyFrom(next, i, to);
      if (next.due[i] === 1) {
        live.history[to] = this.history.add(k, next.sliding[i], next.offset[i], next.history[i]);
      }
      live.count++;
      if (live.count === this.width) break;
    }
  }
}
