/** What the cycle would do after retuning or repair: the plain data that notebook, figures and tests show. */
import type { Estimate } from '../estimate/stiction-fit';
import type { Note } from '../record/loop-record';

/** What the simulated loop does at one setting. Intervals are at level 0.9. */
export interface CycleForecast {
  /** Share of the rival loops, 0..1, that go on cycling when noise and drift are taken away. */
  readonly cyclesIn: number;
  /** Whether most of them do. */
  readonly cycles: boolean;
  /** s; null where it does not cycle. */
  readonly period: Estimate | null;
  /** Median peak to peak; where it does not cycle, what noise and drift leave within one of today's periods. */
  readonly pvSwing: Estimate;
  readonly opSwing: Estimate;
  /** How many times the loop gain could grow before the loop with a good valve is unstable; null: any. */
  readonly gainMargin: number | null;
}

export interface SettingForecast extends CycleForecast {
  /** % of OP span per PV unit, without its sign. */
  readonly gain: number;
  /** s; null without integral action. */
  readonly integralTime: number | null;
}

/** One place of the map over controller settings, from the rival that comes closest to the record. */
export interface MapPlace {
  readonly gain: number;
  readonly integralTime: number;
  readonly gainMargin: number | null;
  /** False below a gain margin of 1: the place then has no numbers. */
  readonly stable: boolean;
  readonly cycles: boolean;
  /** null where it does not cycle or is not stable. */
  readonly period: number | null;
  readonly pvSwing: number | null;
  readonly opSwing: number | null;
}

export interface BalanceForecast {
  readonly period: number;
  readonly pvSwing: number;
  readonly opSwing: number;
}

/** The beginning of two simulations, to be drawn beside the record; one value a scan. */
export interface ForecastTraces {
  /** s between values. */
  readonly step: number;
  readonly now: { readonly pv: readonly number[]; readonly op: readonly number[] };
  readonly repaired: { readonly pv: readonly number[]; readonly op: readonly number[] };
}

export interface Forecast {
  /** Read from the record in the same way as from the simulations. */
  readonly record: { readonly period: number; readonly pvSwing: number; readonly opSwing: number };
  readonly now: SettingForecast;
  /** Simulated now over record, less 1. */
  readonly error: { readonly period: number; readonly pvSwing: number; readonly opSwing: number };
  readonly others: readonly SettingForecast[];
  /** Not settings to load. Rows by integral time, columns by gain; empty without integral action. */
  readonly map: readonly (readonly MapPlace[])[];
  /** Today's settings without integral action; null where the controller has none. */
  readonly withoutIntegral: SettingForecast | null;
  /** Nothing is integrated while the error is within `width`, PV units; null where no width tried ends the cycle. */
  readonly integralDeadBand: (CycleForecast & { readonly width: number; readonly found: boolean }) | null;
  /** Today's settings with a valve of the stated S and J. */
  readonly repaired: CycleForecast & { readonly S: number; readonly J: number };
  /** Describing function at today's settings; null where it finds no cycle. */
  readonly balance: BalanceForecast | null;
  /** Whether the cycle is gone at more than a fifth of the stable places of the map. */
  readonly retuningEndsIt: boolean;
  readonly inWords: readonly string[];
  /** The rival that comes nearest to the record, as it runs now and repaired. */
  readonly traces: ForecastTraces;
  /** Rival loops drawn, and those that come near enough to the record to be used. */
  readonly rivals: { readonly drawn: number; readonly used: number };
}

export interface ForecastResult {
  readonly schema: 'stickband/forecast/1';
  readonly loop: string;
  readonly pvUnit: string;
  /** null when refused. */
  readonly forecast: Forecast | null;
  /** Why there is no forecast; empty when there is one. */
  readonly refused: readonly string[];
  readonly notes: readonly Note[];
  readonly cautions: readonly string[];
  readonly provenance: { readonly version: string; readonly options: object; readonly seed: number };
}
