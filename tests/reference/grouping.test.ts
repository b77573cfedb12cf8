/**
 * Grouping of loops against sources outside the project: spectra, likeness and clusters from SciPy and NumPy
 * (grouping-scipy.py made grouping-scipy.json; the versions stand in it). Our shares are rounded to a millionth, which
 * sets the tolerances; everything else is rounding.
 */
import { describe, expect, test } from 'vitest';
import { averageLinkage } from '../../src/audit/average-linkage';
import { spectralLikeness } from '../../src/audit/likeness';
import { reducedSpectrum } from '../../src/audit/reduced-spectrum';
import { expectAllClose, expectClose } from '../closeness';
import scipy from './grouping-scipy.json';

const spectra = scipy.signals.map(({ samplePeriod, values }) =>
  reducedSpectrum(Float64Array.from(values), samplePeriod),
);

describe('against SciPy', () => {
  test('power in bands, of records of other lengths and sample periods', () => {
    spectra.forEach(({ firstBand, shares }, i) => {
      const want = scipy.spectra[i]!;
      expect(firstBand).toBe(want.firstBand);
      expectAllClose(shares, want.shares, { absolute: 1e-6 }, `shares of signal ${i}`);
    });
  });

  test('likeness of each two spectra', () => {
    spectra.forEach((a, i) => {
      spectra.forEach((b, j) => {
        if (i === j) return;
        const slowest = 1 / (2.5 * Math.max(scipy.periods[i]!, scipy.periods[j]!));
        const got = spectralLikeness(a, b, slowest);
        expectClose(got, scipy.likeness[i]![j]!, { absolute: 2e-5 }, `likeness of ${i} and ${j}`);
      });
    });
  });

  test('clusters by average linkage, of these loops and of scattered numbers, each cut at several heights', () => {
    for (const { likeness, clusters } of [scipy, scipy.scatter]) {
      for (const { least, labels } of clusters) {
        const got = averageLinkage(labels.length, (i, j) => likeness[i]![j]!, least);
        const want = [...new Set(labels)].map((label) =>
          labels.flatMap((other, i) => (other === label ? [i] : [])),
        );
        expect(got, `at ${least}`).toEqual(want.sort((a, b) => a[0]! - b[0]!));
      }
    }
  });
});
