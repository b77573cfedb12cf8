/** The grid search of stage 1 against the brute-force searches: time, and whether it finds the same S and J. */
import { median } from '../../src/signal/statistics';
import { casesOf } from '../accuracy/sets';
import { makeProblem, type Problem, pairsTried, searchFast, type Tried, VARIANTS } from './problem';
import type { BruteForce, Rival } from './rivals';

/** Samples to which each record is cut. */
export const SAMPLES = 3600;

export interface RecordResult {
  readonly id: string;
  readonly service: string;
  readonly pairs: number;
  readonly lags: number;
  readonly delays: number;
  /** s, median of the repeats. */
  readonly fast: number;
  readonly rivals: Readonly<Record<string, number>>;
  readonly variants: readonly VariantResult[];
}

export interface VariantResult {
  readonly model: string;
  readonly fast: Tried;
  readonly brute: Tried;
  /** The fast search's S and J lie within a grid step of the best of all. */
  readonly found: boolean;
  /** Largest difference between the misfits of a pair that the fast search tried and of brute force. */
  readonly furthestOff: number;
}

/** The first `records` development records with stiction that are long enough and turn. */
export function longRecords(records: number): { id: string; service: string; problem: Problem }[] {
  const chosen: { id: string; service: string; problem: Problem }[] = [];
  for (const { id, service, processGain, record } of casesOf('development')) {
    if (chosen.length === records) break;
    if (record.op.length < SAMPLES) continue;
    const problem = makeProblem({
      pv: record.pv.slice(0, SAMPLES),
      op: record.op.slice(0, SAMPLES),
      samplePeriod: record.samplePeriod,
      integrating: record.response === 'integrating',
      sign: processGain > 0 ? 1 : -1,
    });
    if (problem !== null) chosen.push({ id, service, problem });
  }
  return chosen;
}

/** The rivals take turns, so that a busy moment of the machine does not fall on one of them alone. The first answers. */
export function compareOn(
  { id, service, problem }: { id: string; service: string; problem: Problem },
  rivals: readonly Rival[],
  repeats: number,
): RecordResult {
  const fastTimes: number[] = [];
  const times = rivals.map((): number[] => []);
  let points: ReturnType<typeof searchFast> = [];
  let reference: BruteForce | null = null;
  for (let turn = 0; turn < repeats; turn++) {
    const start = performance.now();
    points = searchFast(problem);
    fastTimes.push((performance.now() - start) / 1000);
    rivals.forEach((rival, i) => {
      const answer = rival.run(problem);
      times[i].push(answer.seconds);
      reference ??= answer;
    });
  }
  const { misfits } = reference ?? { misfits: [] };
  return {
    id,
    service,
    pairs: problem.pairs.length,
    lags: problem.options.lags.length,
    delays: problem.options.delays.length,
    fast: middle(fastTimes),
    rivals: Object.fromEntries(rivals.map(({ name }, i) => [name, middle(times[i])])),
    variants: misfits.map((row, i) => ({
      model: VARIANTS[i],
      ...compareVariant(pairsTried(points[i], problem), row, problem),
    })),
  };
}

export function compareVariant(
  tried: readonly Tried[],
  misfits: Float64Array,
  { pairs }: Problem,
): Omit<VariantResult, 'model'> {
  const [fast] = tried;
  const all = pairs.map(({ s, j }, i): Tried => ({ s, j, misfit: misfits[i] }));
  const brute = all.reduce((best, one) => (one.misfit < best.misfit ? one : best));
  const byPlace = new Map(all.map((one) => [`${one.s} ${one.j}`, one.misfit]));
  const off = tried.map(({ s, j, misfit }) => Math.abs(misfit - (byPlace.get(`${s} ${j}`) ?? Number.NaN)));
  return {
    fast,
    brute,
    found: Math.abs(fast.s - brute.s) <= 1 && Math.abs(fast.j - brute.j) <= 1,
    furthestOff: Math.max(...off),
  };
}

export function middle(values: readonly number[]): number {
  return median(Float64Array.from(values));
}
