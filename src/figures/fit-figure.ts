/** Measured and simulated PV over a few cycles, and below them the travel behind both. */
import type { Findings } from '../assessment/findings';
import { duration, withInterval } from '../assessment/make-answer-card';
import { fitCaveats } from './caveats';
import { recordClock } from './clock';
import type { Figure } from './figure';
import { axis, makeFigure, panelName, timeAxis, withUnit } from './layout';
import { lineWidth, palette } from './palette';
import { plain } from './plain-numbers';
import { thin } from './thin';

/** Cycles shown, from the middle of the record; a record with fewer is shown whole. */
const cyclesShown = 8;

/** null when nothing could be fitted. */
export function fitFigure(findings: Findings): Figure | null {
  const { record, opCycle, pvCycle, stiction } = findings;
  const fit = stiction.drawn;
  if (fit === null) return null;
  const { samplePeriod, pv } = record;
  const clock = recordClock(record);
  const period = opCycle.period ?? pvCycle.period;
  const samples = pv.length;
  const wanted =
    period === null ? samples : Math.min(samples, Math.ceil((cyclesShown * period) / samplePeriod) + 1);
  const first = Math.floor((samples - wanted) / 2);
  const shown = (values: Float64Array): { x: string[]; y: (number | null)[] } => {
    const part = values.subarray(first, first + wanted);
    const indices = thin(part);
    return { x: indices.map((i) => clock.at((first + i) * samplePeriod)), y: plain(part, indices) };
  };
  const trace = (name: string, values: Float64Array, yaxis: string, line: object): object => ({
    type: 'scatter',
    mode: 'lines',
    name,
    yaxis,
    ...shown(values),
    line,
    hovertemplate: `%{y:.4g} at %{x}<extra>${name}</extra>`,
  });
  const travelName = fit.travelSource === 'measured' ? 'measured travel' : 'travel, reconstructed';
  const share = (value: number): string => `${Math.round(100 * value)} %`;
  const part =
    wanted < samples
      ? `${cyclesShown} cycles from the middle of the record (${duration((wanted - 1) * samplePeriod)} of ${duration((samples - 1) * samplePeriod)})`
      : 'The whole record';
  return makeFigure({
    id: 'fit',
    title: `${record.loop}: how well the fit follows`,
    caption: `${part}. Over all of it valve and process explain ${share(fit.explainsPv)} of PV's movement, and the fitted valve alone ${share(fit.explains)} of the travel. Look for steps at the same moments and of the same size; a simulated line that is late, or smooth where PV steps, is a fit not to trust.`,
    alt: `Measured and simulated PV of ${record.loop} from ${clock.text(first * samplePeriod)} over ${duration((wanted - 1) * samplePeriod)}; ${share(fit.explainsPv)} of PV's movement explained, ${share(fit.explains)} of the travel.${stiction.fit === null ? '' : ` S ${withInterval(fit.S)}.`}`,
    caveats: fitCaveats(findings),
    data: [
      { ...trace('PV, measured', pv, 'y', { color: palette.pv, width: 5 }), opacity: 0.4 },
      trace('PV, simulated', fit.simulatedPv, 'y', { color: palette.model, width: lineWidth.signal }),
      trace('OP', record.op, 'y2', { color: palette.op, width: lineWidth.thin }),
      { ...trace(travelName, fit.travel, 'y2', { color: palette.travel, width: 5 }), opacity: 0.4 },
      trace('travel, fitted valve', fit.modelTravel, 'y2', { color: palette.model, width: lineWidth.signal }),
    ],
    annotations: [panelName(withUnit('PV', record.pvUnit), 'y'), panelName('OP, % of span; travel, %', 'y2')],
    layout: {
      xaxis: timeAxis(clock, 'y2'),
      yaxis: axis({ domain: [0.55, 1] }),
      yaxis2: axis({ domain: [0, 0.45] }),
    },
    height: 540,
  });
}
