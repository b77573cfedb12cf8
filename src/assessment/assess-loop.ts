/** Walks one loop from record to result: fitness, cycle, evidence, stiction, cause, next steps. */
import { nameCause } from '../cause/name-cause';
import { refuseUnknownOptions } from '../errors';
import { fitStiction } from '../estimate/fit-stiction';
import type { StictionFit } from '../estimate/stiction-fit';
import { runIndicators } from '../evidence/registry';
import type { Cycle } from '../oscillation/cycle';
import { findCycle } from '../oscillation/find-cycle';
import { countReversals } from '../oscillation/reversals';
import { readController } from '../process/read-controller';
import { checkRecord } from '../record/check-record';
import type { LoopRecord } from '../record/loop-record';
import { noiseLevel, rangeOf } from '../signal/statistics';
import { version } from '../version';
import type { Assessment } from './assessment';
import { cautions } from './cautions';
import type { Findings } from './findings';
import { nextSteps } from './next-steps';

export interface AssessOptions {
  /** Dead time between travel and PV, s, when known. Default null: fitted. */
  readonly deadTime?: number | null;
  /** Process gain, PV units per % of OP (integrating: per % and second), when known. Default null: fitted. */
  readonly processGain?: number | null;
  /** Seed of everything random (surrogates). Default 1. */
  readonly seed?: number;
  /** Called before each step, and once when all is done, with its name and the share done, 0..1. */
  readonly onProgress?: (step: string, share: number) => void;
}

/** S below the first is small, from the second on large, % of span. Common practice, no source. */
const sizeLimits = { notable: 1, large: 5 };

/**
 * Assesses one loop. Pure but for `onProgress`: the same record, options and seed give the same bytes.
 *
 * @throws WrongUse for an unknown option or a stated dead time or gain that makes no sense
 */
export function assessLoop(record: LoopRecord, options: AssessOptions = {}): Findings {
  refuseUnknownOptions('assessLoop', options, ['deadTime', 'processGain', 'seed', 'onProgress']);
  const { deadTime = null, processGain = null, seed = 1, onProgress = () => {} } = options;
  onProgress('looking for a cycle', 0);
  const opCycle = findCycle(record.op, record.samplePeriod);
  const pvCycle = findCycle(record.pv, record.samplePeriod);
  onProgress('reading the controller', 0.1);
  const controller = readController(record.sp, record.pv, record.op, record.samplePeriod);
  onProgress('checking the record', 0.2);
  const fitness = checkRecord(record, { opCycle, pvCycle, controller });
  onProgress('running the indicators', 0.25);
  const evidence = fitness.allows.cycle ? runIndicators(record, opCycle, pvCycle, { seed }) : [];
  onProgress('fitting the valve', 0.35);
  const stiction = fitStiction(record, {
    deadTime,
    processGain,
    fitness,
    period: opCycle.period ?? pvCycle.period,
    controller,
  });
  onProgress('naming the cause', 0.95);
  const cause = nameCause({ record, fitness, opCycle, pvCycle, stiction, controller });
  const main = opCycle.present ? opCycle : pvCycle;
  const noise = record.op.length < 3 ? 0 : noiseLevel(record.op);
  const days = (record.op.length * record.samplePeriod) / 86400;
  const S = stiction.fit?.S.value ?? null;
  const assessment: Assessment = {
    schema: 'stickband/assessment/1',
    loop: record.loop,
    service: record.service,
    response: record.response,
    record: {
      source: record.source,
      sha256: record.sha256,
      start: record.start,
      samples: record.op.length,
      samplePeriod: record.samplePeriod,
      notes: record.notes,
    },
    oscillation: {
      present: main.present,
      period: main.period,
      regularity: main.regularity,
      cycles: main.cycles,
      others: main.others,
    },
    evidence,
    controller: controller && {
      form: controller.form,
      gain: controller.gain,
      integralTime: controller.integralTime,
      explains: controller.explains,
    },
    stiction: stiction.fit && shown(stiction.fit),
    stictionRefused: stiction.refused,
    cause,
    severity: {
      size: S === null ? null : S < sizeLimits.notable ? 'small' : S < sizeLimits.large ? 'notable' : 'large',
      pvSwing: swing(pvCycle, record.pv),
      opSwing: swing(opCycle, record.op),
      reversalsPerDay: countReversals(record.op, Math.max(4 * noise, 0.02)).count / days,
    },
    next: nextSteps(cause, fitness.recordToAskFor),
    cautions,
    provenance: { version, options: { deadTime, processGain }, seed },
  };
  onProgress('done', 1);
  return { assessment, record, fitness, opCycle, pvCycle, stiction };
}

function shown(fit: StictionFit): Assessment['stiction'] {
  const { model, travelSource, S, J, explains, notes } = fit;
  return { model, travel: travelSource, S, J, unit: '% of OP span', explains, notes };
}

/** Median peak-to-peak swing over the cycles; without a cycle the whole range. */
function swing(cycle: Cycle, values: Float64Array): number {
  if (cycle.amplitude !== null) return 2 * cycle.amplitude;
  return rangeOf(values);
}
