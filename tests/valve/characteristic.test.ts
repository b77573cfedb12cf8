import { expect, it } from 'vitest';
import { equalPercentageFlow } from '../../src/valve/characteristic';

it('an equal-percentage valve multiplies its flow by the same factor for the same step', () => {
  expect(equalPercentageFlow(100, 50)).toBe(100);
  expect(equalPercentageFlow(0, 50)).toBeCloseTo(2, 12);
  expect(equalPercentageFlow(60, 50) / equalPercentageFlow(50, 50)).toBeCloseTo(
    equalPercentageFlow(30, 50) / equalPercentageFlow(20, 50),
    12,
  );
  expect(() => equalPercentageFlow(50, 1)).toThrow(/must be above 1/);
});
