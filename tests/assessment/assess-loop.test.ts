import Ajv from 'ajv';
import { describe, expect, it } from 'vitest';
import { type AssessOptions, assessLoop } from '../../src/assessment/assess-loop';
import schema from '../../src/assessment/assessment.schema.json';
import { cautions } from '../../src/assessment/cautions';
import type { Findings } from '../../src/assessment/findings';
import { WrongUse } from '../../src/errors';
import type { LoopRecord } from '../../src/record/loop-record';
import { createTwoParameterValve } from '../../src/valve/two-parameter-steps';
import { version } from '../../src/version';
import { expectClose } from '../closeness';
import { flowLoop, numbersOf } from '../estimate/loops';

const validate = new Ajv({ allErrors: true, strict: true, allowUnionTypes: true }).compile(schema);

/** Numbers anywhere in a value, with the way to them. */
function numbersIn(value: unknown, path = ''): [string, number][] {
  if (typeof value === 'number') return [[path, value]];
  if (value === null || typeof value !== 'object') return [];
  return Object.entries(value).flatMap(([key, inner]) => numbersIn(inner, `${path}.${key}`));
}

const valve = () => createTwoParameterValve({ S: 3, J: 2, start: 52 });
const sticky = flowLoop({ valve: valve(), samples: 1000 });
const steps: [string, number][] = [];
const found = assessLoop(sticky, { onProgress: (step, share) => steps.push([step, share]) });

const shortened = (record: LoopRecord, samples: number): LoopRecord => ({
  ...record,
  pv: record.pv.slice(0, samples),
  sp: record.sp?.slice(0, samples) ?? null,
  op: record.op.slice(0, samples),
});

/** Loops that end in different ways, unfit ones among them. */
const others: Record<string, LoopRecord> = {
  'a linear loop shaken from outside': flowLoop({
    samples: 800,
    loop: { outputDisturbances: [{ kind: 'sine', amplitude: 3, period: 60 }] },
  }),
  'a quiet loop': flowLoop({ samples: 800 }),
  'twenty samples': shortened(sticky, 20),
  'two samples': shortened(sticky, 2),
  'a constant OP': { ...sticky, op: new Float64Array(1000).fill(50) },
  'a constant PV': { ...sticky, pv: new Float64Array(1000).fill(60) },
  'no set point': { ...shortened(sticky, 600), sp: null },
  'measured travel': flowLoop({ valve: valve(), samples: 800, travelLogged: true }),
};

function expectWhole(name: string, findings: Findings): void {
  const { assessment } = findings;
  // As it is written: JSON would turn NaN into null silently, so the numbers are looked at first.
  for (const [path, value] of numbersIn(assessment)) {
    expect(Number.isFinite(value), `${name}: ${path} is ${value}`).toBe(true);
  }
  validate(JSON.parse(JSON.stringify(assessment)));
  expect(validate.errors ?? [], name).toEqual([]);
  expect(assessment.cautions).toEqual(cautions);
  if (assessment.stiction === null) expect(assessment.stictionRefused.length, name).toBeGreaterThan(0);
  if (assessment.cause.verdict === 'cannot-tell') {
    expect(assessment.cause.confidence).toBeNull();
    expect(assessment.next[0].do).toBe(findings.fitness.recordToAskFor);
  }
  expect(assessment.cause.reasons.length, name).toBeGreaterThan(0);
}

describe('assessLoop', () => {
  it('accuses the sticking valve and puts together what it found', () => {
    expectWhole('sticky', found);
    const { assessment, stiction, opCycle } = found;
    expect(assessment.cause.verdict).toBe('stiction');
    expectClose(assessment.stiction!.S.value, 3, { relative: 0.1 });
    expect(assessment.stiction).toMatchObject({ S: stiction.fit!.S, J: stiction.fit!.J });
    expect(assessment.oscillation).toMatchObject({ present: true, period: opCycle.period });
    expect(assessment.evidence.length).toBeGreaterThanOrEqual(9);
    expect(assessment.controller!.form).toBe('PI');
    expect(assessment.record.samples).toBe(1000);
    expect(assessment.severity.size).toBe('notable');
    const swing = Math.max(...sticky.op) - Math.min(...sticky.op);
    expect(assessment.severity.opSwing).toBeGreaterThan(0.5 * swing);
    expect(assessment.severity.opSwing).toBeLessThanOrEqual(swing);
    // Two reversals a cycle.
    const cyclesADay = 86_400 / assessment.oscillation.period!;
    expectClose(assessment.severity.reversalsPerDay, 2 * cyclesADay, { relative: 0.3 });
  });

  for (const [name, record] of Object.entries(others)) {
    it(`gives a whole assessment, each number finite, for ${name}`, () => {
      expectWhole(name, assessLoop(record));
    });
  }

  it('cannot tell anything from a record that answers nothing, and has no numbers for it', () => {
    for (const name of ['two samples', 'twenty samples', 'a constant OP', 'a constant PV']) {
      const { assessment } = assessLoop(others[name]);
      expect(assessment.cause.verdict, name).toBe('cannot-tell');
      expect(assessment.stiction, name).toBeNull();
      expect(assessment.severity.size, name).toBeNull();
    }
  });

  it('tells its progress: each step by name before it is done, the share rising from 0 to 1', () => {
    expect(steps[0][1]).toBe(0);
    expect(steps[steps.length - 1]).toEqual(['done', 1]);
    for (let i = 1; i < steps.length; i++) expect(steps[i][1]).toBeGreaterThan(steps[i - 1][1]);
    const place = (word: RegExp) => steps.findIndex(([step]) => word.test(step));
    const order = [/cycle/, /controller/, /record/, /indicators/, /valve/, /cause/].map(place);
    expect(order).toEqual([...order].sort((a, b) => a - b));
    expect(order[0]).toBe(0);
  });

  it('gives the same bytes for the same record, options and seed, and leaves the record alone', () => {
    const before = numbersOf(sticky);
    const again = assessLoop(Object.freeze({ ...sticky }), Object.freeze({}));
    expect(JSON.stringify(again)).toBe(JSON.stringify(found));
    expect(numbersOf(sticky)).toEqual(before);
  });

  it('keeps its options, its seed and its version as provenance, and no time of the run', () => {
    const { provenance } = assessLoop(shortened(sticky, 300), { deadTime: 2, seed: 7 }).assessment;
    expect(provenance).toEqual({ version, options: { deadTime: 2, processGain: null }, seed: 7 });
  });

  it('refuses an option that it does not know', () => {
    expect(() => assessLoop(sticky, { dead: 1 } as AssessOptions)).toThrow(WrongUse);
    expect(() => assessLoop(sticky, { dead: 1 } as AssessOptions)).toThrow(/"dead"/);
  });
});
