/**
 * How likely the final control assembly makes what the record shows: logistic regression on eight signs.
 *
 * The weights were fitted by `npm run weigh` to the two sets of simulated loops of tests/accuracy that are there to be
 * worked with (stems with real friction in closed loops, two thirds of them sticky or worn), never to the reported set. In tenfold
 * cross-validation the probability said and the share found true agreed within 0.12 in every tenth. Another mix of
 * loops shifts it: where few valves stick, it is said too high.
 */
import type { StictionFit, ValveTest } from '../estimate/stiction-fit';
import type { Cycle } from '../oscillation/cycle';

/** What is weighed, each within the range that the weights were fitted on. */
export interface ValveSigns {
  /** t over blocks of valve against straight line, over 5; the lower one when a steady line in OP was taken out too. */
  readonly lead: number;
  /** Share of the blocks in which the valve wins. */
  readonly blocks: number;
  /** 1 when OP or PV cycles regularly, else 0. */
  readonly cycles: number;
  /** log10 of the regularity of OP; 0 without a cycle. A cycle like clockwork comes from outside more often. */
  readonly regularity: number;
  /** log10 of S in % of span. */
  readonly size: number;
  /** Share of the travel that the element explains. */
  readonly explains: number;
  /** 0, or below it for a PV nearer to a sine than slips leave it; log10 of its odd harmonics over 1 %. */
  readonly sine: number;
  /** 0, or above it for a PV squarer than slips leave it: log10 of its odd harmonics over 10 %, times `regularity`. */
  readonly square: number;
}

/** Share of odd harmonics taken where PV has no cycle of its own: between a sine and a triangle. Own choice. */
const usualOddShare = 0.003;

const weights: ValveSigns = {
  lead: 0.67,
  blocks: 2.22,
  cycles: 1.58,
  regularity: -1.6,
  size: 2.25,
  explains: 3.72,
  sine: 1.37,
  square: -1.27,
};
const intercept = -3.67;

export const signNames = Object.keys(weights) as readonly (keyof ValveSigns)[];

/** The signs of a tested loop. All are without unit but `size`; what lies outside the range of the fit is taken at its end. */
export function valveSigns(
  opCycle: Cycle,
  pvCycle: Cycle,
  test: ValveTest,
  fit: Pick<StictionFit, 'S' | 'explains'>,
): ValveSigns {
  const cycles = opCycle.present || pvCycle.present;
  const regularity = cycles ? Math.log10(within(opCycle.regularity ?? 1, 1, 300)) : 0;
  const odd = Math.max(pvCycle.oddHarmonicShare ?? usualOddShare, 1e-6);
  return {
    lead: within(decisiveT(test), -6, 15) / 5,
    blocks: test.blocksForValve / test.blocks,
    cycles: cycles ? 1 : 0,
    regularity,
    size: Math.log10(within(fit.S.value, 0.1, 5)),
    explains: within(fit.explains, 0.3, 1),
    sine: cycles ? within(Math.log10(odd / 0.01), -2, 0) : 0,
    square: regularity * within(Math.log10(odd / 0.1), 0, 0.7),
  };
}

/** Probability that the valve makes it, 0..1. */
export function valveProbability(signs: ValveSigns): number {
  const odds = signNames.reduce((sum, name) => sum + weights[name] * signs[name], intercept);
  return 1 / (1 + Math.exp(-odds));
}

/** t of valve against straight line: the lower one when OP carries a steady line that was also taken out. */
export function decisiveT(test: ValveTest): number {
  return Math.min(test.tOverLine, test.tWithoutLine ?? test.tOverLine);
}

function within(value: number, low: number, high: number): number {
  return Math.min(Math.max(value, low), high);
}
