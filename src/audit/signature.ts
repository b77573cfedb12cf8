/**
 * What is kept of a loop after its record is gone: small plain data from which loops are grouped and ranked, and a
 * picture to show. Frequencies and times are absolute, so that loops with other sample periods and starts compare.
 */
import type { Findings } from '../assessment/findings';
import type { Cycle } from '../oscillation/cycle';
import type { Range } from '../record/loop-record';
import { noiseLevel } from '../signal/statistics';
import { type ReducedSpectrum, reducedSpectrum } from './reduced-spectrum';

/** Moments at which the cycle of one signal begins: where its fundamental passes its middle upwards. */
export interface CycleClock {
  readonly signal: 'PV' | 'OP';
  /** s; of that signal. */
  readonly period: number;
  /** s since 1970, rising: where each `every`-th cycle begins, from `began` on. */
  readonly starts: readonly number[];
  readonly every: number;
  /**
   * s since 1970: where the swing came up, when the record also shows the quiet before it. Null when the record
   * cycles from its beginning, so that it cannot tell.
   */
  readonly began: number | null;
}

/** A few cycles of PV and OP, thinned, for a small picture. */
export interface LoopPicture {
  /** s from the start of the record to the first point, and between points. */
  readonly from: number;
  readonly step: number;
  readonly pv: readonly number[];
  readonly op: readonly number[];
}

export interface LoopSignature {
  /** Start and end of the record, s since 1970; without a zone in the record's times, as if they were UTC. */
  readonly from: number;
  readonly to: number;
  readonly pvUnit: string;
  /** As stated; null when not. */
  readonly pvRange: Range | null;
  /** Standard deviation of the fast noise on PV, its unit; 0 where PV stands still more often than not. */
  readonly pvNoise: number;
  /** Power of the signal that cycles (PV, or OP where only OP does), relative. */
  readonly spectrum: ReducedSpectrum;
  /** Null when neither PV nor OP cycles. */
  readonly clock: CycleClock | null;
  readonly picture: LoopPicture;
}

/** Cycle starts kept at most; of more, each second, third ... is kept (own choice). */
const mostStarts = 400;
/** Points of the picture at most, and cycles in it (own choice). */
const picturePoints = 100;
const pictureCycles = 5;
/** A swing has come up where this many cycles in a row reach this share of the usual one (own choice). */
const upCycles = 3;
const upShare = 0.5;
/** So many cycles before it must stay below this share of the usual one to be called quiet (own choice). */
const quietCycles = 3;
const quietShare = 0.35;

/** The signature of an assessed loop. Numbers are rounded to what grouping and drawing can tell apart. */
export function loopSignature({
  record,
  opCycle,
  pvCycle,
}: Pick<Findings, 'record' | 'opCycle' | 'pvCycle'>): LoopSignature {
  const { pv, op, samplePeriod, pvUnit, pvRange } = record;
  const from = secondsSince1970(record.start);
  const signal = !pvCycle.present && opCycle.present ? 'OP' : 'PV';
  const cycle = signal === 'PV' ? pvCycle : opCycle;
  return {
    from,
    to: from + (pv.length - 1) * samplePeriod,
    pvUnit,
    pvRange,
    pvNoise: pv.length < 3 ? 0 : digits(noiseLevel(pv), 4),
    spectrum: reducedSpectrum(signal === 'PV' ? pv : op, samplePeriod),
    clock: cycle.present ? clockOf(cycle, signal, from) : null,
    picture: pictureOf(pv, op, samplePeriod, cycle.period),
  };
}

/** Reads an ISO 8601 time; one without a zone as UTC, whatever the zone of the machine. */
function secondsSince1970(time: string): number {
  const zoned = /(Z|[+-]\d\d:?\d\d)$/i.test(time);
  return Date.parse(zoned ? time : `${time}Z`) / 1000;
}

function clockOf({ period, single }: Cycle, signal: 'PV' | 'OP', from: number): CycleClock {
  const began = beginning(single);
  const all = single.length === 0 ? [] : [...single.map((one) => one.from), single.at(-1)!.to];
  const swinging = all.filter((time) => began === null || time >= began);
  const every = Math.max(1, Math.ceil(swinging.length / mostStarts));
  const starts = swinging.filter((_, i) => i % every === 0).map((time) => round(from + time, 100));
  return {
    signal,
    period: digits(period!, 6),
    starts,
    every,
    began: began === null ? null : round(from + began, 100),
  };
}

/** s since the start of the record; null when no quiet stretch comes before the swing. */
function beginning(single: Cycle['single']): number | null {
  const sizes = single.map(({ amplitude }) => amplitude);
  const usual = [...sizes].sort((a, b) => b - a)[Math.floor(sizes.length / 4)] ?? 0;
  const up = sizes.findIndex((_, i) => {
    const next = sizes.slice(i, i + upCycles);
    return next.length === upCycles && next.every((size) => size >= upShare * usual);
  });
  const quietBefore = (at: number): boolean =>
    at >= quietCycles && sizes.slice(at - quietCycles, at).every((size) => size <= quietShare * usual);
  // The swing may need a cycle or two from quiet to half its size.
  for (const at of [up, up - 1, up - 2]) if (quietBefore(at)) return single[at]!.from;
  return null;
}

function pictureOf(
  pv: Float64Array,
  op: Float64Array,
  samplePeriod: number,
  period: number | null,
): LoopPicture {
  const wanted = period === null ? pv.length : Math.ceil((pictureCycles * period) / samplePeriod) + 1;
  const length = Math.min(pv.length, wanted);
  const first = Math.floor((pv.length - length) / 2);
  const by = Math.max(1, Math.ceil(length / picturePoints));
  const thinned = (values: Float64Array): number[] =>
    Array.from({ length: Math.ceil(length / by) }, (_, i) => digits(values[first + i * by]!, 5));
  return { from: first * samplePeriod, step: by * samplePeriod, pv: thinned(pv), op: thinned(op) };
}

const round = (value: number, parts: number): number => Math.round(value * parts) / parts;
const digits = (value: number, count: number): number => Number(value.toPrecision(count));
