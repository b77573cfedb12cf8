/** Forecasts, friction as force and comparisons as tables, with units in the column names. */
import { withInterval } from '../assessment/make-answer-card';
import type { RepairComparison } from '../forecast/compare-assessments';
import type { CycleForecast, ForecastResult } from '../forecast/forecast';
import type { FrictionInForce } from '../forecast/friction-in-force';
import type { Table } from '../report/table';
import { tableFrom } from './tables';

/** Every forecast, one a row. Empty when refused. */
export function forecastTable({ forecast, pvUnit }: ForecastResult): Table {
  const row = (what: string, gain: number | null, integralTime: number | null, of: CycleForecast) => ({
    what,
    gain,
    'integral time, s': integralTime,
    'gain margin': of.gainMargin,
    'cycles on in': `${Math.round(100 * of.cyclesIn)} % of rivals`,
    period: of.period ? withInterval(of.period) : 'none',
    'PV swing': withInterval(of.pvSwing),
    'OP swing': withInterval(of.opSwing),
  });
  const rows: ReturnType<typeof row>[] = [];
  if (forecast) {
    const { now, others, withoutIntegral, integralDeadBand, repaired } = forecast;
    rows.push(row('today', now.gain, now.integralTime, now));
    for (const other of others) rows.push(row('other setting', other.gain, other.integralTime, other));
    if (withoutIntegral) rows.push(row('no integral action', withoutIntegral.gain, null, withoutIntegral));
    if (integralDeadBand) {
      const width = Number(integralDeadBand.width.toPrecision(2));
      rows.push(row(`integral dead band ${width} ${pvUnit}`, now.gain, now.integralTime, integralDeadBand));
    }
    rows.push(row(`valve at S = ${repaired.S} %, J = ${repaired.J} %`, now.gain, now.integralTime, repaired));
  }
  const names = [
    'what',
    'gain',
    'integral time, s',
    'gain margin',
    'cycles on in',
    'period',
    'PV swing',
    'OP swing',
  ] as const;
  return tableFrom(
    'Forecasts with 90 % bands; not settings to load, management of change applies',
    names,
    rows,
  );
}

/** S and J as force and pressure, thrust left, and what the stated packing friction would mean. */
export function forceTable(friction: FrictionInForce): Table {
  const rows: { what: string; force: string; pressure: string }[] = [];
  const { spanForce, spanPressure, band, drop, atRest, sliding, thrust, packing } = friction;
  const add = (what: string, force: string, pressure: string = ''): number =>
    rows.push({ what, force, pressure });
  const bare = ({ value, unit }: { value: number; unit: string }): string => `${short(value)} ${unit}`;
  add('signal 0 to 100 %', bare(spanForce), spanPressure ? bare(spanPressure) : '');
  add(
    'S: friction band, up against down',
    withInterval(band.force),
    band.pressure ? withInterval(band.pressure) : '',
  );
  if (drop)
    add(
      'J: drop when the stem lets go',
      withInterval(drop.force),
      drop.pressure ? withInterval(drop.pressure) : '',
    );
  else add('J: drop when the stem lets go', 'not resolved');
  if (atRest) add('friction at rest', withInterval(atRest));
  if (sliding) add('friction while sliding', withInterval(sliding));
  if (thrust) {
    add('spare thrust', bare({ value: thrust.spare, unit: thrust.unit }));
    add('thrust left beside friction', withInterval(thrust.left));
  }
  if (packing) {
    add('the stated packing friction would mean', `S = ${short(packing.S)} %, J = ${short(packing.J)} %`);
  }
  return tableFrom('Friction on this actuator', ['what', 'force', 'pressure'], rows);
}

/** Conditions and results before and after, side by side. */
export function comparisonTable({ rows }: RepairComparison): Table {
  return tableFrom(
    'Side by side',
    ['what', 'before', 'after', 'alike', 'note'],
    rows.map(({ what, before, after, alike, note }) => ({ what, before, after, alike, note })),
  );
}

function short(value: number): string {
  return String(Number(value.toPrecision(3)));
}
