/** Writes a made loop as a historian exports it: one time column, one column a signal, rounded values, a mode column. */

import type { LoopRun } from '../../src/process/closed-loop';
import { seededRandom } from '../../src/signal/random';

/** What the export needs to know of a loop beside its log. */
export interface ExportedLoop {
  /** Tag under which the loop is logged. */
  readonly tag: string;
  /** s between rows. */
  readonly samplePeriod: number;
  readonly start: string;
  readonly logsTravel: boolean;
  /** Decimals of PV in the export. */
  readonly pvDecimals: number;
}

/** Standard deviation of the position transmitter's noise, % of travel. */
const TRAVEL_NOISE = 0.05;

/** The CSV of a demo loop; `seed` moves the noise of the position transmitter only. */
export function toCsv(
  { demo, run }: { readonly demo: ExportedLoop; readonly run: LoopRun },
  seed: number,
): string {
  const random = seededRandom(seed + 500);
  const begin = Date.parse(demo.start);
  const columns = ['SP', 'PV', 'OP', ...(demo.logsTravel ? ['TRAVEL'] : []), 'MODE'];
  const lines = [['time', ...columns.map((column) => `${demo.tag}.${column}`)].join(',')];
  for (let k = 0; k < run.time.length; k++) {
    const row = [
      new Date(begin + 1000 * run.time[k]).toISOString().replace('.000Z', 'Z'),
      run.sp[k].toFixed(1),
      run.pv[k].toFixed(demo.pvDecimals),
      run.op[k].toFixed(2),
    ];
    if (demo.logsTravel) row.push((run.travel[k] + TRAVEL_NOISE * random.normal()).toFixed(1));
    row.push('AUTO');
    lines.push(row.join(','));
  }
  return `${lines.join('\n')}\n`;
}
