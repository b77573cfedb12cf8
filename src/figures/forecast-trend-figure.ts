/** A few cycles as recorded, as simulated today, and as simulated with the valve repaired. */
import { duration } from '../assessment/make-answer-card';
import type { ForecastResult } from '../forecast/forecast';
import type { LoopRecord } from '../record/loop-record';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName, withUnit } from './layout';
import { lineWidth, palette } from './palette';
import { plain } from './plain-numbers';
import { thin } from './thin';

/** null when the forecast was refused. */
export function forecastTrendFigure(result: ForecastResult, record: LoopRecord): Figure | null {
  const { forecast, loop, pvUnit } = result;
  if (forecast === null) return null;
  const { traces } = forecast;
  const seconds = traces.now.pv.length * traces.step;
  const samples = Math.min(record.pv.length, Math.round(seconds / record.samplePeriod));
  const part = (values: Float64Array): Float64Array => values.subarray(0, samples);
  const minutes = seconds >= 300;
  const perUnit = minutes ? 60 : 1;
  const line = (
    values: ArrayLike<number>,
    step: number,
    y: string,
    look: { name: string; color: string; width: number; dash?: string },
  ): object => {
    const kept = thin(values);
    return {
      type: 'scatter',
      mode: 'lines',
      name: look.name,
      showlegend: y === 'y',
      yaxis: y,
      x: plain(kept.map((k) => (k * step) / perUnit)),
      y: plain(values, kept),
      line: { color: look.color, width: look.width, ...(look.dash ? { dash: look.dash } : {}) },
      hovertemplate: '%{y:.4g}<extra></extra>',
    };
  };
  const recorded = (color: string): { name: string; color: string; width: number } => ({
    name: 'record',
    color,
    width: lineWidth.signal,
  });
  const today = { name: 'simulated today', color: palette.model, width: lineWidth.signal };
  const later = {
    name: 'simulated, valve repaired',
    color: palette.ink,
    width: lineWidth.signal,
    dash: '5px,3px',
  };
  return makeFigure({
    id: 'forecast-trend',
    title: `${loop}: recorded and simulated`,
    caption: `The first ${duration(seconds)} of the record, and the simulated loop over as long. Phase is by chance and noise is drawn anew, so compare period, height and shape, not moments.`,
    alt: `PV and OP of ${loop} as recorded, as simulated today and as simulated with the valve repaired, ${duration(seconds)} each.`,
    caveats: ['Forecast from operating data, not a test.'],
    data: [
      line(part(record.pv), record.samplePeriod, 'y', recorded(palette.pv)),
      line(traces.now.pv, traces.step, 'y', today),
      line(traces.repaired.pv, traces.step, 'y', later),
      line(part(record.op), record.samplePeriod, 'y2', recorded(palette.op)),
      line(traces.now.op, traces.step, 'y2', today),
      line(traces.repaired.op, traces.step, 'y2', later),
    ],
    annotations: [panelName(withUnit('PV', pvUnit), 'y'), panelName('OP, % of span', 'y2')],
    layout: {
      xaxis: axis({ anchor: 'y2', title: axisTitle(minutes ? 'min' : 's') }),
      yaxis: axis({ domain: [0.55, 1] }),
      yaxis2: axis({ domain: [0, 0.43] }),
    },
    height: 480,
  });
}
