/** Seeded draws from the ranges of the accuracy suite. */
import { seededRandom } from '../../src/signal/random';

export interface Draw {
  /** Evenly spread over low..high. */
  between(low: number, high: number): number;
  /** Evenly spread over the logarithms of low..high, both above 0. */
  logBetween(low: number, high: number): number;
  /** True with this probability. */
  chance(probability: number): boolean;
  /** One of the values; with weights, in proportion to them. */
  oneOf<T>(values: readonly T[], weights?: readonly number[]): T;
  /** A seed for a generator of its own. */
  seed(): number;
}

export function createDraw(seed: number): Draw {
  const random = seededRandom(seed);
  const between = (low: number, high: number): number => low + (high - low) * random.uniform();
  return {
    between,
    logBetween: (low, high) => low * (high / low) ** random.uniform(),
    chance: (probability) => random.uniform() < probability,
    oneOf: (values, weights = values.map(() => 1)) => {
      const total = weights.reduce((sum, weight) => sum + weight, 0);
      let left = total * random.uniform();
      const index = weights.findIndex((weight) => {
        left -= weight;
        return left < 0;
      });
      return values[index === -1 ? values.length - 1 : index];
    },
    seed: () => Math.floor(2 ** 30 * random.uniform()),
  };
}
