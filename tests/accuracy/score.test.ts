import { describe, expect, it } from 'vitest';
import { expectClose } from '../closeness';
import { type Outcome, reasonOf } from './outcome';
import { printScore } from './print';
import { rate, scoreCauses, scoreConfidences, scoreNumbers, scoreOutcomes } from './score';
import { targetsOf } from './targets';

const plain: Outcome = {
  id: 'made',
  kind: 'stiction',
  cause: 'stiction',
  service: 'flow',
  noise: 'low',
  form: 'PI',
  cascade: false,
  compressed: false,
  visible: true,
  sort: 'stribeck',
  samples: 3600,
  truth: { model: 'slides-on', S: 4, J: 1, explains: 0.9, jumpAsGood: [0.8, 1.2] },
  verdict: 'stiction',
  confidence: 0.95,
  S: { value: 4, low: 3, high: 5, unit: '% of OP span' },
  J: { value: 1, low: 0.6, high: 1.4, unit: '% of OP span' },
  drawn: null,
  signs: null,
  refusals: [],
  causeRefusals: [],
  seconds: 1,
};

function estimate(value: number, half: number): Outcome['S'] {
  return { value, low: value - half, high: value + half, unit: '% of OP span' };
}

function outcome(changes: Partial<Outcome> = {}): Outcome {
  return { ...plain, ...changes };
}

const good = { cause: 'tight-tuning', kind: 'tight-tuning', truth: null, visible: false } as const;

describe('rate', () => {
  it('gives the score interval of Newcombe 1998, Statistics in Medicine 17:857-872, Table I (values from memory)', () => {
    for (const [hits, of, low, high] of [
      [81, 263, 0.2553, 0.3662],
      [15, 148, 0.0624, 0.1605],
      [0, 20, 0, 0.1611],
      [1, 29, 0.0061, 0.1718],
    ]) {
      const found = rate(hits, of);
      expectClose(found.low ?? Number.NaN, low, { absolute: 6e-5 }, `low of ${hits}/${of}`);
      expectClose(found.high ?? Number.NaN, high, { absolute: 6e-5 }, `high of ${hits}/${of}`);
    }
  });

  it('says nothing about nothing', () => {
    expect(rate(0, 0)).toEqual({ hits: 0, of: 0, share: null, low: null, high: null });
  });
});

describe('scoreNumbers', () => {
  it('takes errors, coverage and half widths over the true S', () => {
    const score = scoreNumbers([
      outcome({ S: estimate(4.4, 1), J: estimate(1, 0.4) }),
      outcome({ S: estimate(3, 0.5), J: estimate(1.8, 0.4) }),
      outcome({ S: estimate(4, 0.2), J: estimate(0.4, 0.8) }),
    ]);
    expect(score.scored).toBe(3);
    // Errors of S 0.4, 1 and 0 over 4; of J 0, 0.8 and 0.6 over 4.
    expectClose(score.S.error.median ?? 1, 0.1, { absolute: 1e-12 });
    expectClose(score.S.error.p90 ?? 1, 0.1 + 0.8 * 0.15, { absolute: 1e-12 });
    expectClose(score.J.error.median ?? 1, 0.15, { absolute: 1e-12 });
    expect(score.S.held).toMatchObject({ hits: 2, of: 3 });
    expect(score.J.held).toMatchObject({ hits: 2, of: 3 });
    expectClose(score.S.halfWidth.median ?? 1, 0.125, { absolute: 1e-12 });
    // J is 0, 0.6 and 0.4 outside 0.8 to 1.2.
    expectClose(score.outsideJumpAsGood.median ?? 1, 0.1, { absolute: 1e-12 });
  });

  it('counts what was withheld, and leaves out what the element does not explain', () => {
    const score = scoreNumbers([
      outcome(),
      outcome({ J: null }),
      outcome({ S: null, J: null }),
      outcome({ S: null, J: null, compressed: true }),
      outcome({ truth: { ...plain.truth!, explains: 0.59 }, S: estimate(40, 1) }),
      outcome({ truth: null }),
    ]);
    expect(score.scored).toBe(4);
    expect(score.S.error).toEqual({ count: 2, median: 0, p90: 0 });
    expect(score.J.error.count).toBe(1);
    expect(score.withheld).toMatchObject({ hits: 2, of: 4 });
    expect(score.withheldUncompressed).toMatchObject({ hits: 1, of: 3 });
    expect(score.unresolved).toMatchObject({ hits: 3, of: 4 });
    expect(score.unresolvedWithS).toMatchObject({ hits: 1, of: 2 });
  });
});

describe('scoreCauses', () => {
  it('looks for stiction among the visible cases and for false stiction among good valves', () => {
    const score = scoreCauses([
      outcome(),
      outcome({ verdict: 'cannot-tell', confidence: null }),
      outcome({ verdict: 'cannot-tell', confidence: null, compressed: true }),
      outcome({ verdict: 'outside-disturbance' }),
      outcome({ verdict: 'not-oscillating', visible: false }),
      outcome({ ...good, verdict: 'stiction' }),
      outcome({ ...good, verdict: 'tight-tuning' }),
      outcome({ ...good, cause: 'lost-motion', kind: 'lost-motion', verdict: 'stiction' }),
    ]);
    expect(score.right).toMatchObject({ hits: 2, of: 8 });
    expect(score.refused).toMatchObject({ hits: 2, of: 8 });
    expect(score.named).toMatchObject({ hits: 1, of: 4 });
    expect(score.namedOrRefused).toMatchObject({ hits: 3, of: 4 });
    expect(score.namedUncompressed).toMatchObject({ hits: 1, of: 3 });
    expect(score.namedOrRefusedUncompressed).toMatchObject({ hits: 2, of: 3 });
    expect(score.falseStiction).toMatchObject({ hits: 1, of: 2 });
  });
});

describe('scoreConfidences', () => {
  it('weighs the gap of each bin by its verdicts', () => {
    const said = (confidence: number | null, right: boolean): Outcome =>
      outcome({
        confidence,
        verdict: confidence === null ? 'cannot-tell' : right ? 'stiction' : 'lost-motion',
      });
    const { bins, byVerdict, gap } = scoreConfidences([
      said(0.92, true),
      said(0.94, true),
      said(1, false),
      said(0.7, false),
      said(null, false),
    ]);
    expect(bins[9].right).toMatchObject({ hits: 2, of: 3 });
    expectClose(bins[9].said ?? 0, (0.92 + 0.94 + 1) / 3, { absolute: 1e-12 });
    expect(bins[7].right).toMatchObject({ hits: 0, of: 1 });
    expect(bins[6].right.of).toBe(0);
    expectClose(gap ?? 1, (3 * (2.86 / 3 - 2 / 3) + 1 * 0.7) / 4, { absolute: 1e-12 });
    expect(byVerdict.stiction.right).toMatchObject({ hits: 2, of: 2 });
    expect(byVerdict['lost-motion'].right).toMatchObject({ hits: 0, of: 2 });
  });

  it('has no gap without a confidence', () => {
    expect(scoreConfidences([outcome({ verdict: 'cannot-tell', confidence: null })]).gap).toBeNull();
  });
});

describe('scoreOutcomes', () => {
  const outcomes = [
    outcome(),
    outcome({
      service: 'level',
      noise: 'high',
      S: null,
      J: null,
      refusals: ['op-compressed'],
      compressed: true,
    }),
    outcome({ ...good, S: null, J: null, verdict: 'cannot-tell', causeRefusals: ['op-clipped'] }),
    outcome({ ...good, verdict: 'stiction' }),
    outcome({ ...good, cause: 'lost-motion', kind: 'lost-motion', truth: plain.truth, S: estimate(8, 1) }),
  ];
  const score = scoreOutcomes(outcomes);

  it('keeps records with stiction apart from lost motion and good valves', () => {
    expect(score.cases).toBe(5);
    expect(score.stiction.scored).toBe(2);
    expect(score.lostMotion.S.error.median).toBe(1);
    expect(score.by.kind['lost-motion'].numbers.S.error.median).toBe(1);
    expect(score.by.service.flow).toMatchObject({ cases: 4, numbers: { scored: 1 } });
    expect(score.by.noise.high.numbers.withheld).toMatchObject({ hits: 1, of: 1 });
    expect(score.numbersForGoodValves).toMatchObject({ hits: 1, of: 2 });
    expect(score.lostMotionNamedStiction).toMatchObject({ hits: 1, of: 1 });
    expect(score.confusion['tight-tuning']).toMatchObject({
      'cannot-tell': 1,
      stiction: 1,
      'lost-motion': 0,
    });
    expect(score.compressionSeen).toMatchObject({ hits: 1, of: 1 });
    expect(score.compressionFalse).toMatchObject({ hits: 0, of: 4 });
    expect(score.refusals).toEqual({
      stiction: { 'op-compressed': 1 },
      others: {},
      cause: { 'op-clipped': 1 },
    });
  });

  it('is held against the targets and printed', () => {
    const met = Object.fromEntries(targetsOf(score).map(({ what, met }) => [what, met]));
    expect(met['S error, median / 90th percentile']).toBe(true);
    expect(met['numbers withheld']).toBe(false);
    expect(met['90 % intervals hold S']).toBe(false);
    expect(met['half width of S over S, median']).toBe(false);
    expect(met['stiction named where it is not']).toBe(false);
    expect(printScore('Set made', score)).toContain('tight-tuning');
  });
});

describe('reasonOf', () => {
  it('names a sentence by its fitness check, else masks its numbers', () => {
    const text = 'OP stands at its limit in 40 % of the samples.';
    expect(reasonOf(text, [{ code: 'op-clipped', text }])).toBe('op-clipped');
    expect(reasonOf('Noise of 0.24 % at t = -2.1.', [])).toBe('Noise of # % at t = #.');
  });
});
