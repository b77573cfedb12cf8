import { describe, it } from 'vitest';
import { lagged, pressureLag } from '../../src/field-test/actuator-lag';
import { seededRandom } from '../../src/signal/random';
import { expectAllClose, expectClose } from '../closeness';

const ramp = Float64Array.from({ length: 200 }, (_, k) => 50 + 0.1 * (k < 100 ? k : 200 - k));

describe('the lag of an actuator', () => {
  it('keeps a ramp its rate times its lag behind', () => {
    const behind = lagged(ramp, 3, 0.5);
    // Rate 0.2 %/s; after some lags the drive is 0.6 % behind.
    expectClose(ramp[99]! - behind[99]!, 0.6, { absolute: 1e-4 });
    expectAllClose(lagged(ramp, 0, 0.5), ramp, {});
  });

  it('is found again from a noisy pressure in any unit', () => {
    const random = seededRandom(3);
    for (const lag of [0.3, 2, 9]) {
      const pressure = lagged(ramp, lag, 0.5).map((drive) => 20 + 0.8 * drive + 0.01 * random.normal());
      expectClose(pressureLag(ramp, pressure, 0.5), lag, { relative: 0.05, absolute: 0.03 }, `lag ${lag}`);
    }
  });
});
