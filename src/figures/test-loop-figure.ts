/** Travel against command of a step or stroke test, with dead band, resolution and separation drawn where they were read. */
import { withInterval } from '../assessment/make-answer-card';
import type { ValveTestFindings } from '../field-test/read-valve-test';
import { dimension } from './dimension';
import type { Figure } from './figure';
import { axis, axisTitle, makeFigure, panelName, withUnit } from './layout';
import { fontSize, lineWidth, palette } from './palette';
import { extent, padded, plain, short } from './plain-numbers';
import { thin } from './thin';

/**
 * @param simulated travel of a simulated stem, %, to draw over the measured one
 * @returns null for a hold, and where nothing was watched
 */
export function testLoopFigure(
  findings: ValveTestFindings,
  simulated: Float64Array | null = null,
): Figure | null {
  const { record, reading, step, stroke } = findings;
  if (!step && !stroke) return null;
  const watched = record.travel ?? record.pv;
  if (!watched) return null;
  const drive = stroke?.drive ?? record.op;
  const x = extent(drive);
  const y = extent(watched);
  const indices = thin(watched);
  const what = record.travel ? 'travel, %' : withUnit('PV', record.pvUnit);
  const data: object[] = [
    {
      type: 'scatter',
      mode: 'lines',
      name: record.travel ? 'measured travel' : 'PV',
      x: plain(drive, indices),
      y: plain(watched, indices),
      line: { color: record.travel ? palette.travel : palette.pv, width: lineWidth.thin },
      hovertemplate: '%{y:.4g} at %{x:.4g} %<extra></extra>',
    },
  ];
  if (simulated) {
    data.push({
      type: 'scatter',
      mode: 'lines',
      name: 'simulated',
      x: plain(drive, indices),
      y: plain(simulated, indices),
      line: { color: palette.model, width: lineWidth.thin },
      hoverinfo: 'skip',
    });
  }
  const annotations: object[] = [panelName(what, 'y')];
  // A name near an edge grows away from it.
  const name = (at: number, level: number, text: string, yanchor: string): object => ({
    x: at,
    y: level,
    xref: 'x',
    yref: 'y',
    xanchor:
      at > x.low + 0.6 * (x.high - x.low) ? 'right' : at < x.low + 0.4 * (x.high - x.low) ? 'left' : 'center',
    yanchor,
    showarrow: false,
    text,
    font: { size: fontSize.small, color: palette.ink },
    bgcolor: 'rgba(255,255,255,0.8)',
  });

  const reversals = stroke
    ? stroke.reversals
    : step!.brackets
        .filter(({ reversal }) => reversal)
        .map(({ step: i, reference }) => ({
          from: reference,
          to: step!.steps[i]!.to,
          travel: step!.levels[i]!.before,
        }));
  for (const { from, to, travel } of reversals) {
    const right = to > from;
    data.push(dimension([from, to], [travel, travel], right ? [-90, 90] : [90, -90]));
  }
  const first = reversals[0];
  if (first && reading.deadBand) {
    const upper = first.travel > (y.low + y.high) / 2;
    annotations.push(
      name(
        upper ? Math.max(first.from, first.to) : Math.min(first.from, first.to),
        first.travel + (upper ? 0.03 : -0.03) * (y.high - y.low),
        `<b>dead band</b> ${withInterval({ ...reading.deadBand, unit: '%' })}`,
        upper ? 'bottom' : 'top',
      ),
    );
  }
  const separation = stroke?.separation;
  if (separation && reading.hysteresis) {
    const { drive: at, up, down } = separation;
    data.push(dimension([at, at], [up, down], down > up ? [180, 0] : [0, 180]));
    annotations.push(
      name(at, down + 0.02 * (y.high - y.low), `<b>ways apart</b> ${short(Math.abs(down - up))} %`, 'bottom'),
    );
  }
  const resolved = reading.resolution && reading.resolution.low > 0;
  const jump = stroke?.motion.legs.flatMap(({ stretches }) =>
    stretches.slice(0, -1).map((one, i) => [one, stretches[i + 1]!] as const),
  )[0];
  if (resolved && jump) {
    const [before, after] = jump;
    const at = drive[after.from]!;
    data.push(
      dimension([at, at], [before.level, after.level], after.level > before.level ? [180, 0] : [0, 180]),
    );
  }
  const read = [
    reading.deadBand
      ? 'each level dimension is one reversal, from the command at the last movement to that at the next'
      : '',
    separation ? 'the upright one where the ways up and down are furthest apart' : '',
    resolved && jump ? 'the short upright one is one slip' : '',
  ].filter((text) => text !== '');
  const sentence = read.join('; ');
  const lag = stroke?.lag ? ' The command is drawn behind the lag of the actuator.' : '';
  return makeFigure({
    id: `test-loop-${reading.kind}${simulated ? '-simulated' : ''}`,
    title: `${record.loop}: ${record.travel ? 'travel' : 'PV'} against command`,
    caption: `${sentence === '' ? 'Nothing was resolved.' : `${sentence[0]!.toUpperCase()}${sentence.slice(1)}.`}${lag}`,
    alt: `${record.travel ? 'Measured travel' : 'PV'} of ${record.loop} against the command from ${short(x.low)} to ${short(x.high)} %: dead band ${reading.deadBand ? withInterval(reading.deadBand) : 'not resolved'}, resolution ${reading.resolution ? withInterval(reading.resolution) : 'not resolved'}.`,
    caveats: reading.deadBand ? [] : ['The dead band is not resolved by this test.'],
    data,
    annotations,
    layout: {
      xaxis: axis({ title: axisTitle('command, % of span'), range: padded(x.low, x.high, 0.06, 0.06) }),
      yaxis: axis({ range: padded(y.low, y.high, 0.12, 0.14) }),
    },
    legend: simulated !== null,
    width: 480,
    height: 460,
  });
}
