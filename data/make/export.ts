/** Writes a made loop as a historian exports it: one time column, one column a signal, rounded values, a mode column. */
import { seededRandom } from '../../src/signal/random';
import type { MadeDemoLoop } from './demo-loops';

/** Standard deviation of the position transmitter's noise, % of travel. */
const TRAVEL_NOISE = 0.05;

/** The CSV of a demo loop; `seed` moves the noise of the position transmitter only. */
export function toCsv({ demo, run }: MadeDemoLoop, seed: number): string {
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
