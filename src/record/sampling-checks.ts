/** Checks on how much was logged and how evenly: samples, cycles, gaps, duplicates, filled samples, skew. */
import { countReversals } from '../oscillation/reversals';
import { noiseLevel, standardDeviation } from '../signal/statistics';
import { all, type Checked, causeAndNumbers, numbers, percent, short, warns } from './checked';
import type { FitnessCheck } from './fitness';

/** Limits. Each check says where its own comes from. */
const fewestSamples = 100;
const fewestSamplesACycle = 7;
const askedSamplesACycle = 20;
const fewestReversals = 10;
const mostDuplicates = 0.01;
const mostGaps = 0.01;
const mostFilled = 0.1;
const farTooMuchFilled = 0.3;
const leastKept = 0.5;
const mostBad = 0.1;
/** Skew: share of the cycle, or of a sample when that is more. */
const skewOfCycle = 0.02;
const skewOfSample = 0.5;

export function samplingChecks(checked: Checked): FitnessCheck[] {
  return [
    samples(checked),
    samplesACycle(checked),
    reversals(checked),
    kept(checked),
    gaps(checked),
    duplicates(checked),
    badSamples(checked),
    filled(checked),
    skew(checked),
  ];
}

function samples({ record }: Checked): FitnessCheck {
  const n = record.op.length;
  const passed = n >= fewestSamples;
  return {
    code: 'samples',
    title: 'samples in the record',
    value: n,
    unit: '',
    limit: `at least ${fewestSamples}`,
    source: 'own choice: five cycles of the 20 samples that are asked for',
    passed,
    forbids: passed ? [] : all,
    text: passed
      ? `The record has ${n} samples.`
      : `The record has ${n} samples; with fewer than ${fewestSamples} nothing can be said.`,
  };
}

function samplesACycle({ record, period }: Checked): FitnessCheck {
  const value = period === null ? null : period / record.samplePeriod;
  const passed = value === null || value >= fewestSamplesACycle;
  return {
    code: 'samples-per-cycle',
    title: 'samples in a cycle',
    value,
    unit: '',
    limit: `at least ${fewestSamplesACycle}; ${askedSamplesACycle} are asked for`,
    source:
      'Thornhill 2005, IEEE Trans. Control Syst. Technol. 13:434-443 (value from memory); 20: own choice, for the shape of a slip',
    passed,
    forbids: passed ? [] : causeAndNumbers,
    text:
      value === null
        ? 'No cycle was found, so that its samples cannot be counted.'
        : `A cycle has ${short(value)} samples${passed ? (value < askedSamplesACycle ? `, fewer than the ${askedSamplesACycle} asked for` : '') : `; below ${fewestSamplesACycle} its shape is lost`}.`,
  };
}

function reversals({ record: { op }, opCycle, opStep }: Checked): FitnessCheck {
  // Without a cycle, turns of OP that stand out of its noise, its rounding and its wandering are counted.
  const tolerance =
    op.length < 3 ? Infinity : Math.max(5 * noiseLevel(op), 2 * opStep, 0.2 * standardDeviation(op));
  const value = opCycle.present ? 2 * opCycle.cycles : countReversals(op, tolerance).count;
  const passed = value >= fewestReversals;
  return {
    code: 'reversals',
    title: 'reversals of OP',
    value,
    unit: '',
    limit: `at least ${fewestReversals}`,
    source: 'own choice: S shows at reversals, and its spread over the record needs ten of them',
    passed,
    forbids: passed ? [] : numbers,
    text: `OP turns round ${value} times${passed ? '' : `; fewer than ${fewestReversals} reversals are too few for S and J`}.`,
  };
}

function kept({ record: { logging } }: Checked): FitnessCheck {
  const passed = logging.keptShare >= leastKept;
  return {
    code: 'kept',
    title: 'share of the export that was used',
    value: logging.keptShare,
    unit: '',
    limit: `at least ${percent(leastKept)}`,
    source: 'own choice: below half, the stretch used may not stand for the export; a warning only',
    passed,
    forbids: warns,
    text: `The record is ${percent(logging.keptShare)} of the export${passed ? '' : ': the longest stretch in automatic, without a long gap or bad values'}.`,
  };
}

function gaps({ record: { logging } }: Checked): FitnessCheck {
  const share = logging.gaps / logging.rows;
  const passed = share <= mostGaps;
  return {
    code: 'gaps',
    title: 'gaps between rows',
    value: logging.gaps,
    unit: '',
    limit: `at most ${percent(mostGaps)} of the rows`,
    source:
      'own choice: more than one in a hundred points to a logger that skips; short gaps are counted as filled samples, long ones are cut out',
    passed,
    forbids: warns,
    text:
      logging.gaps === 0
        ? 'No step between rows is longer than 1.5 times the usual one.'
        : `${logging.gaps} steps between rows are longer than 1.5 times the usual one, the longest ${short(logging.longestGap)} s.`,
  };
}

function duplicates({ record: { logging } }: Checked): FitnessCheck {
  const share = logging.duplicates / logging.rows;
  const passed = share <= mostDuplicates;
  return {
    code: 'duplicates',
    title: 'rows with a repeated time stamp',
    value: logging.duplicates,
    unit: '',
    limit: `at most ${percent(mostDuplicates)} of the rows`,
    source:
      'own choice: more point to stamps cut to whole seconds or minutes, or to an export joined from pieces',
    passed,
    forbids: warns,
    text: `${logging.duplicates} of ${logging.rows} rows had a time stamp that was there before, and were left out.`,
  };
}

function badSamples({ record: { logging } }: Checked): FitnessCheck {
  const passed = logging.badShare <= mostBad;
  return {
    code: 'bad-samples',
    title: 'samples of bad quality or without a value',
    value: logging.badShare,
    unit: '',
    limit: `at most ${percent(mostBad)}`,
    source: 'own choice: long runs are cut out and short ones count as filled; a warning only',
    passed,
    forbids: warns,
    text: `${percent(logging.badShare)} of the samples were bad or without a value.`,
  };
}

function filled({ record: { logging } }: Checked): FitnessCheck {
  const value = logging.filledShare;
  const passed = value <= mostFilled;
  return {
    code: 'filled',
    title: 'samples carried forward to the common time grid',
    value,
    unit: '',
    limit: `at most ${percent(mostFilled)}; beyond ${percent(farTooMuchFilled)} no cause either`,
    source:
      'own choice: a value carried forward looks like a stem that rests, for a tenth of the time at most',
    passed,
    forbids: passed ? [] : value > farTooMuchFilled ? causeAndNumbers : numbers,
    text: `${percent(value)} of the samples carry the last value forward${passed ? '' : ', which looks like a stem at rest'}.`,
  };
}

function skew({ record, period }: Checked): FitnessCheck {
  const { logging, samplePeriod } = record;
  const limit = Math.max(skewOfSample * samplePeriod, skewOfCycle * (period ?? 0));
  const passed = logging.skew <= limit;
  return {
    code: 'skew',
    title: 'distance between the stamps of PV and OP',
    value: logging.skew,
    unit: 's',
    limit: `at most ${short(limit)} s`,
    source: `own choice: ${percent(skewOfCycle)} of the cycle moves S by about 4 % of OP's swing; half a sample is always allowed`,
    passed,
    forbids: passed ? [] : numbers,
    text:
      logging.skew === 0
        ? 'PV and OP were logged at the same stamps.'
        : `PV and OP were logged ${short(logging.skew)} s apart (median)${passed ? '' : ', too far for S and J'}.`,
  };
}
