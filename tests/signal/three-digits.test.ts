import { expect, test } from 'vitest';
import { threeDigits } from '../../src/signal/three-digits';

test('three significant digits, no trailing zeros, no exponent for usual sizes', () => {
  expect([0.071494, 1234.5, 40, -2.5, 0].map(threeDigits)).toEqual(['0.0715', '1230', '40', '-2.5', '0']);
});
