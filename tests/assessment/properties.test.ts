/** What must hold of any assessment: a sine is no valve, and neither clock nor units change what is found. */
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { assessLoop } from '../../src/assessment/assess-loop';
import type { Assessment } from '../../src/assessment/assessment';
import type { Findings } from '../../src/assessment/findings';
import type { LoopRecord } from '../../src/record/loop-record';
import { readLoop } from '../../src/record/read-loop';
import { seededRandom } from '../../src/signal/random';
import { textbookStem } from '../../src/valve/stem';
import { expectClose } from '../closeness';
import { flowLoop, levelLoop } from '../estimate/loops';
import { scratchFolder } from '../scratch-folder';

describe('a pure sine through a linear loop', () => {
  const random = seededRandom(2026);
  const between = (low: number, high: number): number => low * (high / low) ** random.uniform();
  for (let i = 0; i < 12; i++) {
    const integrating = i % 4 === 3;
    const cycle = between(25, 110);
    const phase = 2 * Math.PI * random.uniform();
    const amplitude = between(0.5, 8);
    const noise = between(0.01, 0.4);
    const story =
      `amplitude ${amplitude.toFixed(1)}, ${cycle.toFixed(0)} samples a cycle, phase ${phase.toFixed(1)}, ` +
      `noise ${noise.toFixed(2)}`;
    it(`is not called stiction: ${integrating ? 'level' : 'flow'}, ${story}`, () => {
      const record = integrating
        ? levelLoop({
            samples: 800,
            noise: 0.3 * noise,
            seed: i + 1,
            loop: { inputDisturbances: [{ kind: 'sine', amplitude, period: 5 * cycle, phase }] },
          })
        : flowLoop({
            samples: 800,
            noise,
            seed: i + 1,
            loop: { outputDisturbances: [{ kind: 'sine', amplitude, period: cycle, phase }] },
          });
      const { verdict, reasons } = assessLoop(record).assessment.cause;
      expect(['stiction', 'lost-motion'], reasons.join(' ')).not.toContain(verdict);
    });
  }
});

const drift = [{ kind: 'ima', spread: 0.06, theta: 0.4, every: 1, seed: 21 }] as const;
const sticky = flowLoop({
  valve: textbookStem({ S: 3.2, J: 1.8, actuatorLag: 0.3, startOp: 52 }),
  samples: 1200,
  loop: { outputDisturbances: drift },
});
const found = assessLoop(sticky);

/** Same verdict, and S and J (the drawn ones, should the numbers be refused) `times` those of the sticky loop. */
function expectSame(other: Findings, times: number, relative: number): void {
  expect(other.assessment.cause.verdict).toBe(found.assessment.cause.verdict);
  expect(other.stiction.refused.length).toBe(found.stiction.refused.length);
  const [one, two] = [found.stiction.drawn!, other.stiction.drawn!];
  expectClose(two.S.value, times * one.S.value, { relative }, 'S');
  expectClose(two.jumpDrawn, times * one.jumpDrawn, { relative, absolute: relative * two.S.value }, 'J');
  expect(two.J === null).toBe(one.J === null);
  for (const end of ['low', 'high'] as const) {
    const allowed = { relative: 3 * relative, absolute: relative * two.S.value };
    expectClose(two.S[end], times * one.S[end], allowed, `${end} end of S`);
  }
}

describe('an assessment', () => {
  it('is of a sticking valve here, so that there is something to keep', () => {
    expect(found.assessment.cause.verdict).toBe('stiction');
    expectClose(found.stiction.drawn!.S.value, 3.2, { relative: 0.3 });
  });

  it('does not depend on the unit of PV', () => {
    const inUnit = (convert: (value: number) => number): LoopRecord => ({
      ...sticky,
      pv: sticky.pv.map(convert),
      sp: sticky.sp!.map(convert),
      pvRange: { low: convert(0), high: convert(120) },
    });
    for (const convert of [(value: number) => value / 3.6, (value: number) => 1.8 * value + 32]) {
      const other = assessLoop(inUnit(convert));
      expectSame(other, 1, 1e-6);
      expectClose(
        other.assessment.severity.pvSwing,
        convert(found.assessment.severity.pvSwing) - convert(0),
        { relative: 1e-9 },
      );
    }
  });

  it('scales S and J with OP', () => {
    for (const times of [0.5, 1.7]) {
      const other = assessLoop({ ...sticky, op: sticky.op.map((value) => times * value) });
      expectSame(other, times, 0.02);
    }
  });

  it('does not depend on when it was: all time stamps moved together', () => {
    const [head, ...rows] = readFileSync('data/31-FC-104.csv', 'utf8').trim().split('\n').slice(0, 1201);
    const folder = scratchFolder();
    const from = (shift: number): Assessment => {
      const file = join(folder, '31-FC-104.csv');
      const moved = rows.map((row) => {
        const [time, ...fields] = row.split(',');
        return [new Date(Date.parse(time) + shift).toISOString(), ...fields].join(',');
      });
      writeFileSync(file, [head, ...moved].join('\n'));
      return assessLoop(readLoop(file)).assessment;
    };
    const withoutTime = ({ record, ...rest }: Assessment): string =>
      JSON.stringify({ ...rest, record: { ...record, start: '', sha256: '' } });
    const one = from(0);
    // Across a year's end and a leap day, by a whole number of milliseconds.
    for (const shift of [1000 * 86_400 * 365 * 2 + 12_345_678, -987_654_321_000]) {
      const other = from(shift);
      expect(withoutTime(other)).toBe(withoutTime(one));
      expect(Date.parse(other.record.start) - Date.parse(one.record.start)).toBe(shift);
    }
  });
});
