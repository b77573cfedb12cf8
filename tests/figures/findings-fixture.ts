/** Findings of an invented loop, built without the estimator so that figures can be tested alone. */
import { expect } from 'vitest';
import type { Evidence, Verdict } from '../../src/assessment/assessment';
import { cautions } from '../../src/assessment/cautions';
import type { Findings } from '../../src/assessment/findings';
import type { StictionFit } from '../../src/estimate/stiction-fit';
import type { Figure } from '../../src/figures/figure';
import type { Cycle } from '../../src/oscillation/cycle';
import type { FitnessCheck } from '../../src/record/fitness';
import type { Note } from '../../src/record/loop-record';
import { seededRandom } from '../../src/signal/random';
import { twoParameterValve } from '../../src/valve/two-parameter';

export interface FixtureOptions {
  samples?: number;
  samplePeriod?: number;
  start?: string;
  measuredTravel?: boolean;
  setPointLogged?: boolean;
  verdict?: Verdict;
  /** `none`: nothing could be fitted; `refused`: a fit to draw, but its numbers withheld. */
  fit?: 'given' | 'refused' | 'none';
  model?: 'slides-on' | 'sticks-again';
  jumpResolved?: boolean;
  evidence?: readonly Evidence[];
  notes?: readonly Note[];
  checks?: readonly FitnessCheck[];
  loop?: string;
}

/** What every figure owes: plain JSON with finite numbers, words for those who cannot see it, and its own look. */
export function expectSound(figure: Figure | null): asserts figure is Figure {
  expect(figure).not.toBeNull();
  const { data, layout, caption, alt, title } = figure!;
  expect(JSON.parse(JSON.stringify({ data, layout }))).toEqual({ data, layout });
  for (const text of [title, caption, alt]) {
    expect(text.length).toBeGreaterThan(10);
    expect(text).not.toMatch(/undefined|NaN|Infinity|null/);
  }
  for (const trace of data as { x: unknown[]; y: unknown[] }[]) {
    expect(Array.isArray(trace.x) && Array.isArray(trace.y)).toBe(true);
    expect(trace.x.length).toBeLessThanOrEqual(2000);
  }
}

type Trace<X> = { x: X[]; y: number[] } & Record<string, unknown>;

/** The trace of a figure with this name; `X` is what its horizontal axis holds. */
export function traceOf<X = number>(figure: Figure, name: string): Trace<X> {
  const found = (figure.data as { name?: string }[]).find((trace) => trace.name === name);
  expect(found, `trace "${name}"`).toBeDefined();
  return found as Trace<X>;
}

export const S = 3.2;
export const J = 1.1;
/** Period of the fixture's cycle, s. */
export const period = 96;

/** OP as a noisy triangle of half swing 3 % about 46 %, through the valve and a first-order lag to PV in m3/h. */
export function fixtureFindings(options: FixtureOptions = {}): Findings {
  const {
    samples = 3600,
    samplePeriod = 1,
    start = '2031-03-05T06:00:00+01:00',
    measuredTravel = false,
    setPointLogged = true,
    verdict = 'stiction',
    fit: fitKind = 'given',
    model = 'slides-on',
    jumpResolved = true,
    evidence = fixtureEvidence,
    notes = [],
    checks = [],
    loop = '31-FC-104',
  } = options;
  const random = seededRandom(7);
  const op = Float64Array.from({ length: samples }, (_, k) => {
    const phase = ((k * samplePeriod) / period) % 1;
    return 46 + 3 * (4 * Math.abs(phase - 0.5) - 1) + 0.02 * random.normal();
  });
  const modelTravel = twoParameterValve(op, { S, J, model });
  const travel = modelTravel.map((value) => value + 0.08 * random.normal());
  const simulatedPv = new Float64Array(samples);
  const keep = Math.exp(-samplePeriod / 6);
  let flow = 2.4 * modelTravel[0]!;
  for (let k = 0; k < samples; k++) {
    flow = keep * flow + (1 - keep) * 2.4 * modelTravel[k]!;
    simulatedPv[k] = flow;
  }
  const pv = simulatedPv.map((value, k) => value + 0.15 * random.normal() + 0.4 * Math.sin(k / 700));
  const slips = [];
  for (let k = 1; k < samples; k++) {
    const size = modelTravel[k]! - modelTravel[k - 1]!;
    if (Math.abs(size) > 0.5 * J) slips.push({ sample: k, time: k * samplePeriod, size });
  }
  const estimate = (value: number, half: number) => ({
    value,
    low: value - half,
    high: value + half,
    unit: '%',
  });
  const mapS = Array.from({ length: 28 }, (_, i) => 1 + (5.4 * i) / 27);
  const mapJ = Array.from({ length: 21 }, (_, i) => (2.4 * i) / 20);
  const fit: StictionFit = {
    model,
    travelSource: measuredTravel ? 'measured' : 'reconstructed',
    S: estimate(S, 0.3),
    J: jumpResolved ? estimate(J, 0.35) : null,
    jumpDrawn: J,
    explains: 0.93,
    explainsPv: 0.88,
    notes: [],
    travel,
    modelTravel,
    simulatedPv,
    slips,
    map: {
      S: mapS,
      J: mapJ,
      misfit: mapJ.map((j) =>
        mapS.map((s) =>
          j > s
            ? null
            : Math.min(1, 0.12 + 0.06 * (s - S) ** 2 + 0.12 * (j - J) ** 2 + 0.05 * (s - S) * (j - J)),
        ),
      ),
    },
    process: { response: 'self-regulating', gain: 2.4, lag: 6, deadTime: 1 },
  };
  const cycle = fixtureCycle(samples, samplePeriod);
  const refused = fitKind === 'given' ? [] : ['the element explains less than half of the travel.'];
  return {
    assessment: {
      schema: 'stickband/assessment/1',
      loop,
      service: 'flow',
      response: 'self-regulating',
      record: { source: 'fixture.csv', sha256: '0'.repeat(64), start, samples, samplePeriod, notes },
      oscillation: { present: true, period, regularity: 4.2, cycles: cycle.cycles, others: cycle.others },
      evidence,
      controller: { form: 'PI', gain: 0.4, integralTime: 20, explains: 0.97 },
      stiction:
        fitKind === 'given'
          ? {
              model,
              travel: fit.travelSource,
              S: fit.S,
              J: fit.J,
              unit: '% of OP span',
              explains: fit.explains,
              notes: [],
            }
          : null,
      stictionRefused: refused,
      cause: {
        verdict,
        confidence: verdict === 'cannot-tell' ? null : 0.9,
        reasons: [
          'The record was compressed before it was stored, and its straight pieces imitate stiction.',
        ],
        ruledOut: [],
        also: [],
      },
      severity: { size: 'notable', pvSwing: 9.8, opSwing: 6, reversalsPerDay: 1800 },
      next: [],
      cautions,
      provenance: { version: '0.0.0', options: {}, seed: 1 },
    },
    record: {
      loop,
      service: 'flow',
      response: 'self-regulating',
      source: 'fixture.csv',
      sha256: '0'.repeat(64),
      start,
      samplePeriod,
      pv,
      sp: setPointLogged ? new Float64Array(samples).fill(110) : null,
      op,
      travel: measuredTravel ? travel : null,
      pvUnit: 'm3/h',
      pvRange: { low: 0, high: 200 },
      logging: {
        rows: samples,
        duplicates: 0,
        gaps: 0,
        longestGap: 0,
        manualShare: 0,
        badShare: 0,
        filledShare: 0,
        skew: 0,
        modeLogged: true,
        keptShare: 1,
      },
      notes,
    },
    fitness: {
      checks,
      allows: { cycle: true, cause: true, numbers: fitKind === 'given' },
      recordToAskFor: 'Ask for an uncompressed record.',
    },
    opCycle: cycle,
    pvCycle: cycle,
    stiction: {
      fit: fitKind === 'given' ? fit : null,
      drawn: fitKind === 'none' ? null : fit,
      refused,
      test: null,
    },
  };
}

function fixtureCycle(samples: number, samplePeriod: number): Cycle {
  const lags = Math.floor(samples / 2);
  const frequency = Float64Array.from({ length: lags }, (_, i) => i / (samples * samplePeriod));
  const peak = (at: number, f: number, height: number): number =>
    height * Math.exp(-(((f - at) * samples * samplePeriod) ** 2) / 4);
  return {
    present: true,
    why: `Zero crossings of the autocorrelation repeat every ${period} s.`,
    period,
    regularity: 4.2,
    cycles: Math.floor((samples * samplePeriod) / period),
    others: [620],
    amplitude: 3,
    oddHarmonicShare: 0.1,
    powerShare: 0.8,
    single: [],
    autocorrelation: {
      lag: Float64Array.from({ length: lags }, (_, i) => i * samplePeriod),
      value: Float64Array.from({ length: lags }, (_, i) => {
        const lag = i * samplePeriod;
        return Math.cos((2 * Math.PI * lag) / period) * Math.exp(-lag / (8 * period));
      }),
    },
    spectrum: {
      frequency,
      power: frequency.map(
        (f) => peak(1 / period, f, 100) + peak(3 / period, f, 9) + peak(1 / 620, f, 14) + 0.2 / (1 + 50 * f),
      ),
    },
  };
}

const fixtureEvidence: readonly Evidence[] = (
  [
    ['area ratio of half cycles', 1.42, 'above 1 stiction', 'stiction'],
    ['sine against triangle', 0.71, 'from 0.6 stiction, up to 0.4 not', 'stiction'],
    ['cross-correlation of OP and PV', 0.45, '1/3 to 2/3 undecided', 'undecided'],
    ['shape pairs of OP and PV', 0.18, 'above 0.25 stiction', 'not'],
    ['surrogates', null, 'above 1 nonlinear', 'skipped'],
  ] as const
).map(([indicator, value, threshold, says]) => ({
  indicator,
  value,
  threshold,
  says,
  why: says === 'skipped' ? 'Fewer than 12 cycles in the record.' : 'As the threshold has it.',
  source: 'fixture',
}));
