/** Loop records made from given signals, and what the indicators need of them. */

import type { Indicator, Reading } from '../../src/evidence/indicator';
import { type LoopFacts, loopFacts } from '../../src/evidence/loop-facts';
import { findCycle } from '../../src/oscillation/find-cycle';
import type { LoopRecord, Response, Service } from '../../src/record/loop-record';
import { seededRandom } from '../../src/signal/random';

export interface LoopSignals {
  readonly op: Float64Array;
  readonly pv: Float64Array;
  readonly sp?: Float64Array | null;
  readonly response?: Response;
  readonly service?: Service;
  readonly samplePeriod?: number;
}

export function record(signals: LoopSignals): LoopRecord {
  const { op, pv, sp = null, response = 'self-regulating', service = 'flow', samplePeriod = 2 } = signals;
  return {
    loop: '31-FC-104',
    service,
    response,
    source: 'made.csv',
    sha256: '0'.repeat(64),
    start: '2024-01-01T00:00:00Z',
    samplePeriod,
    pv,
    sp,
    op,
    travel: null,
    pvUnit: '',
    pvRange: null,
    logging: {
      rows: op.length,
      duplicates: 0,
      gaps: 0,
      longestGap: 0,
      manualShare: 0,
      badShare: 0,
      filledShare: 0,
      skew: 0,
      modeLogged: false,
      keptShare: 1,
    },
    notes: [],
  };
}

export function facts(signals: LoopSignals): LoopFacts {
  const made = record(signals);
  const found = loopFacts(
    made,
    findCycle(made.op, made.samplePeriod),
    findCycle(made.pv, made.samplePeriod),
    1,
  );
  if (found === null) throw new Error('the test signals do not cycle');
  return found;
}

/** What the indicator reads where it must apply. */
export function read(indicator: Indicator, signals: LoopSignals): Reading {
  const found = facts(signals);
  const reading = indicator.skips(found) ?? indicator.evaluate(found);
  if (typeof reading === 'string') throw new Error(`skipped: ${reading}`);
  return reading;
}

/** cos(2 pi i / period + phase), amplitude 1, with white noise. */
export function cosine(samples: number, period: number, phase = 0, noise = 0, seed = 1): Float64Array {
  const random = seededRandom(seed);
  return new Float64Array(samples).map(
    (_, i) => Math.cos((2 * Math.PI * i) / period + phase) + noise * random.normal(),
  );
}
