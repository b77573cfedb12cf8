/** Dimension lines, as on a drawing: where a figure was read. */
import { palette } from './palette';
import { plain } from './plain-numbers';

/** A dimension line with an arrow head at either end; `heads` are the ways they point, degrees clockwise from up. */
export function dimension(x: readonly number[], y: readonly number[], heads: readonly number[]): object {
  return {
    type: 'scatter',
    mode: 'lines+markers',
    x: plain(x),
    y: plain(y),
    line: { color: palette.ink, width: 1.4 },
    marker: { symbol: 'arrow', angle: heads, size: 9, color: palette.ink, opacity: 1 },
    hoverinfo: 'skip',
    showlegend: false,
  };
}
