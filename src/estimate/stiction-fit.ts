/** What the fit of the two-parameter valve model to a record gives. Plain read-only data. */
import type { Note } from '../record/loop-record';
import type { ValveModel } from '../valve/two-parameter';

/** A value with the ends of its 90 % interval. */
export interface Estimate {
  readonly value: number;
  readonly low: number;
  readonly high: number;
  readonly unit: string;
}

/** A moment at which the valve broke loose. */
export interface Slip {
  /** Index of the sample, and s since the start of the record. */
  readonly sample: number;
  readonly time: number;
  /** Signed size of the travel step, %. */
  readonly size: number;
}

/** Misfit of the model over S and J: `misfit[i][k]` for `J[i]` and `S[k]`, 1 = explains nothing, 0 = all. */
export interface MisfitMap {
  readonly S: readonly number[];
  readonly J: readonly number[];
  /** null where J > S was not tried. */
  readonly misfit: readonly (readonly (number | null)[])[];
}

/** Linear process between travel and PV as found by the fit. */
export interface FoundProcess {
  readonly response: 'self-regulating' | 'integrating';
  /** PV units per % of travel (per % and second when integrating). */
  readonly gain: number;
  /** s; null when integrating. */
  readonly lag: number | null;
  /** s */
  readonly deadTime: number;
}

export interface StictionFit {
  readonly model: ValveModel;
  readonly travelSource: 'measured' | 'reconstructed';
  readonly S: Estimate;
  /** null: not resolved; a note says why. */
  readonly J: Estimate | null;
  /** Best single value of J even when it is not resolved, for drawing only. */
  readonly jumpDrawn: number;
  /** Share of the travel's variance that the two-parameter element explains, 0..1. */
  readonly explains: number;
  /** Share of PV's movement that valve and process explain together, 0..1. */
  readonly explainsPv: number;
  readonly notes: readonly Note[];
  /** Travel, %: measured, or as reconstructed in stage 1. One value a sample. */
  readonly travel: Float64Array;
  /** Travel of the fitted two-parameter element, same scale and length as `travel`. */
  readonly modelTravel: Float64Array;
  /** PV as simulated from OP through valve, process and disturbance model, engineering units. */
  readonly simulatedPv: Float64Array;
  readonly slips: readonly Slip[];
  readonly map: MisfitMap;
  /** null when only measured travel was used. */
  readonly process: FoundProcess | null;
}

/** How the data choose between valve, dead band only and straight line. Used to name the cause. */
export interface ValveTest {
  /** Blocks compared, and in how many the valve with stiction beats the straight line. */
  readonly blocks: number;
  readonly blocksForValve: number;
  /** Sum over blocks of the log likelihood gained, and its t statistic over blocks: valve against straight line. */
  readonly gainOverLine: number;
  readonly tOverLine: number;
  /** The same for S and J against dead band only (J = 0). */
  readonly gainOverDeadBand: number;
  readonly tOverDeadBand: number;
  /** The same as gainOverLine after a coherent line of OP and its harmonics were projected out; null without one. */
  readonly tWithoutLine: number | null;
}

export interface StictionResult {
  /** null when nothing could be fitted or numbers are refused. */
  readonly fit: StictionFit | null;
  /** The best fit even when its numbers are refused, for figures; its numbers must not be quoted. */
  readonly drawn: StictionFit | null;
  readonly refused: readonly string[];
  readonly test: ValveTest | null;
}
