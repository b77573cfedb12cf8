import { expect, test } from 'vitest';
import { squaredBicoherence } from '../../src/signal/bispectrum';
import { seededRandom } from '../../src/signal/random';

/** Three cosines at 10/64, 6/64 and 16/64 cycles a sample, their phases drawn anew for each segment of 64. */
function three(coupled: boolean): Float64Array {
  const random = seededRandom(9);
  let phases = [0, 0, 0];
  return new Float64Array(64 * 60).map((_, i) => {
    if (i % 64 === 0) {
      const [a, b, c] = [0, 1, 2].map(() => 2 * Math.PI * random.uniform()) as [number, number, number];
      phases = [a, b, coupled ? a + b : c];
    }
    const t = (2 * Math.PI * i) / 64;
    return (
      Math.cos(10 * t + phases[0]!) +
      Math.cos(6 * t + phases[1]!) +
      Math.cos(16 * t + phases[2]!) +
      0.2 * random.normal()
    );
  });
}

test.each([
  [true, 0.5, 1],
  [false, 0, 0.15],
])(
  'a third cosine whose phase is the sum of two others is found, a free one is not (coupled: %s)',
  (coupled, low, high) => {
    const { first, second, squared } = squaredBicoherence(three(coupled), 64);
    const pair = first.findIndex((value, i) => value === 10 / 64 && second[i] === 6 / 64);
    expect(squared[pair]).toBeGreaterThanOrEqual(low);
    expect(squared[pair]).toBeLessThanOrEqual(high);
  },
);

test('all values lie in 0..1, also for a constant', () => {
  for (const values of [three(true), new Float64Array(300).fill(3)]) {
    for (const value of squaredBicoherence(values, 32).squared) {
      expect(value).toBeGreaterThanOrEqual(0);
      expect(value).toBeLessThanOrEqual(1 + 1e-12);
    }
  }
});

test('segments that do not fit are refused', () => {
  expect(() => squaredBicoherence(new Float64Array(100), 33)).toThrow('Received 33.');
  expect(() => squaredBicoherence(new Float64Array(100), 102)).toThrow('from 8 to the 100 of the signal');
});
