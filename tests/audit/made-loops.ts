/** Finished loops of an audit made from given swings, without the estimator: for grouping and ranking alone. */
import type { Assessment, Verdict } from '../../src/assessment/assessment';
import { cautions } from '../../src/assessment/cautions';
import type { FinishedLoop } from '../../src/audit/audit';
import { loopSignature } from '../../src/audit/signature';
import { findCycle } from '../../src/oscillation/find-cycle';
import type { Range } from '../../src/record/loop-record';
import { seededRandom } from '../../src/signal/random';
import { record } from '../evidence/loops';

export interface MadeLoop {
  readonly loop: string;
  /** s; null: PV is noise about a constant. Default 60. */
  readonly period?: number | null;
  readonly samples?: number;
  /** s. Default 2. */
  readonly samplePeriod?: number;
  /** Default 2026-03-10T06:00:00Z. */
  readonly start?: string;
  /** s by which the swing comes later than that of a loop without delay. */
  readonly delay?: number;
  /** s since the start until which PV is quiet. */
  readonly quietUntil?: number;
  /** Standard deviation of the noise; the swing has amplitude 1. Default 0.1. */
  readonly noise?: number;
  /** Share of a third harmonic. */
  readonly corners?: number;
  readonly seed?: number;
  readonly verdict?: Verdict;
  readonly confidence?: number | null;
  readonly S?: number | null;
  readonly surrogate?: number;
  readonly pvSwing?: number;
  readonly pvRange?: Range | null;
  readonly reversalsPerDay?: number;
}

export function madeLoop(made: MadeLoop): FinishedLoop {
  const { loop, period = 60, samples = 1200, samplePeriod = 2, delay = 0, quietUntil = 0 } = made;
  const { noise = 0.1, corners = 0, seed = 1, verdict = 'cannot-tell', S = null, surrogate } = made;
  const { start = '2026-03-10T06:00:00Z', pvRange = null, pvSwing = 2, reversalsPerDay = 1000 } = made;
  const random = seededRandom(seed);
  const begin = Date.parse(start) / 1000;
  const pv = new Float64Array(samples).map((_, k) => {
    const time = begin + k * samplePeriod - delay;
    const wave =
      period === null || k * samplePeriod < quietUntil
        ? 0
        : Math.sin((2 * Math.PI * time) / period) + corners * Math.sin((6 * Math.PI * time) / period);
    return wave + noise * random.normal();
  });
  const op = pv.map((value) => -value);
  const loopRecord = { ...record({ op, pv, samplePeriod }), loop, start, pvRange, pvUnit: 'm3/h' };
  const pvCycle = findCycle(pv, samplePeriod);
  const assessment: Assessment = {
    schema: 'stickband/assessment/1',
    loop,
    service: 'flow',
    response: 'self-regulating',
    record: { source: `${loop}.csv`, sha256: '0'.repeat(64), start, samples, samplePeriod, notes: [] },
    oscillation: {
      present: pvCycle.present,
      period: pvCycle.period,
      regularity: pvCycle.regularity,
      cycles: pvCycle.cycles,
      others: [],
    },
    evidence:
      surrogate === undefined
        ? []
        : [
            {
              indicator: 'surrogate test',
              value: surrogate,
              threshold: '',
              says: surrogate > 1 ? 'stiction' : 'not',
              why: '',
              source: '',
            },
          ],
    controller: null,
    stiction:
      S === null
        ? null
        : {
            model: 'slides-on',
            travel: 'reconstructed',
            S: { value: S, low: 0.9 * S, high: 1.1 * S, unit: '% of OP span' },
            J: null,
            unit: '% of OP span',
            explains: 0.9,
            notes: [],
          },
    stictionRefused: [],
    cause: {
      verdict,
      confidence: made.confidence === undefined ? (verdict === 'cannot-tell' ? null : 0.9) : made.confidence,
      reasons: [],
      ruledOut: [],
      also: [],
    },
    severity: { size: null, pvSwing, opSwing: 2, reversalsPerDay },
    next: [],
    cautions,
    provenance: { version: '0', options: {}, seed: 1 },
  };
  const findings = { record: loopRecord, pvCycle, opCycle: findCycle(op, samplePeriod), assessment };
  return {
    order: 0,
    file: `${loop}.csv`,
    result: assessment,
    signature: loopSignature(findings),
  };
}

export function failedLoop(loop: string): FinishedLoop {
  const result = {
    schema: 'stickband/failed-loop/1',
    loop,
    file: `${loop}.csv`,
    error: 'It is empty.',
  } as const;
  return { order: 0, file: result.file, result, signature: null };
}
