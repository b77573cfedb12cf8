/** A small picture of a loop: a few cycles of PV above, OP below, as SVG text that stands alone as an image. */
import type { LoopPicture } from '../audit/signature';
import { lineWidth, palette } from '../figures/palette';

const width = 200;
const height = 60;
const edge = 3;
/** Height of one of the two lanes, px. */
const lane = (height - 3 * edge) / 2;

export function loopPictureSvg({ pv, op }: LoopPicture): string {
  const top = edge;
  const bottom = 2 * edge + lane;
  return (
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${width} ${height}" width="${width}" height="${height}">` +
    `<g fill="none" stroke-width="${lineWidth.signal}" stroke-linejoin="round">` +
    `<path stroke="${palette.pv}" d="${path(pv, top)}"/><path stroke="${palette.op}" d="${path(op, bottom)}"/></g></svg>`
  );
}

/** A line through all points, from the lowest value at the foot of its lane to the highest at its head. */
function path(values: readonly number[], top: number): string {
  const low = Math.min(...values);
  const size = Math.max(...values) - low;
  const across = (width - 2 * edge) / Math.max(1, values.length - 1);
  const points = values.map((value, i) => {
    const share = size > 0 ? (value - low) / size : 0.5;
    return `${round(edge + i * across)} ${round(top + (1 - share) * lane)}`;
  });
  return `M${points.join('L')}`;
}

const round = (value: number): number => Math.round(10 * value) / 10;
