/** Plans and readings of valve tests as tables, with units in the column names. */
import { withInterval } from '../assessment/make-answer-card';
import type { Estimate } from '../estimate/stiction-fit';
import type { ValveTestFindings } from '../field-test/read-valve-test';
import type { ValveTestPlan } from '../field-test/valve-test-plan';
import type { Table } from '../report/table';
import { tableFrom } from './tables';

/** Every move of a plan, in order: where OP goes, how, and how long it stands there. */
export function planTable(plan: ValveTestPlan): Table {
  const rows = plan.tests.flatMap(({ kind, moves, startOp }) => {
    let elapsed = 0;
    let last = startOp;
    return moves.map(({ op, rate, hold }, i) => {
      const begins = elapsed;
      elapsed += hold + (rate === null ? 0 : Math.abs(op - last) / rate);
      last = op;
      return {
        test: kind,
        move: i + 1,
        'at, s': begins,
        'OP to, %': op,
        'rate, %/min': rate === null ? null : 60 * rate,
        'hold, s': hold,
      };
    });
  });
  const names = ['test', 'move', 'at, s', 'OP to, %', 'rate, %/min', 'hold, s'] as const;
  return tableFrom('Every move, as proposed and not released', names, rows);
}

/** One row a test: what each of several tests says. */
export function testTable(tests: readonly ValveTestFindings[]): Table {
  const text = (one: Estimate | null): string => (one ? withInterval(one) : 'not resolved');
  const rows = tests.map(({ reading, record, hold }) => ({
    test: reading.kind,
    record: record.source,
    'what it says': hold
      ? `the cycle ${{ died: 'died', stayed: 'stayed', 'not-decided': 'neither died nor stayed' }[hold.outcome]}`
      : `dead band ${text(reading.deadBand)}`,
    resolution: hold ? null : text(reading.resolution),
  }));
  return tableFrom(
    'The tests side by side, with 90 % intervals',
    ['test', 'record', 'what it says', 'resolution'],
    rows,
  );
}

/** The records of tests, with their fingerprints. */
export function testFileTable(tests: readonly ValveTestFindings[]): Table {
  const rows = tests.map(({ record }) => ({
    record: record.source,
    'first sample': record.start,
    samples: record.op.length,
    'seconds between': record.samplePeriod,
    'SHA-256': record.sha256,
  }));
  return tableFrom(
    'Records of tests',
    ['record', 'first sample', 'samples', 'seconds between', 'SHA-256'],
    rows,
  );
}

/** Every step of a step test: whether it moved the valve, by how much, and how fast. */
export function stepTable({ reading }: ValveTestFindings): Table {
  const value = (one: Estimate | null): number | null => one?.value ?? null;
  const rows = reading.steps.map(
    ({ time, from, to, reversal, moved, change, deadTime, T63, T86, overshoot, note }) => ({
      'at, s': time,
      'from, %': from,
      'to, %': to,
      reversal,
      moved,
      change: value(change),
      'dead time, s': value(deadTime),
      'T63, s': value(T63),
      'T86, s': value(T86),
      'overshoot, %': value(overshoot),
      note,
    }),
  );
  const names = [
    'at, s',
    'from, %',
    'to, %',
    'reversal',
    'moved',
    'change',
    'dead time, s',
    'T63, s',
    'T86, s',
    'overshoot, %',
    'note',
  ] as const;
  return tableFrom('Every step', names, rows);
}

/** The measured points of friction against speed; empty where the curve is not resolved. */
export function frictionTable({ friction }: ValveTestFindings): Table {
  const rows = (friction?.curve?.points ?? []).map(({ speed, force, low, high }) => ({
    'speed, mm/s': 1000 * speed,
    'friction, N': force,
    'low, N': low,
    'high, N': high,
  }));
  return tableFrom(
    'Friction against speed, with 90 % intervals',
    ['speed, mm/s', 'friction, N', 'low, N', 'high, N'],
    rows,
  );
}

/** The laws that were tried on the friction curve, plainest first, and which was taken. */
export function frictionLawTable({ friction }: ValveTestFindings): Table {
  const curve = friction?.curve;
  const rows = (curve?.laws ?? []).map((law) => ({
    law: law.law,
    'numbers fitted': law.parameters,
    'static, N': law.static,
    'coulomb, N': law.coulomb,
    'viscous, N s/m': law.viscous,
    'Stribeck speed, mm/s': law.stribeckSpeed === null ? null : 1000 * law.stribeckSpeed,
    criterion: law.criterion,
    taken: law === curve!.chosen,
  }));
  const names = [
    'law',
    'numbers fitted',
    'static, N',
    'coulomb, N',
    'viscous, N s/m',
    'Stribeck speed, mm/s',
    'criterion',
    'taken',
  ] as const;
  return tableFrom('Laws tried, plainest first; a lower criterion is better', names, rows);
}
