import { describe, expect, it } from 'vitest';
import { createLinearProcess, simulateProcess } from '../../src/process/linear-process';

const step = (length: number): Float64Array => new Float64Array(length).fill(1);

describe('linear process', () => {
  it('one lag answers a step with 1 - exp(-t/lag), behind a fractional dead time', () => {
    const output = simulateProcess(step(20), 1, { gain: 3, lags: [4], deadTime: 2.3 });
    for (let k = 0; k < 20; k++) {
      const t = k + 1 - 2.3;
      expect(output[k]).toBeCloseTo(t > 0 ? 3 * (1 - Math.exp(-t / 4)) : 0, 12);
    }
  });

  it('two lags answer with the textbook curve, equal ones too', () => {
    const different = simulateProcess(step(20), 0.5, { lags: [2, 5] });
    const equal = simulateProcess(step(20), 0.5, { lags: [3, 3] });
    for (let k = 0; k < 20; k++) {
      const t = 0.5 * (k + 1);
      expect(different[k]).toBeCloseTo(1 - (5 * Math.exp(-t / 5) - 2 * Math.exp(-t / 2)) / 3, 12);
      expect(equal[k]).toBeCloseTo(1 - (1 + t / 3) * Math.exp(-t / 3), 9);
    }
  });

  it('integrates departures from the input at rest, with and without a lag', () => {
    const ramp = simulateProcess(step(10), 2, {
      response: 'integrating',
      gain: 0.5,
      restInput: -1,
      restOutput: 7,
    });
    expect(ramp[9]).toBeCloseTo(7 + 0.5 * 2 * 20, 12);
    const lagged = simulateProcess(step(10), 2, { response: 'integrating', lags: [6] });
    expect(lagged[9]).toBeCloseTo(20 - 6 * (1 - Math.exp(-20 / 6)), 12);
  });

  it('does not depend on the step while the input is held', () => {
    const coarse = createLinearProcess({ lags: [3, 8], deadTime: 1.4 }, 1);
    const fine = createLinearProcess({ lags: [3, 8], deadTime: 1.4 }, 0.1);
    for (let k = 0; k < 30; k++) {
      const input = Math.sin(k);
      for (let i = 0; i < 10; i++) fine.advance(input);
      expect(coarse.advance(input)).toBeCloseTo(fine.output, 10);
    }
  });

  it('refuses lags and dead times that cannot be', () => {
    expect(() => createLinearProcess({ lags: [1, 2, 3] }, 1)).toThrow(/at most 2 lags/);
    expect(() => createLinearProcess({ response: 'integrating', lags: [1, 2] }, 1)).toThrow(/at most 1 lags/);
    expect(() => createLinearProcess({ deadTime: -1 }, 1)).toThrow(/dead time of 0 s or more/);
    expect(() => createLinearProcess({ delay: 1 } as object, 1)).toThrow(/no option "delay"/);
  });
});
