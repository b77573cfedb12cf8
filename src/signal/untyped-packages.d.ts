/** Types of the packages used here that bring none, or none that this compiler setting finds. */
declare module 'fft.js' {
  export default class FFT {
    constructor(size: number);
    readonly size: number;
    transform(out: Float64Array, data: Float64Array): void;
    inverseTransform(out: Float64Array, data: Float64Array): void;
  }
}

declare module 'jstat' {
  interface OneParameter {
    inv(p: number, degrees: number): number;
  }
  const jStat: {
    normal: { inv(p: number, mean: number, deviation: number): number };
    studentt: OneParameter;
    chisquare: OneParameter;
    centralF: { inv(p: number, degrees1: number, degrees2: number): number };
  };
  export default jStat;
}

declare module 'pure-rand/generator/xoroshiro128plus' {
  export function xoroshiro128plus(seed: number): import('pure-rand/types/RandomGenerator').RandomGenerator;
}

declare module 'pure-rand/distribution/uniformFloat64' {
  export function uniformFloat64(
    generator: import('pure-rand/types/RandomGenerator').RandomGenerator,
  ): number;
}

declare module 'pure-rand/types/RandomGenerator' {
  export interface RandomGenerator {
    next(): number;
  }
}
