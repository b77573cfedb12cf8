/**
 * Measures the forecasts: `npx tsx tests/accuracy/forecast.ts [--seed N] [--loops N]`. From one record each of so many
 * stem loops the cycle is forecast at four other settings and with the valve repaired; the true loop is then run so.
 * Prints a line a loop and change and the shares that are right.
 */
import { parseArgs } from 'node:util';
import { assessLoop } from '../../src/assessment/assess-loop';
import { measureCycle, swingWithin } from '../../src/forecast/cycle-measure';
import type { CycleForecast } from '../../src/forecast/forecast';
import { forecastCycle } from '../../src/forecast/forecast-cycle';
import { findCycle } from '../../src/oscillation/find-cycle';
import { countReversals } from '../../src/oscillation/reversals';
import { wholeOption } from '../command-options';
import { CHANGES, type ForecastLoop, makeForecastLoop, type TrueChange } from './forecast-loops';
import { type Rate, rate } from './score';

export interface ForecastOutcome {
  readonly loop: string;
  readonly change: string;
  readonly true: { readonly period: number | null; readonly pvSwing: number; readonly regular: boolean };
  readonly forecast: CycleForecast;
}

/** Fewest turns of the true stem for an uneven hunting to count as a cycle, and the least turn over the built J. */
const hunting = { turns: 20, leastTurn: 0.25 };

/**
 * What the true loop does at a change. Where it has no regular cycle but the stem still goes to and fro, the median
 * time between turns counts as the period; where the stem rests, PV's movement within one period of the record counts.
 */
export function truthOf(loop: ForecastLoop, change: TrueChange): ForecastOutcome['true'] {
  const { pv, op, travel } = loop.run(change);
  const { samplePeriod } = loop.record;
  const opCycle = findCycle(op, samplePeriod);
  const pvCycle = findCycle(pv, samplePeriod);
  const cycle = opCycle.present ? opCycle : pvCycle;
  if (cycle.present) {
    return { period: cycle.period, pvSwing: 2 * (pvCycle.amplitude ?? cycle.amplitude!), regular: true };
  }
  const turns = countReversals(travel, hunting.leastTurn * loop.assembly.J).count;
  const uneven = change.repaired || turns < hunting.turns ? null : measureCycle(pv, op, samplePeriod);
  return uneven === null
    ? { period: null, pvSwing: swingWithin(pv, loop.period, samplePeriod), regular: false }
    : { period: uneven.period, pvSwing: uneven.pvSwing, regular: false };
}

/** Forecasts of a loop at every change beside the truth; null with the reasons where they were refused. */
export function outcomesOf(loop: ForecastLoop): { outcomes: ForecastOutcome[]; refused: readonly string[] } {
  const findings = assessLoop(loop.record);
  const controller = findings.assessment.controller;
  const others = CHANGES.filter(({ repaired }) => !repaired);
  const { forecast, refused } = forecastCycle(findings, {
    settings: others.map(({ gain, integralTime }) => ({
      gain: Math.abs(controller?.gain ?? 1) * gain,
      integralTime: (controller?.integralTime ?? 1) * integralTime,
    })),
    mapGains: [1],
    mapIntegralTimes: [1],
  });
  if (forecast === null) return { outcomes: [], refused };
  const outcomes = CHANGES.map((change) => ({
    loop: loop.id,
    change: change.name,
    true: truthOf(loop, change),
    forecast: change.repaired ? forecast.repaired : forecast.others[others.indexOf(change)]!,
  }));
  return { outcomes, refused };
}

export interface ForecastScore {
  readonly period: Rate;
  readonly swing: Rate;
  readonly periodHeld: Rate;
  readonly swingHeld: Rate;
  /** Whether it goes on cycling. */
  readonly cycles: Rate;
}

/** A period is right within 25 %, a swing within 30 %; where nothing cycles, when that was said. */
export function scoreForecasts(outcomes: readonly ForecastOutcome[]): ForecastScore {
  const holds = ({ low, high }: { low: number; high: number }, value: number): boolean =>
    low <= value && value <= high;
  const of = (rows: readonly ForecastOutcome[], hit: (row: ForecastOutcome) => boolean): Rate =>
    rate(rows.filter(hit).length, rows.length);
  const both = outcomes.filter((row) => row.true.period !== null && row.forecast.period !== null);
  return {
    period: of(outcomes, ({ true: { period }, forecast }) =>
      period === null || forecast.period === null
        ? (period === null) === (forecast.period === null)
        : Math.abs(forecast.period.value / period - 1) <= 0.25,
    ),
    swing: of(
      outcomes,
      ({ true: { pvSwing }, forecast }) => Math.abs(forecast.pvSwing.value / pvSwing - 1) <= 0.3,
    ),
    periodHeld: of(both, (row) => holds(row.forecast.period!, row.true.period!)),
    swingHeld: of(outcomes, (row) => holds(row.forecast.pvSwing, row.true.pvSwing)),
    cycles: of(outcomes, (row) => (row.true.period !== null) === row.forecast.cycles),
  };
}

function measure(): void {
  const { values } = parseArgs({
    options: { seed: { type: 'string', default: '61000000' }, loops: { type: 'string', default: '12' } },
  });
  const wanted = wholeOption('loops', values.loops);
  const outcomes: ForecastOutcome[] = [];
  const say = (line: string): boolean => process.stdout.write(`${line}\n`);
  let forecast = 0;
  let index = 0;
  for (; forecast < wanted; index++) {
    const loop = makeForecastLoop(wholeOption('seed', values.seed), index);
    const { outcomes: found, refused } = outcomesOf(loop);
    if (refused.length > 0) {
      say(`${loop.id} ${loop.service}: refused. ${refused[0]}`);
      continue;
    }
    forecast++;
    for (const row of found) {
      const off = (value: number | undefined, truth: number | null): string =>
        value === undefined || truth === null ? '-' : `${(100 * (value / truth - 1)).toFixed(0)} %`;
      say(
        `${loop.id} ${loop.service} ${row.change}: period ${row.true.period?.toFixed(1) ?? 'none'}${row.true.period !== null && !row.true.regular ? ' (uneven)' : ''} ` +
          `(${off(row.forecast.period?.value, row.true.period)}), PV swing ${row.true.pvSwing.toFixed(2)} ` +
          `(${off(row.forecast.pvSwing.value, row.true.pvSwing)}; ${row.forecast.pvSwing.low.toFixed(2)} to ${row.forecast.pvSwing.high.toFixed(2)})`,
      );
    }
    outcomes.push(...found);
  }
  const told = ({ hits, of, share }: Rate): string =>
    `${hits} of ${of}${share === null ? '' : ` (${(100 * share).toFixed(0)} %)`}`;
  const print = (title: string, rows: readonly ForecastOutcome[]): void => {
    const score = scoreForecasts(rows);
    say(`\n${title}`);
    for (const [name, value] of Object.entries(score)) say(`  ${name}: ${told(value)}`);
  };
  say(`\n${forecast} loops forecast, ${index - forecast} refused`);
  print('all', outcomes);
  for (const { name } of CHANGES)
    print(
      name,
      outcomes.filter(({ change }) => change === name),
    );
}

if (require.main === module) measure();
