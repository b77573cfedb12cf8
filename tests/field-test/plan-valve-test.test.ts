import { describe, expect, it } from 'vitest';
import { planCard } from '../../src/field-test/plan-card';
import { planValveTest } from '../../src/field-test/plan-valve-test';
import type { TypedValve, ValveTestLimits, ValveTestPlan } from '../../src/field-test/valve-test-plan';
import { seededRandom } from '../../src/signal/random';
import { fixtureFindings } from '../figures/findings-fixture';

const valve: TypedValve = {
  loop: '31-FC-104',
  S: 3.4,
  J: 1.6,
  op: 54.4,
  pv: 63.5,
  pvSwing: 1.9,
  pvUnit: 'm3/h',
  period: 128,
  process: { response: 'self-regulating', gain: 1.1, lag: 3, deadTime: 1 },
};
const limits: ValveTestLimits = {
  opBand: { low: 40, high: 75 },
  pvBand: { low: 40, high: 95 },
  largestStep: 5,
  longestHold: 700,
  hasSafetyFunction: false,
  isInTripPath: false,
};
Object.freeze(valve);
Object.freeze(limits);

/** OP at every turn of the tests of a plan, with the steps between them and the holds. */
function movesOf(plan: ValveTestPlan): { op: number; step: number; hold: number }[] {
  return plan.tests.flatMap(({ startOp, moves }) =>
    moves.map(({ op, rate, hold }, i) => {
      const from = i > 0 ? moves[i - 1]!.op : startOp;
      // A ramp is sent in steps of one second.
      return { op, step: rate === null ? Math.abs(op - from) : rate, hold };
    }),
  );
}

describe('a plan', () => {
  it('never leaves the limits, for hundreds of valves and limits, and is marked as a proposal', () => {
    const random = seededRandom(5);
    const between = (low: number, high: number): number => low + (high - low) * random.uniform();
    const counts = { hold: 0, step: 0, stroke: 0, none: 0 };
    for (let i = 0; i < 600; i++) {
      const S = 10 ** between(-0.7, 1.2);
      const opLow = between(0, 60);
      const opHigh = Math.min(100, opLow + 10 ** between(0.3, 2));
      const pvLow = between(-50, 50);
      const pvHigh = pvLow + 10 ** between(0, 2.3);
      const integrating = random.uniform() < 0.25;
      const one: TypedValve = {
        ...valve,
        S,
        J: random.uniform() < 0.3 ? null : S * random.uniform(),
        op:
          between(opLow - 2, opHigh + 2) > 0 ? Math.min(100, Math.max(0, between(opLow - 2, opHigh + 2))) : 0,
        pv: between(pvLow, pvHigh),
        pvSwing: between(0, 0.2) * (pvHigh - pvLow),
        period: random.uniform() < 0.2 ? null : 10 ** between(1, 3.3),
        process:
          random.uniform() < 0.1
            ? null
            : {
                response: integrating ? 'integrating' : 'self-regulating',
                gain:
                  (random.uniform() < 0.5 ? -1 : 1) *
                  10 ** between(integrating ? -4 : -1.5, integrating ? -2 : 0.7),
                lag: integrating ? null : between(0, 60),
                deadTime: between(0, 20),
              },
      };
      const stated: ValveTestLimits = {
        opBand: { low: opLow, high: opHigh },
        pvBand: { low: pvLow, high: pvHigh },
        largestStep: 10 ** between(-1.5, 1),
        longestHold: 10 ** between(0.5, 4),
        hasSafetyFunction: random.uniform() < 0.05,
        isInTripPath: random.uniform() < 0.05,
      };
      const plan = planValveTest(one, stated);
      expect(plan.standing).toBe('proposal, not released');
      expect(plan.checkList.length).toBeGreaterThan(10);
      expect(plan.cautions.length).toBeGreaterThan(4);
      expect(plan.tests.length > 0).toBe(plan.refused.length === 0);
      if (stated.hasSafetyFunction || stated.isInTripPath) expect(plan.tests).toEqual([]);
      for (const { op, step, hold } of movesOf(plan)) {
        expect(op).toBeGreaterThanOrEqual(opLow - 1e-9);
        expect(op).toBeLessThanOrEqual(opHigh + 1e-9);
        expect(step).toBeLessThanOrEqual(stated.largestStep + 1e-9);
        expect(hold).toBeLessThanOrEqual(stated.longestHold + 1e-9);
      }
      for (const { kind, expectedPv, stopPv, moves, duration, startOp } of plan.tests) {
        counts[kind]++;
        expect(expectedPv.low).toBeGreaterThan(pvLow);
        expect(expectedPv.high).toBeLessThan(pvHigh);
        expect(stopPv.low).toBeGreaterThan(pvLow);
        expect(stopPv.low).toBeLessThanOrEqual(expectedPv.low);
        expect(stopPv.high).toBeLessThan(pvHigh);
        expect(stopPv.high).toBeGreaterThanOrEqual(expectedPv.high);
        expect(moves[moves.length - 1]!.op).toBeCloseTo(startOp, 9);
        expect(Number.isFinite(duration)).toBe(true);
      }
      if (plan.tests.length === 0) counts.none++;
    }
    // The property says nothing unless plans of every kind, and none, are among the cases.
    expect(Math.min(...Object.values(counts)), JSON.stringify(counts)).toBeGreaterThan(20);
  });

  it.each(Object.keys(limits) as (keyof ValveTestLimits)[])('is not made without %s', (name) => {
    const { [name]: _, ...rest } = limits;
    expect(() => planValveTest(valve, rest as ValveTestLimits)).toThrow(new RegExp(`Missing: ${name} `));
  });

  it('names every limit that is missing, at once', () => {
    expect(() => planValveTest(valve, {} as ValveTestLimits)).toThrow(
      /opBand.*pvBand.*largestStep.*longestHold.*hasSafetyFunction.*isInTripPath/,
    );
    expect(() => planValveTest(valve, undefined as unknown as ValveTestLimits)).toThrow(/opBand/);
  });

  it.each([
    [{ ...limits, opBand: { low: 40, high: 130 } }, /opBand goes from a low to a higher OP within 0 to 100/],
    [{ ...limits, pvBand: { low: 80, high: 50 } }, /pvBand goes from a low to a higher PV/],
    [{ ...limits, largestStep: 0 }, /largestStep is a number above 0/],
    [{ ...limits, isInTripPath: 'no' as unknown as boolean }, /isInTripPath is true or false, received no/],
    [{ ...limits, steps: 3 } as ValveTestLimits, /no limit "steps"/],
  ])('refuses limits that make no sense: %j', (wrong, message) => {
    expect(() => planValveTest(valve, wrong)).toThrow(message);
  });

  it('refuses what is typed wrongly', () => {
    expect(() => planValveTest({ ...valve, S: -1 }, limits)).toThrow(/S is above 0, received -1/);
    expect(() => planValveTest({ ...valve, pv: Number.NaN }, limits)).toThrow(/pv is a number/);
  });

  it.each([
    ['safety-function', { hasSafetyFunction: true }],
    ['trip-path', { isInTripPath: true }],
    ['op-near-limit', { opBand: { low: 60, high: 80 } }],
    ['pv-near-limit', { pvBand: { low: 63, high: 95 } }],
    ['nothing-fits', { longestHold: 5, opBand: { low: 52, high: 56 } }],
  ] as const)('is refused as %s', (code, change) => {
    const plan = planValveTest(valve, { ...limits, ...change });
    expect(plan.tests).toEqual([]);
    expect(plan.refused.map((one) => one.code)).toContain(code);
    expect(planCard(plan).headline).toBe('No valve test is proposed for 31-FC-104.');
  });

  it('holds first, then steps in a 1-2-5 series with reversals, then ramps', () => {
    const plan = planValveTest(valve, limits);
    expect(plan.tests.map(({ kind }) => kind)).toEqual(['hold', 'step', 'stroke']);
    const [hold, step, stroke] = plan.tests;
    expect(hold!.duration / valve.period!).toBeGreaterThanOrEqual(3);
    expect(hold!.duration / valve.period!).toBeLessThanOrEqual(5.01);
    for (const { step: size } of step!.stepsInPv) expect([0.1, 0.2, 0.5, 1, 2, 5, 10]).toContain(size);
    // Expected PV movement is gain times step, in the unit of PV.
    expect(step!.stepsInPv[0]).toEqual({ step: 0.5, pv: 0.55 });
    // Long enough for dead time and four lags.
    expect(step!.moves[0]!.hold).toBeGreaterThanOrEqual(1 + 4 * 3);
    // Far enough to break loose from anywhere in the stick band.
    const reach = Math.max(...step!.moves.map(({ op }) => Math.abs(op - valve.op)));
    expect(reach).toBeGreaterThan(valve.S + valve.J!);
    expect(stroke!.moves.every(({ rate }) => rate !== null && rate > 0)).toBe(true);
  });

  it('without a process proposes the hold alone and says why', () => {
    const plan = planValveTest({ ...valve, process: null }, { ...limits, pvBand: { low: 0, high: 120 } });
    expect(plan.tests.map(({ kind }) => kind)).toEqual(['hold']);
    expect(plan.leftOut.map(({ kind }) => kind)).toEqual(['step', 'stroke']);
    expect(plan.leftOut[0]!.text).toMatch(/need S and the process/);
  });

  it('from an assessment takes the high ends of S and J, and room for a larger gain than was fitted', () => {
    const findings = fixtureFindings();
    const { stiction, record } = findings;
    const wide = { ...limits, opBand: { low: 0, high: 100 }, pvBand: { low: -400, high: 600 } };
    const plan = planValveTest(findings, wide);
    expect(plan.basis.S).toBe(stiction.fit!.S.high);
    expect(plan.basis.from).toBe('assessment');
    expect(plan.notes.map(({ code }) => code)).toEqual(
      expect.arrayContaining(['high-ends', 'starting-point']),
    );
    // OP of a split range is in % of travel; limits are not.
    const split = { ...findings, record: { ...record, notes: [{ code: 'valve-range', text: '' }] } };
    expect(planValveTest(split, wide).refused.map(({ code }) => code)).toEqual(['split-range']);
    // Without numbers there is still the hold.
    const refused = planValveTest(fixtureFindings({ fit: 'refused' }), wide);
    expect(refused.tests.map(({ kind }) => kind)).toEqual(['hold']);
  });

  it('reads as a card with check list, stop values, cautions and its standing', () => {
    const card = planCard(planValveTest(valve, limits));
    expect(card.label).toBe('proposal, not released');
    expect(card.parts.map(({ title }) => title)).toEqual([
      'The tests, in this order',
      'Stop when',
      'Agree beforehand',
      'What the plan rests on',
    ]);
    const agree = card.parts.find(({ title }) => title === 'Agree beforehand')!.sentences.join(' ');
    for (const word of [
      'Permit',
      'Consent',
      'trips',
      'bypass',
      'Cascade',
      'feed forward',
      'Fail position',
      'air',
      'spring',
      'moving stem',
      'Radio',
      'call the test off',
      'Bumpless',
    ]) {
      expect(agree).toContain(word);
    }
    expect(card.cautions.length).toBeGreaterThan(4);
  });
});
