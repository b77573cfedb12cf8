import { describe, expect, it } from 'vitest';
import { createController } from '../../src/process/controller';

describe('controller', () => {
  it('P acts on the error alone, in its direction', () => {
    expect(createController({ form: 'P', gain: 2 }, 1).scan(10, 7)).toBe(56);
    expect(createController({ form: 'P', gain: 2, action: 'direct' }, 1).scan(10, 7)).toBe(44);
  });

  it('PI repeats its proportional step once in each integral time', () => {
    const controller = createController({ gain: 2, integralTime: 10, bias: 30 }, 1);
    let op = 0;
    for (let k = 0; k < 10; k++) op = controller.scan(4, 3);
    expect(op).toBeCloseTo(30 + 2 + 2, 12);
  });

  it('integral action alone has no step', () => {
    const controller = createController({ form: 'I', gain: 2, integralTime: 10 }, 1);
    expect(controller.scan(4, 3)).toBeCloseTo(50.2, 12);
    expect(controller.scan(4, 3)).toBeCloseTo(50.4, 12);
  });

  it('PID acts against a ramp of PV with gain times derivative time times slope', () => {
    const controller = createController({ form: 'PID', gain: 2, integralTime: 1e9, derivativeTime: 5 }, 0.1);
    let op = 0;
    for (let k = 0; k < 100; k++) op = controller.scan(0.3 * 0.1 * k, 0.3 * 0.1 * k);
    expect(op).toBeCloseTo(50 - 2 * 5 * 0.3, 6);
  });

  it('does not wind up: it leaves the limit as soon as the error turns', () => {
    const controller = createController({ gain: 1, integralTime: 5, high: 60 }, 1);
    for (let k = 0; k < 1000; k++) expect(controller.scan(20, 0)).toBeLessThanOrEqual(60);
    expect(controller.scan(20, 21)).toBeLessThan(60);
  });

  it('integrates nothing while the error is within its integral dead band', () => {
    const settings = { gain: 2, integralTime: 10, bias: 40, integralDeadBand: 0.5 };
    const within = createController(settings, 1);
    for (let k = 0; k < 50; k++) expect(within.scan(10, 9.5)).toBeCloseTo(41, 12);
    const beyond = createController(settings, 1);
    for (let k = 0; k < 9; k++) beyond.scan(10, 9);
    expect(beyond.scan(10, 9)).toBeCloseTo(42 + 2, 12);
  });

  it('refuses what cannot be', () => {
    expect(() => createController({ gain: 0 }, 1)).toThrow(/above 0/);
    expect(() => createController({ low: 60, high: 50 }, 1)).toThrow(/low limit/);
    expect(() => createController({ Ti: 5 } as object, 1)).toThrow(/no option "Ti"/);
  });
});
