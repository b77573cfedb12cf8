/**
 * How much of a cycle's shape lies in its odd harmonics: 0 for a sine, 0.014 for a triangle, 0.146 for a
 * square.
 */
import type { SingleCycle } from './cycle';

/**
 * Share of the harmonics 3, 5 and 7 in the power of the fundamental and these. Each cycle is stretched to one
 * turn and the Fourier sums of all cycles are added with their phases, so that noise and a wandering
 * period count little. Harmonics above half the sampling frequency are left out.
 *
 * @param values samples, slow trend removed
 * @param samplePeriod s
 * @returns 0..1, or null when there are no cycles or fewer than six samples in one (no third harmonic)
 */
export function oddHarmonicShare(
  values: Float64Array,
  samplePeriod: number,
  cycles: readonly SingleCycle[],
): number | null {
  if (cycles.length === 0) return null;
  const first = cycles[0]!.from / samplePeriod;
  const last = cycles.at(-1)!.to / samplePeriod;
  const usual = (last - first) / cycles.length;
  if (usual < 6) return null;
  const powers = [1, 3, 5, 7]
    .filter((harmonic) => usual >= 2 * harmonic)
    .map((harmonic) => {
      let re = 0;
      let im = 0;
      for (const cycle of cycles) {
        const from = cycle.from / samplePeriod;
        const to = cycle.to / samplePeriod;
        const turn = (2 * Math.PI * harmonic) / (to - from);
        for (let k = Math.ceil(from); k < to; k++) {
          re += values[k]! * Math.cos(turn * (k - from));
          im += values[k]! * Math.sin(turn * (k - from));
        }
      }
      return re * re + im * im;
    });
  const total = powers.reduce((sum, power) => sum + power, 0);
  return total > 0 ? 1 - powers[0]! / total : null;
}
