import { describe, expect, it } from 'vitest';
import type { Cause } from '../../src/assessment/assessment';
import { type CauseInput, nameCause } from '../../src/cause/name-cause';
import type { StictionFit, StictionResult, ValveTest } from '../../src/estimate/stiction-fit';
import type { Cycle } from '../../src/oscillation/cycle';
import type { ControllerReading } from '../../src/process/read-controller';
import type { Fitness, FitnessCheck, Forbids } from '../../src/record/fitness';
import { record } from '../evidence/loops';

const none = new Float64Array(0);

/** What is known of a loop whose valve was tested; strong figures each way, so that no limit is met closely. */
interface Known {
  readonly cycles?: boolean;
  readonly test?: Partial<ValveTest> | null;
  readonly response?: 'self-regulating' | 'integrating';
  /** Regularity of a cycle, and share of odd harmonics in PV. */
  readonly regularity?: number;
  readonly odd?: number | null;
  /** % */
  readonly S?: number;
  /** J over S of the fit that was drawn. */
  readonly jump?: number;
  readonly forbids?: readonly Forbids[];
  readonly integralTime?: number | null;
  readonly controllerRead?: boolean;
}

const period = 60;

function inputOf(known: Known): CauseInput {
  const { cycles = true, test = {}, response = 'self-regulating', jump = 0.5, forbids = [] } = known;
  const { integralTime = 20, controllerRead = true, regularity = 3, odd = null, S: size = 3 } = known;
  const cycle: Cycle = {
    present: cycles,
    why: cycles ? 'The zero crossings repeat every 60 s.' : 'The zero crossings do not repeat.',
    period: cycles ? period : null,
    regularity: cycles ? regularity : 0.4,
    cycles: cycles ? 30 : 0,
    others: [],
    amplitude: cycles ? 2 : null,
    oddHarmonicShare: odd,
    powerShare: null,
    single: [],
    autocorrelation: { lag: none, value: none },
    spectrum: { frequency: none, power: none },
  };
  const failed: FitnessCheck = {
    code: 'made-up',
    title: 'a check that fails',
    value: 1,
    unit: '',
    limit: 'none',
    source: 'own choice: for this test',
    passed: forbids.length === 0,
    forbids,
    text: 'The record was drawn by hand.',
  };
  const passed: FitnessCheck = { ...failed, passed: true, text: 'All is well with this.' };
  const fitness: Fitness = {
    checks: [passed, failed],
    allows: {
      cycle: !forbids.includes('cycle'),
      cause: !forbids.includes('cause'),
      numbers: !forbids.includes('numbers'),
    },
    recordToAskFor: 'Ask for more.',
  };
  const S = { value: size, low: 0.9 * size, high: 1.1 * size, unit: '% of OP span' };
  const fit: StictionFit = {
    model: 'slides-on',
    travelSource: 'reconstructed',
    S,
    J: { value: size * jump, low: 0, high: size, unit: S.unit },
    jumpDrawn: size * jump,
    explains: 0.93,
    explainsPv: 0.88,
    notes: [],
    travel: none,
    modelTravel: none,
    simulatedPv: none,
    slips: [],
    map: { S: [], J: [], misfit: [] },
    process: { response, gain: 1, lag: response === 'integrating' ? null : 3, deadTime: 2 },
  };
  const tested: ValveTest | null = test && {
    blocks: 16,
    blocksForValve: 16,
    gainOverLine: 300,
    tOverLine: 20,
    gainOverDeadBand: 150,
    tOverDeadBand: 12,
    tWithoutLine: null,
    ...test,
  };
  const stiction: StictionResult = {
    fit: tested && fit,
    drawn: tested && fit,
    refused: tested ? [] : ['OP and PV could not be fitted.'],
    test: tested,
  };
  const controller: ControllerReading = {
    form: integralTime === null ? 'P' : 'PI',
    gain: 0.5,
    integralTime,
    derivativeTime: null,
    proportionalOn: 'error',
    limits: { low: null, high: null },
    scanSamples: 1,
    scanPeriod: 1,
    pvShift: 0,
    spShift: 0,
    constantSetPoint: null,
    explains: 0.99,
    residualShare: 0.01,
    interval: 1,
    reproduced: none,
  };
  const op = Float64Array.from({ length: 600 }, (_, k) => 50 + 2 * Math.sin((2 * Math.PI * k) / period));
  return {
    record: record({ op, pv: op, sp: new Float64Array(600).fill(50), samplePeriod: 1 }),
    fitness,
    opCycle: cycle,
    pvCycle: cycle,
    stiction,
    controller: controllerRead ? controller : null,
  };
}

const valveLoses = {
  blocksForValve: 3,
  gainOverLine: -80,
  tOverLine: -6,
  gainOverDeadBand: 0,
  tOverDeadBand: 0,
};

/** A loop whose valve is not to blame: a sine in PV, regular, and no more dead band than a good valve has. */
const goodValve = { test: valveLoses, regularity: 15, odd: 0.0003, S: 0.3 };
/** A cycle like clockwork, as it comes in from outside. */
const fromOutside = { regularity: 300, odd: 0.0003, S: 0.6 };

/** What every cause owes: sentences without holes, and a confidence unless it cannot tell. */
function expectSound(cause: Cause): void {
  if (cause.verdict === 'cannot-tell') expect(cause.confidence).toBeNull();
  else expect(cause.confidence! > 0.5 && cause.confidence! < 1).toBe(true);
  expect(cause.reasons.length).toBeGreaterThan(0);
  for (const text of [...cause.reasons, ...cause.ruledOut]) {
    expect(text.length).toBeGreaterThan(10);
    expect(text).not.toMatch(/undefined|NaN|null|Infinity/);
  }
  expect(cause.also).not.toContain(cause.verdict);
}

function named(known: Known): Cause {
  const cause = nameCause(inputOf(known));
  expectSound(cause);
  return cause;
}

describe('nameCause', () => {
  it('accuses a valve that beats straight line and dead band alone in every block', () => {
    const { verdict, reasons, ruledOut } = named({});
    expect(verdict).toBe('stiction');
    expect(reasons.join(' ')).toMatch(/16 of 16 .*t = 20\.0/);
    expect(ruledOut.join(' ')).toMatch(/tuning/i);
    expect(ruledOut.join(' ')).toMatch(/outside/i);
  });

  it('accuses it of lost motion where the loop integrates and a jump adds nothing', () => {
    const deadBand = {
      response: 'integrating',
      jump: 0,
      test: { tOverDeadBand: -1, gainOverDeadBand: 0 },
    } as const;
    expect(named(deadBand).verdict).toBe('lost-motion');
    expect(named({ response: 'integrating', jump: 0.6 }).verdict).toBe('stiction');
  });

  it('accuses the valve also where the loop hunts without a fixed period, and then says so', () => {
    const { verdict, reasons } = named({ cycles: false });
    expect(verdict).toBe('stiction');
    expect(reasons.join(' ')).toMatch(/without a fixed period/);
  });

  it('keeps accusing a valve that keeps its lead once a steady line is taken out, with both figures', () => {
    const { verdict, reasons } = named({ test: { tWithoutLine: 14 } });
    expect(verdict).toBe('stiction');
    expect(reasons.join(' ')).toMatch(/14\.0/);
  });

  it('looks outside where the lead of the valve goes with the steady line', () => {
    const { verdict, reasons, ruledOut } = named({
      ...fromOutside,
      test: { blocksForValve: 11, tWithoutLine: -2 },
    });
    expect(verdict).toBe('outside-disturbance');
    expect(reasons.join(' ')).toMatch(/60\.0 s/);
    expect(ruledOut.join(' ')).toMatch(/stiction/i);
    expect(named({ ...fromOutside, test: { ...valveLoses, tWithoutLine: -4 } }).verdict).toBe(
      'outside-disturbance',
    );
  });

  it('names tight tuning for a cycle that a straight line predicts under proportional-dominated control', () => {
    // 2 pi Ti / period is 6.3 for an integral time of a whole period.
    for (const integralTime of [period, null]) {
      const { verdict, ruledOut } = named({ ...goodValve, integralTime });
      expect(verdict, `integral time ${integralTime}`).toBe('tight-tuning');
      expect(ruledOut.join(' ')).toMatch(/stiction/i);
    }
    expect(named({ ...goodValve, integralTime: period }).reasons.join(' ')).toMatch(/6\.3/);
  });

  it('cannot tell tuning from disturbance under integral-dominated control, or with no controller read', () => {
    for (const known of [{ integralTime: 1 }, { controllerRead: false }]) {
      const { verdict, ruledOut } = named({ ...goodValve, regularity: 5, ...known });
      expect(verdict).toBe('cannot-tell');
      // What was found out about the valve stands all the same.
      expect(ruledOut.join(' ')).toMatch(/stiction/i);
    }
  });

  it('says not-oscillating where nothing cycles and the valve has no say', () => {
    const { verdict, reasons } = named({ ...goodValve, cycles: false });
    expect(verdict).toBe('not-oscillating');
    expect(reasons.join(' ')).toContain('The zero crossings do not repeat.');
    expect(named({ cycles: false, test: null }).verdict).toBe('not-oscillating');
  });

  it('takes slips of a third of S in the travel for a jump, in an integrating loop too', () => {
    const deadBand = { response: 'integrating', jump: 0, test: { tOverDeadBand: -1 } } as const;
    const input = inputOf(deadBand);
    const slips = Array.from({ length: 20 }, (_, i) => ({ sample: i, time: i, size: i % 2 ? 1.2 : -1.2 }));
    const drawn = { ...input.stiction.drawn!, slips };
    expect(nameCause({ ...input, stiction: { ...input.stiction, drawn } }).verdict).toBe('stiction');
  });

  it('says not-oscillating where the loop hunts over no more dead band than good valves have', () => {
    const hunting = { cycles: false, test: { tOverLine: 2.4, blocksForValve: 11 } } as const;
    expect(named({ ...hunting, S: 1 }).verdict).toBe('cannot-tell');
    const { verdict, reasons } = named({ ...hunting, S: 0.25 });
    expect(verdict).toBe('not-oscillating');
    expect(reasons.join(' ')).toContain('less than 0.3 %');
  });

  it('names the dead band that logged travel shows beside whatever else makes the cycle', () => {
    const input = inputOf({ ...fromOutside, S: 2, test: { blocksForValve: 11, tWithoutLine: -2 } });
    const measured = { ...input.stiction.drawn!, travelSource: 'measured' as const };
    const { verdict, also, reasons } = nameCause({
      ...input,
      stiction: { ...input.stiction, fit: measured, drawn: measured },
    });
    expect(verdict).toBe(nameCause(input).verdict);
    // Numbers that were refused are not told here either.
    const refused = { ...input.stiction, fit: null, drawn: measured };
    expect(nameCause({ ...input, stiction: refused }).also).toEqual([]);
    expect(nameCause(input).also).toEqual([]);
    expect(also).toEqual(['stiction']);
    expect(reasons.join(' ')).toContain('dead band of 2.00 %');
    expect(named({}).also).toEqual([]);
  });

  it('cannot tell where the valve leads in some blocks only', () => {
    const { verdict, reasons } = named({ regularity: 15, test: { tOverLine: 2.4, blocksForValve: 11 } });
    expect(verdict).toBe('cannot-tell');
    expect(reasons.join(' ')).toMatch(/11 of 16 /);
  });

  it('cannot tell where a cycle could not be fitted', () => {
    expect(named({ test: null })).toMatchObject({ verdict: 'cannot-tell', confidence: null });
  });

  it('cannot tell from a record that is not fit for it, and gives the reason of the check that failed', () => {
    for (const forbids of [
      ['cycle', 'cause', 'numbers'],
      ['cause', 'numbers'],
    ] as const) {
      const cause = named({ forbids });
      expect(cause.verdict).toBe('cannot-tell');
      expect(cause.reasons).toEqual(['The record was drawn by hand.']);
    }
  });

  it('names a cause where only the numbers are forbidden', () => {
    expect(named({ forbids: ['numbers'] }).verdict).toBe('stiction');
  });

  it('is the surer the clearer the valve leads', () => {
    const sure = [6, 9, 20].map((tOverLine) => named({ test: { tOverLine } }).confidence!);
    expect(sure[1]).toBeGreaterThanOrEqual(sure[0]);
    expect(sure[2]).toBeGreaterThanOrEqual(sure[1]);
  });
});
