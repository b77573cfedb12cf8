/**
 * Fits the weights of `src/cause/valve-odds.ts` and prints them: `npm run weigh`, after `npm run accuracy` on the sets
 * development and weighing. Logistic regression with a small ridge; what it says is checked in tenfold cross-validation.
 */
import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { Matrix, solve } from 'ml-matrix';
import { signNames } from '../../src/cause/valve-odds';
import { seededRandom } from '../../src/signal/random';
import type { Outcome } from './outcome';
import { rate } from './score';

/** Size of the ridge on each standardised weight, and rounds of Newton's method, which settles in a few. */
const ridge = 2;
const rounds = 12;
const folds = 10;

interface Row {
  readonly x: readonly number[];
  readonly y: 0 | 1;
}

const outcomes = ['development', 'weighing'].flatMap((set): Outcome[] => {
  const file = join(__dirname, `../../.cache/accuracy/${set}.json`);
  if (!existsSync(file)) throw new Error(`There is no ${file}. Run npm run accuracy -- --set ${set} first.`);
  return JSON.parse(readFileSync(file, 'utf8')).outcomes;
});
const rows = outcomes.flatMap(({ signs, cause }): Row[] =>
  signs ? [{ x: signNames.map((name) => signs[name]), y: isFault(cause) ? 1 : 0 }] : [],
);
const { weights, intercept } = fit(rows);
console.log(`${rows.length} loops, ${rows.filter(({ y }) => y === 1).length} of them with a faulty valve`);
console.log(signNames.map((name, i) => `${name}: ${weights[i].toFixed(2)}`).join(', '));
console.log(`intercept: ${intercept.toFixed(2)}`);
checkByFolds();

function isFault(cause: string): boolean {
  return cause === 'stiction' || cause === 'lost-motion';
}

/** Weights of the signs as they are, from a fit to the standardised ones. */
function fit(from: readonly Row[]): { weights: number[]; intercept: number } {
  const mean = signNames.map((_, i) => from.reduce((sum, { x }) => sum + x[i], 0) / from.length);
  const spread = signNames.map((_, i) =>
    Math.sqrt(from.reduce((sum, { x }) => sum + (x[i] - mean[i]) ** 2, 0) / from.length),
  );
  const design = new Matrix(from.map(({ x }) => [1, ...x.map((value, i) => (value - mean[i]) / spread[i])]));
  const penalty = Matrix.diag([0, ...signNames.map(() => ridge)]);
  let w = Matrix.zeros(signNames.length + 1, 1);
  for (let round = 0; round < rounds; round++) {
    const said = design.mmul(w).to1DArray().map(logistic);
    const slack = Matrix.columnVector(from.map(({ y }, k) => y - said[k]));
    const gradient = design.transpose().mmul(slack).sub(penalty.mmul(w));
    const curved = design.clone().mulColumnVector(said.map((p) => p * (1 - p)));
    w = Matrix.add(w, solve(design.transpose().mmul(curved).add(penalty), gradient));
  }
  const weights = signNames.map((_, i) => w.get(i + 1, 0) / spread[i]);
  return { weights, intercept: w.get(0, 0) - weights.reduce((sum, weight, i) => sum + weight * mean[i], 0) };
}

function logistic(odds: number): number {
  return 1 / (1 + Math.exp(-odds));
}

/** Said against found, tenth by tenth, each loop judged by weights that have not seen it. */
function checkByFolds(): void {
  const random = seededRandom(1);
  const foldOf = rows.map(() => Math.floor(folds * random.uniform()));
  const said = new Float64Array(rows.length);
  for (let fold = 0; fold < folds; fold++) {
    const model = fit(rows.filter((_, k) => foldOf[k] !== fold));
    rows.forEach(({ x }, k) => {
      if (foldOf[k] !== fold) return;
      said[k] = logistic(x.reduce((sum, value, i) => sum + model.weights[i] * value, model.intercept));
    });
  }
  for (let tenth = 0; tenth < 10; tenth++) {
    const here = rows.map((_, k) => k).filter((k) => Math.min(9, Math.floor(10 * said[k])) === tenth);
    const mean = here.reduce((sum, k) => sum + said[k], 0) / Math.max(1, here.length);
    const { hits, of, share, low, high } = rate(here.filter((k) => rows[k].y === 1).length, here.length);
    const found = share === null ? '-' : `${share.toFixed(2)} (${low?.toFixed(2)}-${high?.toFixed(2)})`;
    console.log(`said ${mean.toFixed(2)}: found ${found}, ${hits} of ${of}`);
  }
}
