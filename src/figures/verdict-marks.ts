/** How each cause of a cycle is marked where many loops stand together: shape and colour, so that nothing hangs on colour alone. */
import type { Verdict } from '../assessment/assessment';
import { palette } from './palette';

export interface VerdictMark {
  /** As Plotly names it. */
  readonly symbol: string;
  readonly color: string;
  readonly filled: boolean;
  /** The same in running text. */
  readonly sign: string;
}

/** Colours go by what the cause asks for, as on the answer card: work on the assembly, tuning, a look outside, better data. */
export const verdictMarks: Readonly<Record<Verdict, VerdictMark>> = {
  stiction: { symbol: 'diamond', color: palette.op, filled: true, sign: '◆' },
  'lost-motion': { symbol: 'diamond', color: palette.op, filled: false, sign: '◇' },
  'tight-tuning': { symbol: 'triangle-up', color: palette.travel, filled: true, sign: '▲' },
  'outside-disturbance': { symbol: 'circle', color: palette.pv, filled: false, sign: '○' },
  'cannot-tell': { symbol: 'square', color: palette.stampEdge, filled: false, sign: '□' },
  'not-oscillating': { symbol: 'line-ew', color: palette.faint, filled: false, sign: '–' },
};
