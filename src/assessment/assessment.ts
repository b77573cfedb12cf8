/** The result of assessing one loop: the plain data that terminal, notebook, page and JSON all show. */
import type { Estimate } from '../estimate/stiction-fit';
import type { Evidence } from '../evidence/evidence';
import type { Note, Response, Service } from '../record/loop-record';
import type { ValveModel } from '../valve/two-parameter';

export type { Evidence };

/** What makes the cycle. `lost-motion` is dead band without a jump. */
export type Verdict =
  | 'stiction'
  | 'lost-motion'
  | 'tight-tuning'
  | 'outside-disturbance'
  | 'not-oscillating'
  | 'cannot-tell';

export interface ControllerFound {
  readonly form: string;
  /** % of OP span per unit of PV, or per % of PV range when the range was stated. */
  readonly gain: number;
  /** s; null without integral action. */
  readonly integralTime: number | null;
  /** Share of OP's moves that the controller reproduces, 0..1. */
  readonly explains: number;
}

export interface Cause {
  readonly verdict: Verdict;
  /** 0..1; null for cannot-tell. */
  readonly confidence: number | null;
  readonly reasons: readonly string[];
  readonly ruledOut: readonly string[];
  readonly also: readonly Verdict[];
}

export interface NextStep {
  readonly do: string;
  readonly why: string;
  readonly caution: string;
}

export interface Assessment {
  readonly schema: 'stickband/assessment/1';
  readonly loop: string;
  readonly service: Service;
  readonly response: Response;
  readonly record: {
    readonly source: string;
    readonly sha256: string;
    readonly start: string;
    readonly samples: number;
    readonly samplePeriod: number;
    readonly notes: readonly Note[];
  };
  readonly oscillation: {
    readonly present: boolean;
    readonly period: number | null;
    readonly regularity: number | null;
    readonly cycles: number;
    readonly others: readonly number[];
  };
  readonly evidence: readonly Evidence[];
  readonly controller: ControllerFound | null;
  readonly stiction: {
    readonly model: ValveModel;
    readonly travel: 'measured' | 'reconstructed';
    readonly S: Estimate;
    readonly J: Estimate | null;
    readonly unit: '% of OP span';
    readonly explains: number;
    readonly notes: readonly Note[];
  } | null;
  readonly stictionRefused: readonly string[];
  readonly cause: Cause;
  readonly severity: {
    readonly size: 'small' | 'notable' | 'large' | null;
    /** Median peak-to-peak swing, PV in engineering units and OP in % of span. */
    readonly pvSwing: number;
    readonly opSwing: number;
    readonly reversalsPerDay: number;
  };
  readonly next: readonly NextStep[];
  readonly cautions: readonly string[];
  readonly provenance: { readonly version: string; readonly options: object; readonly seed: number };
}
