/** The numbers that the program is to reach, and whether a score reaches them. */
import { percent } from '../text-table';
import type { Rate, Score, Spread } from './score';

export interface TargetMet {
  readonly what: string;
  readonly target: string;
  readonly reached: string;
  readonly met: boolean;
}

export function targetsOf(score: Score): TargetMet[] {
  const { stiction, causes, reliability } = score;
  const errors = (what: string, { median, p90 }: Spread, middle: number, tail: number): TargetMet => ({
    what: `${what} error, median / 90th percentile`,
    target: `${percent(middle, 0)} / ${percent(tail, 0)}`,
    reached: `${percent(median)} / ${percent(p90)}`,
    met: median !== null && p90 !== null && median <= middle && p90 <= tail,
  });
  const share = (what: string, { share: reached }: Rate, least: number, most: number): TargetMet => ({
    what,
    target:
      least === 0
        ? `at most ${percent(most, 0)}`
        : most === 1
          ? `at least ${percent(least, 0)}`
          : `${percent(least, 0)} to ${percent(most, 0)}`,
    reached: percent(reached),
    met: reached !== null && reached >= least && reached <= most,
  });
  const { median: halfWidth } = stiction.S.halfWidth;
  const { gap } = reliability;
  return [
    errors('S', stiction.S.error, 0.04, 0.12),
    errors('J', stiction.J.error, 0.03, 0.2),
    share('numbers withheld', stiction.withheld, 0, 0.15),
    share('J not resolved', stiction.unresolved, 0, 0.25),
    share('90 % intervals hold S', stiction.S.held, 0.85, 0.95),
    share('90 % intervals hold J', stiction.J.held, 0.85, 0.95),
    {
      what: 'half width of S over S, median',
      target: 'at most 0.15',
      reached: halfWidth?.toFixed(2) ?? '-',
      met: halfWidth !== null && halfWidth <= 0.15,
    },
    share('visible stiction named', causes.named, 0.85, 1),
    share('visible stiction named or refused', causes.namedOrRefused, 0.97, 1),
    share('stiction named where it is not', causes.falseStiction, 0, 0.02),
    {
      what: 'confidence, weighted gap between said and true rate',
      target: 'at most 0.1',
      reached: gap?.toFixed(2) ?? '-',
      met: gap !== null && gap <= 0.1,
    },
  ];
}
