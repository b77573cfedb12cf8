/**
 * Linear processes between travel and PV, solved exactly for an input that is held over each step: one lag, two
 * lags, or integrating (with or without a lag), each behind a dead time that need not be a whole number of steps.
 */
import { refuseUnknownOptions, WrongUse } from '../errors';

export interface LinearProcessOptions {
  /** Default `self-regulating`. */
  readonly response?: 'self-regulating' | 'integrating';
  /** PV units per % of input; per % and second when integrating. Default 1. */
  readonly gain?: number;
  /** Time constants, s: none, one or two when self-regulating (none answers at once), none or one when integrating. Default none. */
  readonly lags?: readonly number[];
  /** s, any number from 0. Default 0. */
  readonly deadTime?: number;
  /** Input at which the process is at rest at the beginning, %. Default 0. */
  readonly restInput?: number;
  /** Output at the beginning, PV units. Default 0. */
  readonly restOutput?: number;
}

export interface LinearProcess {
  /** Output now, PV units. */
  readonly output: number;
  /** Holds `input` for one step and returns the output at its end. */
  advance(input: number): number;
}

/**
 * A process at rest that is moved on by steps of `step` seconds.
 *
 * @throws WrongUse for a step that is not above 0, lags that are not above 0 or too many, a negative dead time, or
 *   an unknown option
 */
export function createLinearProcess(options: LinearProcessOptions, step: number): LinearProcess {
  refuseUnknownOptions('createLinearProcess', options, [
    'response',
    'gain',
    'lags',
    'deadTime',
    'restInput',
    'restOutput',
  ]);
  const {
    response = 'self-regulating',
    gain = 1,
    lags = [],
    deadTime = 0,
    restInput = 0,
    restOutput = 0,
  } = options;
  const mostLags = response === 'integrating' ? 1 : 2;
  if (lags.length > mostLags || lags.some((lag) => !(lag > 0))) {
    throw new WrongUse(
      `A ${response} process takes at most ${mostLags} lags above 0 s. Received ${JSON.stringify(lags)}.`,
    );
  }
  if (!(step > 0) || !(deadTime >= 0)) {
    throw new WrongUse(
      `A process needs a step above 0 s and a dead time of 0 s or more. Received ${step} and ${deadTime}.`,
    );
  }

  const whole = Math.floor(deadTime / step + 1e-9);
  const fraction = Math.max(0, deadTime - whole * step);
  // Inputs still on their way, oldest at `next`; all are departures from the input at rest.
  const waiting = new Float64Array(whole + 1);
  let next = 0;
  const early = transition(response, lags, fraction);
  const late = transition(response, lags, step - fraction);
  const state: State = { first: 0, second: 0 };
  let output = restOutput;
  return {
    get output(): number {
      return output;
    },
    advance(input: number): number {
      const older = waiting[next];
      waiting[next] = input - restInput;
      next = (next + 1) % waiting.length;
      const newer = waiting[next];
      if (fraction > 0) early(state, older);
      late(state, newer);
      output = restOutput + gain * state.second;
      return output;
    },
  };
}

/**
 * Output of a process at rest for each input value, PV units. `output[k]` stands at the end of the sample over which
 * `input[k]` was held.
 *
 * @throws WrongUse as {@link createLinearProcess}
 */
export function simulateProcess(
  input: Float64Array,
  samplePeriod: number,
  options: LinearProcessOptions = {},
): Float64Array {
  const process = createLinearProcess(options, samplePeriod);
  return Float64Array.from(input, (value) => process.advance(value));
}

/** `second` is the output for a gain of 1; `first` the state of a lag before it. */
interface State {
  first: number;
  second: number;
}

/** What `h` seconds under a held input do to the state. */
function transition(
  response: 'self-regulating' | 'integrating',
  lags: readonly number[],
  h: number,
): (state: State, input: number) => void {
  const [lag, other] = lags;
  if (response === 'integrating') {
    if (lag === undefined) {
      return (state, input) => {
        state.second += input * h;
      };
    }
    const keep = Math.exp(-h / lag);
    return (state, input) => {
      state.second += input * h + (state.first - input) * lag * (1 - keep);
      state.first = input + (state.first - input) * keep;
    };
  }
  if (lag === undefined) {
    return (state, input) => {
      state.second = input;
    };
  }
  const keep = Math.exp(-h / lag);
  if (other === undefined) {
    return (state, input) => {
      state.second = input + (state.second - input) * keep;
    };
  }
  const keepOther = Math.exp(-h / other);
  const nearlyEqual = Math.abs(lag - other) < 1e-6 * lag;
  const pass = nearlyEqual ? (h / lag) * keep : (lag / (lag - other)) * (keep - keepOther);
  return (state, input) => {
    state.second = input + (state.second - input) * keepOther + (state.first - input) * pass;
    state.first = input + (state.first - input) * keep;
  };
}
