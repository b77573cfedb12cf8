/**
 * What the cycle of a loop would do at other controller settings, with an integral dead band, and with the valve
 * repaired: the loop that the record shows is simulated, as it runs now and changed.
 */
import { cautions } from '../assessment/cautions';
import type { Findings } from '../assessment/findings';
import { refuseUnknownOptions, WrongUse } from '../errors';
import { gainMargin } from '../estimate/loop-stability';
import type { Estimate } from '../estimate/stiction-fit';
import { countReversals } from '../oscillation/reversals';
import type { LoopRun } from '../process/closed-loop';
import { type ControllerReading, readController } from '../process/read-controller';
import type { Note } from '../record/loop-record';
import { median, quantile } from '../signal/statistics';
import { version } from '../version';
import { type CycleMeasure, measureCycle, swingWithin } from './cycle-measure';
import type { CycleForecast, Forecast, ForecastResult, MapPlace, SettingForecast } from './forecast';
import { balanceCycle } from './harmonic-balance';
import { type Change, type LoopModel, type ModelSource, runModel } from './loop-model';
import { retuningInWords } from './retuning-in-words';
import { drawRivals, jumpAt, type RivalLoop, simulatedCycles } from './rival-loops';

export interface ControllerSetting {
  /** % of OP span per PV unit, above 0. */
  readonly gain: number;
  /** s, above 0; null: without integral action. */
  readonly integralTime: number | null;
}

export interface ForecastOptions {
  /** Settings to look at, in the units in which the assessment tells the controller. Default: gain halved, integral time doubled, both. */
  readonly settings?: readonly ControllerSetting[];
  /** Columns and rows of the map, as factors on today's gain and integral time, rising. Default 1/4 to 2, and 1/2 to 4. */
  readonly mapGains?: readonly number[];
  readonly mapIntegralTimes?: readonly number[];
  /** S and J of the repaired valve, % of OP span. Default both 0. */
  readonly repaired?: { readonly S: number; readonly J: number };
  /** Width of an integral dead band, PV units. Default null: the narrowest of those tried that ends the cycle. */
  readonly integralDeadBand?: number | null;
  /**
   * Largest share by which the loop simulated as it runs now may miss period, PV swing or OP swing of the record.
   * Default 0.3 (own choice): a simulation that misses more says little of other settings.
   */
  readonly largestMiss?: number;
  /** Rival loops to draw. Default 40. */
  readonly rivals?: number;
  /** Seed of rivals, noise and drift. Default 1. */
  readonly seed?: number;
}

const OPTIONS = [
  'settings',
  'mapGains',
  'mapIntegralTimes',
  'repaired',
  'integralDeadBand',
  'largestMiss',
  'rivals',
  'seed',
] as const;

/** Share of OP's moves that the controller reading must explain, as for the fit. Own choice. */
const trustedController = 0.6;
/** Share of the stable places of the map that may lose the cycle before retuning counts as ending it. Own choice. */
const mostQuiet = 0.2;
/** Share of samples at which SP may move: a master moves it at nearly all. Own choice. */
const mostSetPointMoves = 0.05;
/** Rivals that are simulated on: those nearest to the record. Own choice. */
const mostUsed = 16;
/** Added to the spread of the rivals on either side, relatively: what the model itself is off. Set on simulated loops. */
const modelError = { period: 0.1, swing: 0.1 };
/** Widths of an integral dead band that are tried, over half of the PV swing. */
const deadBandWidths = [0.25, 0.5, 0.75, 1, 1.25, 1.5, 2];

/**
 * Forecasts the cycle of an assessed loop.
 *
 * Every rival is the loop with one S and J from the intervals of the assessment, and the gain, lag and dead time that
 * fit the record with them; noise and drift are drawn (seeded) with about the strength that the record shows. Those
 * that come nearest to the record's own period and swings are simulated at each setting. A forecast is their median, drawn
 * towards the record by what they miss of it today; its band is their spread and the model's own error.
 *
 * Not valid far from the record's load, with a moving set point, or where something outside the loop makes the cycle.
 *
 * @throws WrongUse for an unknown option, settings, factors or widths that are not above 0, J above S
 */
export function forecastCycle(findings: Findings, options: ForecastOptions = {}): ForecastResult {
  refuseUnknownOptions('forecastCycle', options, OPTIONS);
  const resolved = resolve(options);
  const { record, assessment } = findings;
  const base = {
    schema: 'stickband/forecast/1' as const,
    loop: record.loop,
    pvUnit: record.pvUnit,
    cautions,
    provenance: { version, options: resolved, seed: resolved.seed },
  };
  const refuse = (...reasons: string[]): ForecastResult => ({
    ...base,
    forecast: null,
    refused: reasons,
    notes: [],
  });
  const controller = readController(record.sp, record.pv, record.op, record.samplePeriod);
  const reasons = whyNot(findings, controller);
  if (reasons.length > 0) return refuse(...reasons);
  const { fit } = findings.stiction;
  const measured = measureCycle(record.pv, record.op, record.samplePeriod);
  if (measured === null || controller === null || fit === null || fit.process === null) {
    return refuse('OP turns too seldom in this record to compare a simulation with it.');
  }
  const source: ModelSource = {
    record,
    controller,
    fit: { ...fit, process: fit.process },
    period: measured.period,
    pvSwing: measured.pvSwing,
  };
  const rivals = drawRivals(source, measured, { count: resolved.rivals, seed: resolved.seed });
  const near = rivals
    .filter(({ miss, model }) => miss <= Math.log(1 + resolved.largestMiss) && (marginOf(model, {}) ?? 2) > 1)
    .slice(0, mostUsed);
  if (near.length === 0) return refuse(missInWords(rivals[0] ?? null, measured, resolved.largestMiss));

  const notes: Note[] = [];
  if (assessment.cause.verdict === 'cannot-tell') {
    notes.push({
      code: 'cause-not-named',
      text: 'The cause of the cycle could not be told. This forecast holds only if the valve makes it.',
    });
  }
  if (near.length < Math.min(mostUsed, resolved.rivals) / 2) {
    notes.push({
      code: 'few-rivals',
      text: `Only ${near.length} of ${rivals.length} rival loops come within ${Math.round(100 * resolved.largestMiss)} % of the record, so the bands may be too narrow.`,
    });
  }
  return {
    ...base,
    forecast: forecastFrom(near, rivals.length, measured, record.pvUnit || 'PV units', resolved),
    refused: [],
    notes,
  };
}

type Resolved = Required<ForecastOptions>;

function resolve(options: ForecastOptions): Resolved {
  const {
    settings = [],
    mapGains = [0.25, 0.35, 0.5, 0.7, 1, 1.4, 2],
    mapIntegralTimes = [0.5, 0.7, 1, 1.4, 2, 2.8, 4],
    repaired = { S: 0, J: 0 },
    integralDeadBand = null,
    largestMiss = 0.3,
    rivals = 40,
    seed = 1,
  } = options;
  const above = (what: string, values: readonly number[]): void => {
    const bad = values.find((value) => !(value > 0 && Number.isFinite(value)));
    if (bad !== undefined) throw new WrongUse(`forecastCycle needs a ${what} above 0. Received ${bad}.`);
  };
  above(
    'controller gain',
    settings.map(({ gain }) => gain),
  );
  above(
    'controller integral time',
    settings.flatMap(({ integralTime }) => integralTime ?? []),
  );
  above('factor on the gain', mapGains);
  above('factor on the integral time', mapIntegralTimes);
  above('share for largestMiss', [largestMiss]);
  if (integralDeadBand !== null) above('width of the integral dead band', [integralDeadBand]);
  if (!(repaired.J >= 0 && repaired.S >= repaired.J && Number.isFinite(repaired.S))) {
    throw new WrongUse(
      `The repaired valve needs 0 <= J <= S in % of OP span. Received S = ${repaired.S} and J = ${repaired.J}.`,
    );
  }
  if (!(Number.isInteger(rivals) && rivals > 0)) {
    throw new WrongUse(`forecastCycle draws a whole number of rivals above 0. Received ${rivals}.`);
  }
  return { settings, mapGains, mapIntegralTimes, repaired, integralDeadBand, largestMiss, rivals, seed };
}

function whyNot(findings: Findings, controller: ControllerReading | null): string[] {
  const { record, stiction, assessment } = findings;
  const { verdict } = assessment.cause;
  const reasons: string[] = [];
  if (controller === null) {
    reasons.push('The controller could not be read from SP, PV and OP, so the loop cannot be simulated.');
  } else if (controller.explains < trustedController) {
    reasons.push(
      `The controller as read explains ${Math.round(100 * controller.explains)} % of OP's moves, at least ${100 * trustedController} % is asked for: the loop that was logged is not the loop that would be simulated.`,
    );
  }
  if (stiction.fit?.process == null) {
    reasons.push(`There is no fit of the valve to simulate with. ${stiction.refused[0] ?? ''}`.trim());
  }
  if (verdict === 'tight-tuning' || verdict === 'outside-disturbance' || verdict === 'not-oscillating') {
    reasons.push(
      `The cause was named ${verdict}; this forecast is of a cycle that the valve makes, so it would mislead here.`,
    );
  }
  const { sp } = record;
  if (sp !== null) {
    let moves = 0;
    for (let k = 1; k < sp.length; k++) if (sp[k] !== sp[k - 1]) moves++;
    if (moves > mostSetPointMoves * sp.length) {
      reasons.push(
        `The set point moves at ${Math.round((100 * moves) / sp.length)} % of the samples, as under a master controller. The master takes part in the cycle and is not in this record.`,
      );
    }
  }
  return reasons;
}

function missInWords(best: RivalLoop | null, record: CycleMeasure, largest: number): string {
  if (best === null)
    return 'No simulation of the loop as it runs now cycles, so nothing can be forecast from it.';
  const off = (name: 'period' | 'pvSwing' | 'opSwing'): string =>
    `${best.now[name] >= record[name] ? '+' : '-'}${Math.round(100 * Math.abs(best.now[name] / record[name] - 1))} %`;
  return (
    `The loop simulated as it runs now misses the record: period ${off('period')}, PV swing ${off('pvSwing')}, ` +
    `OP swing ${off('opSwing')}; at most ${Math.round(100 * largest)} % is asked for. Something in the loop is not as the model has it.`
  );
}

/** One rival at one change: measured, or only what is left where it does not cycle. */
interface Outcome {
  readonly cycles: boolean;
  readonly measure: CycleMeasure | null;
  readonly pvLeft: number;
  readonly opLeft: number;
}

/** A run is made longer, once, when its valve turns round too seldom to measure. */
const longer = 4;
/** Fewest turns of the valve that make a cycle, and the least turn over S (own choices). */
const fewestTurns = 10;
const leastTurn = 0.05;
/** A cycle has so many times the turns that the load's drift alone asks of a valve with this dead band (own choice). */
const overDrift = 2;

function tryOut(rival: RivalLoop, asked: Change, period: number): Outcome {
  const { model, seed } = rival;
  const speed = asked.form === 'P' ? 1 : (asked.gain ?? 1) / (asked.integralTime ?? 1);
  const valve = { ...model.valve, J: jumpAt(rival, speed) };
  const change: Change = { valve, ...asked };
  const run = (cycles: number): Outcome => {
    const length = { period, cycles, seed };
    const log = runModel(model, change, length);
    const lasts = turnsByItself(model, change, log, length);
    const measure = lasts ? measureCycle(log.pv, log.op, model.scanPeriod) : null;
    return {
      cycles: measure !== null,
      measure,
      pvLeft: swingWithin(log.pv, period, model.scanPeriod),
      opLeft: swingWithin(log.op, period, model.scanPeriod),
    };
  };
  const first = run(simulatedCycles);
  const stuck = change.valve != null && change.valve.S > 0;
  return first.cycles || !stuck ? first : run(longer * simulatedCycles);
}

/** Whether the valve goes to and fro more often than the load's drift asks of one with its dead band. */
function turnsByItself(
  model: LoopModel,
  change: Change,
  run: LoopRun,
  length: { readonly period: number; readonly cycles: number; readonly seed: number },
): boolean {
  const { valve = null } = change;
  if (valve === null || valve.S === 0) return false;
  const turns = countReversals(run.travel, leastTurn * valve.S).count;
  if (turns < fewestTurns) return false;
  const free = runModel(model, { ...change, integralDeadBand: 0, valve: null }, length);
  return turns > overDrift * countReversals(free.travel, valve.S).count;
}

/** Derivative action is left out, so that the margin of a PID controller mostly reads low. */
function marginOf({ process, controller, scanPeriod }: LoopModel, change: Change): number | null {
  const { gain = 1, integralTime = 1, form = controller.form } = change;
  const integrating = process.response === 'integrating';
  const [lag = 0, secondLag = 0] = process.lags;
  const margin = gainMargin(
    {
      form,
      gain: controller.gain * gain,
      integralTime: form === 'P' ? null : controller.integralTime * integralTime,
      explains: 1,
    },
    // A held OP acts half a scan late on average.
    { lag: lag / scanPeriod, secondLag: secondLag / scanPeriod, delay: process.deadTime / scanPeriod + 0.5 },
    Math.abs(process.gain) * (integrating ? scanPeriod : 1),
    integrating,
    scanPeriod,
  );
  return Number.isFinite(margin) ? margin : null;
}

function forecastFrom(
  used: readonly RivalLoop[],
  drawn: number,
  record: CycleMeasure,
  pvUnit: string,
  options: Resolved,
): Forecast {
  const best = used[0]!;
  const today = best.model.controller;
  const hasIntegral = today.form !== 'P';
  const at = (change: Change): CycleForecast => summed(used, record, pvUnit, change);
  const setting = (change: Change): SettingForecast => ({
    gain: today.gain * (change.gain ?? 1),
    integralTime:
      (change.form ?? today.form) === 'P' ? null : today.integralTime * (change.integralTime ?? 1),
    ...at(change),
  });
  const simulated = {
    period: median(Float64Array.from(used, ({ now }) => now.period)),
    pvSwing: median(Float64Array.from(used, ({ now }) => now.pvSwing)),
    opSwing: median(Float64Array.from(used, ({ now }) => now.opSwing)),
  };
  const others = (
    options.settings.length > 0
      ? options.settings.map(({ gain, integralTime }) => ({
          gain: gain / today.gain,
          integralTime: integralTime === null ? 1 : integralTime / today.integralTime,
          form: formWith(today.form, integralTime),
        }))
      : [{ gain: 0.5 }, ...(hasIntegral ? [{ integralTime: 2 }, { gain: 0.5, integralTime: 2 }] : [])]
  ).map(setting);
  const map = hasIntegral
    ? options.mapIntegralTimes.map((integralTime) =>
        options.mapGains.map((gain) => placeOf(best, record, { gain, integralTime })),
      )
    : [];
  const withoutIntegral = today.form === 'PI' || today.form === 'PID' ? setting({ form: 'P' }) : null;
  const stable = map.flat().filter((place) => place.stable);
  const quiet = stable.filter((place) => !place.cycles);
  const repaired = {
    ...options.repaired,
    ...at({ valve: options.repaired.S > 0 ? { model: best.model.valve.model, ...options.repaired } : null }),
  };
  const forecast: Omit<Forecast, 'inWords'> = {
    record,
    now: setting({}),
    error: {
      period: simulated.period / record.period - 1,
      pvSwing: simulated.pvSwing / record.pvSwing - 1,
      opSwing: simulated.opSwing / record.opSwing - 1,
    },
    others,
    map,
    withoutIntegral,
    integralDeadBand: hasIntegral ? deadBand(used, record, options, at) : null,
    repaired,
    balance: balanceCycle(
      { ...best.model.process, controller: today, scanPeriod: best.model.scanPeriod },
      best.model.valve.S,
      best.model.valve.J,
    ),
    retuningEndsIt: quiet.length > mostQuiet * stable.length,
    traces: tracesOf(best, record.period, options),
    rivals: { drawn, used: used.length },
  };
  return { ...forecast, inWords: retuningInWords(forecast, pvUnit) };
}

/** The form of today, but P without an integral time, and PI where a P controller is asked for one. */
function formWith(today: NonNullable<Change['form']>, integralTime: number | null): Change['form'] {
  if (integralTime === null) return 'P';
  return today === 'P' ? 'PI' : today;
}

/** Cycles of the record that are drawn. */
const drawnCycles = 5;

function tracesOf({ model, seed }: RivalLoop, period: number, { repaired }: Resolved): Forecast['traces'] {
  const length = { period, cycles: drawnCycles, seed };
  const valve = repaired.S > 0 ? { model: model.valve.model, ...repaired } : null;
  const [now, later] = [runModel(model, {}, length), runModel(model, { valve }, length)];
  return {
    step: model.scanPeriod,
    now: { pv: Array.from(now.pv), op: Array.from(now.op) },
    repaired: { pv: Array.from(later.pv), op: Array.from(later.op) },
  };
}

function deadBand(
  used: readonly RivalLoop[],
  record: CycleMeasure,
  { integralDeadBand }: Resolved,
  at: (change: Change) => CycleForecast,
): Forecast['integralDeadBand'] {
  if (integralDeadBand !== null) {
    const there = at({ integralDeadBand });
    return { width: integralDeadBand, found: !there.cycles, ...there };
  }
  const widths = deadBandWidths.map((share) => Number(((share * record.pvSwing) / 2).toPrecision(2)));
  for (const width of widths) {
    const stopped = used.filter((rival) => !tryOut(rival, { integralDeadBand: width }, record.period).cycles);
    if (stopped.length === used.length) return { width, found: true, ...at({ integralDeadBand: width }) };
  }
  const width = widths.at(-1)!;
  return { width, found: false, ...at({ integralDeadBand: width }) };
}

function summed(
  used: readonly RivalLoop[],
  record: CycleMeasure,
  pvUnit: string,
  change: Change,
): CycleForecast {
  const outcomes = used.map((rival) => ({ rival, ...tryOut(rival, change, record.period) }));
  const cycling = outcomes.filter(({ cycles }) => cycles);
  const cyclesIn = cycling.length / used.length;
  const cycles = cyclesIn > 0.5;
  const margin = marginOf(used[0]!.model, change);
  if (!cycles) {
    const left = (name: 'pvLeft' | 'opLeft', unit: string): Estimate =>
      banded(
        outcomes.map((outcome) => outcome[name]),
        modelError.swing,
        unit,
      );
    return {
      cyclesIn,
      cycles,
      period: null,
      pvSwing: left('pvLeft', pvUnit),
      opSwing: left('opLeft', '% of OP span'),
      gainMargin: margin,
    };
  }
  const of = (name: keyof CycleMeasure, error: number, unit: string): Estimate =>
    banded(
      cycling.map(({ rival, measure }) => anchored(record, rival, measure!, name)),
      error,
      unit,
    );
  return {
    cyclesIn,
    cycles,
    period: of('period', modelError.period, 's'),
    pvSwing: of('pvSwing', modelError.swing, pvUnit),
    opSwing: of('opSwing', modelError.swing, '% of OP span'),
    gainMargin: margin,
  };
}

/**
 * A simulated value, drawn half way (in logarithms) to the one that would follow from the record by the simulated ratio
 * of changed to now: both the simulation and a short record are off by chance.
 */
function anchored(
  record: CycleMeasure,
  { now }: RivalLoop,
  measure: CycleMeasure,
  name: keyof CycleMeasure,
): number {
  return measure[name] * Math.sqrt(record[name] / now[name]);
}

/** Median and 5 and 95 % ends of the values, the ends moved out by the relative error. */
function banded(values: readonly number[], error: number, unit: string): Estimate {
  const row = Float64Array.from(values);
  return {
    value: median(row),
    low: quantile(row, 0.05) * (1 - error),
    high: quantile(row, 0.95) * (1 + error),
    unit,
  };
}

function placeOf(best: RivalLoop, record: CycleMeasure, change: Change): MapPlace {
  const { controller } = best.model;
  const margin = marginOf(best.model, change);
  const stable = margin === null || margin >= 1;
  const place = {
    gain: controller.gain * (change.gain ?? 1),
    integralTime: controller.integralTime * (change.integralTime ?? 1),
    gainMargin: margin,
    stable,
  };
  const { cycles, measure } = stable ? tryOut(best, change, record.period) : { cycles: true, measure: null };
  const scaled = (name: keyof CycleMeasure): number | null =>
    measure === null ? null : anchored(record, best, measure, name);
  return {
    ...place,
    cycles,
    period: scaled('period'),
    pvSwing: scaled('pvSwing'),
    opSwing: scaled('opSwing'),
  };
}
