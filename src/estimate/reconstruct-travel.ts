/**
 * Stage 1 of the estimate: the travel behind OP and PV.
 *
 * A grid search over the two-parameter element gives starts. A pair that explains PV well may still be far from
 * the valve: where the stem moves mostly at reversals, a large gain with a small jump fits nearly as well as the
 * truth. So the starts are spread over J/S, from each the travel is followed with live hypotheses (`track-travel.ts`),
 * process and element are fitted again to what was followed, and the whole history with the lowest price wins.
 */
import { noiseLevel } from '../signal/statistics';
import { twoParameterValve } from '../valve/two-parameter';
import { describeTravel } from './describe-travel';
import { gainMargin } from './loop-stability';
import { createObjective, secondTheta } from './objective';
import { openingOf, restingTravel } from './opening';
import {
  bestTheta,
  createTarget,
  fitGain,
  fitProcess,
  lagged,
  type ProcessFit,
  type ProcessSettings,
  residualOf,
  swingOf,
  type Target,
} from './process-fit';
import { delayBands, firstTheta, type GridPoint, processGrid, searchGrid } from './search';
import { trackTravel } from './track-travel';

/** One history of the travel with the element and process that go with it. */
export interface Reconstruction extends ProcessFit {
  readonly S: number;
  readonly J: number;
  readonly actuatorLag: number;
  readonly theta: number;
  /** Negative log likelihood of PV plus the price of the liberties taken; comparable within one record. */
  readonly price: number;
  /** The price of the liberties alone. */
  readonly penalty: number;
  /** Power of the one-step prediction errors; comparable between disturbance filters and responses. */
  readonly innovations: number;
  /** % */
  readonly travel: Float64Array;
}

/** S below this many times the noise of OP is not looked for: it could not be told from the noise. */
const noiseFloor = 2;
const actuatorLags: readonly number[] = [0, 0.7, 1.4];
/** Bands of J/S from each of which one start is taken. */
const jumpBands: readonly number[] = [0, 0.08, 0.2, 0.35, 0.5, 0.7, 1.01];
/** Starts followed with a narrow beam first, and how many of them then with the full one, round after round. */
const narrowBeam = 6;
const rounds: readonly number[] = [6, 3, 2];
/** Steps of the last search: changes of S, of J against the gain, and of dead time against S. */
const polishRounds = 2;

/** Error of the model itself, as a share of the power of the filtered PV; keeps clean records from being trusted too far. */
const modelError = 0.05;

/** Gain margin below which a fitted gain costs something, and how much. Own choice, set on simulated loops. */
const usualMargin = 2.5;
const marginPrice = 0.4;

/** Histories, cheapest first; null when OP does not move. `pv` in any unit, `op` in %, one length. */
export function reconstructTravel(
  pv: Float64Array,
  op: Float64Array,
  settings: ProcessSettings,
): Reconstruction[] | null {
  const largest = swingOf(op);
  if (!(largest > 0)) return null;
  const smallest = Math.min(noiseFloor * noiseLevel(op), largest / 4);
  const opening = openingOf(op, settings.period);
  const theta = firstTheta(pv, op, smallest, largest, settings);
  const objective = createObjective(pv, op, { ...settings, ...processGrid(settings), theta });
  const points = [
    ...searchGrid(objective, op, 'slides-on', smallest, largest, opening),
    ...searchGrid(objective, op, 'sticks-again', smallest, largest, opening),
  ].sort((a, b) => a.misfit - b.misfit);
  if (points[0].misfit >= 1) return null;
  const target = createTarget(pv, theta, settings);
  const actuatorLag = bestActuatorLag(op, points[0], target, settings);
  const scene: Scene = { op, u: lagged(op, actuatorLag), actuatorLag, target, largest, settings };
  let live = startsFrom(points, scene)
    .map((start) => follow(scene, start, narrowBeam))
    .sort(byPrice);
  for (const keep of rounds) {
    live = live
      .slice(0, keep)
      .map((start) => cheaper(start, follow(scene, start)))
      .concat(live.slice(keep))
      .sort(byPrice);
  }
  let [best] = live;
  const better = bestTheta(residualOf(pv, best.travel, best, settings), settings.integrating);
  if (better !== theta) {
    scene.target = createTarget(pv, better, settings);
    live = live
      .slice(0, 3)
      .map((start) => follow(scene, start))
      .sort(byPrice);
    [best] = live;
  }
  best = polish(scene, best);
  return [best, ...live.slice(1)];
}

/** What stays the same while histories are compared. */
interface Scene {
  readonly op: Float64Array;
  /** OP after the actuator. */
  readonly u: Float64Array;
  readonly actuatorLag: number;
  target: Target;
  readonly largest: number;
  readonly settings: ProcessSettings;
}

function byPrice(a: Reconstruction, b: Reconstruction): number {
  return a.price - b.price;
}

function cheaper(one: Reconstruction, other: Reconstruction): Reconstruction {
  return other.price < one.price ? other : one;
}

/**
 * Tries changes of the best history's element and process along the directions in which they trade off: jump against
 * gain; S against dead time, as a slip `later` samples later needs S larger by what OP moves meanwhile, at both turns;
 * actuator lag against dead time.
 */
function polish(scene: Scene, start: Reconstruction): Reconstruction {
  const { op, settings } = scene;
  let here = scene;
  let best = start;
  let step = 1;
  for (let round = 0; round < polishRounds; round++) {
    const { S, J, gain, delay } = best;
    const opRate = (2 * S) / settings.period;
    const trades = settings.deadTime === null ? [delay - 1, (delay - 1) / 2, 1.5 * step, -1.5 * step] : [];
    for (const change of [
      { J: Math.min(S, J * (1 + 0.3 * step)), gain: gain / (1 + 0.2 * step) },
      { J: J / (1 + 0.3 * step), gain: gain * (1 + 0.2 * step) },
      { J: Math.min(S, J + 0.15 * step * S) },
      ...trades
        .map((later) => ({ S: S + 2 * opRate * later, delay: Math.max(1, delay - later) }))
        .filter((change) => change.S > 0.3 * S && change.S < 2 * S)
        .map((change) => ({ ...change, J: Math.min(J, change.S) })),
    ]) {
      best = cheaper(best, follow(here, { ...best, ...change }));
    }
    for (const actuatorLag of actuatorLags) {
      if (actuatorLag === here.actuatorLag) continue;
      const other = { ...here, actuatorLag, u: lagged(op, actuatorLag) };
      const shift = settings.deadTime === null ? here.actuatorLag - actuatorLag : 0;
      const delayThere = Math.max(1, best.delay + shift);
      const found = follow(other, { ...best, delay: delayThere });
      if (found.price < best.price) {
        best = found;
        here = other;
      }
    }
    step /= 2;
  }
  return best;
}

/** The travel of a part of the record, followed from the reconstruction of the whole. */
export function followPart(
  pv: Float64Array,
  op: Float64Array,
  whole: Reconstruction,
  settings: ProcessSettings,
): Reconstruction {
  const { actuatorLag, theta } = whole;
  const target = createTarget(pv, theta, settings);
  const u = lagged(op, actuatorLag);
  return follow({ op, u, actuatorLag, target, largest: swingOf(op), settings }, whole);
}

function bestActuatorLag(
  op: Float64Array,
  point: GridPoint,
  target: Target,
  settings: ProcessSettings,
): number {
  let best = 0;
  let least = Number.POSITIVE_INFINITY;
  for (const lag of actuatorLags) {
    const { S, J, model } = point;
    const start = restingTravel(openingOf(op, settings.period), S, J);
    const travel = twoParameterValve(lagged(op, lag), { S, J, model, start });
    const { misfit } = fitProcess(travel, target, { ...point, secondLag: 0 }, settings);
    if (misfit < least) {
      least = misfit;
      best = lag;
    }
  }
  return best;
}

type Start = ProcessFit & { readonly S: number; readonly J: number };

/** The best tried point of every band of dead times and of J/S; bands of J/S without one borrow S from the best. */
function startsFrom(points: readonly GridPoint[], { u, target, settings, largest }: Scene): Start[] {
  const starts: Start[] = [];
  const opening = openingOf(u, settings.period);
  for (let delayBand = 0; delayBand < delayBands; delayBand++) {
    const here = points.filter(({ band, misfit }) => band === delayBand && misfit < 1);
    if (here.length === 0) continue;
    const [best] = here;
    for (let band = 0; band + 1 < jumpBands.length; band++) {
      const low = jumpBands[band];
      const high = jumpBands[band + 1];
      const point = here.find(
        ({ S, J }) => J / S >= low && J / S < high && Math.abs(S - best.S) < 0.3 * best.S,
      ) ?? { ...best, J: (best.S * (low + Math.min(high, 1))) / 2 };
      const S = Math.min(point.S, largest);
      const J = Math.min(point.J, S);
      const travel = twoParameterValve(u, { S, J, model: point.model, start: restingTravel(opening, S, J) });
      const process = fitGain(travel, target, { ...point, secondLag: 0 }, settings);
      starts.push({ ...(process.gain > 0 ? process : { ...best, secondLag: 0 }), S, J });
    }
  }
  return starts;
}

/** Price, for each sample, of a process gain that leaves the linear loop too little margin. */
function priceOfGain(fit: ProcessFit, { controller, integrating, samplePeriod }: ProcessSettings): number {
  if (controller === null || fit.gain === 0) return 0;
  const margin = gainMargin(controller, fit, fit.gain, integrating, samplePeriod);
  return margin >= usualMargin ? 0 : marginPrice * Math.log(usualMargin / Math.max(margin, 1e-3)) ** 2;
}

/** Follows the travel once from `start`, then fits process and element to it. */
function follow(
  { op, u, actuatorLag, target, largest, settings }: Scene,
  start: Start,
  width?: number,
): Reconstruction {
  const { S, J, gain, lag, secondLag, delay } = start;
  const samples = op.length;
  const track = {
    S,
    J,
    gain,
    lag,
    secondLag,
    delay,
    theta: target.theta,
    secondTheta: settings.integrating ? secondTheta(target.theta) : null,
    variance: ((Math.min(start.misfit, 1) + modelError) * target.power) / samples,
  };
  const { travel, penalty } = trackTravel(target.values, u, track, width);
  const refinements = width === narrowBeam ? 2 : 4;
  const process = fitProcess(travel, target, { lag, secondLag, delay }, settings, refinements);
  const kept = process.gain > 0 ? process : { lag, secondLag, delay, gain, misfit: 1 };
  const element = describeTravel(op, travel, { near: { S, J }, largest: largest * 1.05, quick: true });
  const innovations = kept.misfit * target.power;
  const unstable = samples * priceOfGain(kept, settings);
  return {
    ...kept,
    S: element.S,
    J: element.J,
    actuatorLag,
    theta: target.theta,
    price:
      (samples / 2) * Math.log((kept.misfit + modelError) * (target.power / samples)) + penalty + unstable,
    penalty,
    innovations,
    travel,
  };
}
