/// <reference path="./untyped-packages.d.ts" />
/** Seeded random numbers: equal seeds give equal numbers on every machine. */
import { uniformFloat64 } from 'pure-rand/distribution/uniformFloat64';
import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus';
import { WrongUse } from '../errors';

export interface SeededRandom {
  /** Next number, evenly spread over 0 (included) to 1 (excluded). */
  uniform(): number;
  /** Next number from the normal distribution with mean 0 and standard deviation 1. */
  normal(): number;
}

/**
 * A generator of its own: nothing else in the program moves it. Numbers come from xoroshiro128+ (Blackman and
 * Vigna 2018); normal ones by the polar method of Marsaglia and Bray (1964, SIAM Review 6:260-264).
 *
 * @param seed an integer; only its lowest 32 bits count
 * @throws WrongUse when the seed is not an integer
 */
export function seededRandom(seed: number): SeededRandom {
  if (!Number.isSafeInteger(seed)) {
    throw new WrongUse(`A seed must be an integer. Received ${seed}.`);
  }
  const generator = xoroshiro128plus(seed);
  const uniform = (): number => uniformFloat64(generator);
  let spare: number | null = null;
  const normal = (): number => {
    if (spare !== null) {
      const value = spare;
      spare = null;
      return value;
    }
    for (;;) {
      const a = 2 * uniform() - 1;
      const b = 2 * uniform() - 1;
      const s = a * a + b * b;
      if (s > 0 && s < 1) {
        const scale = Math.sqrt((-2 * Math.log(s)) / s);
        spare = b * scale;
        return a * scale;
      }
    }
  };
  return { uniform, normal };
}
