import { describe, expect, it } from 'vitest';
import type { Cause, Verdict } from '../../src/assessment/assessment';
import { nextSteps } from '../../src/assessment/next-steps';

const verdicts: readonly Verdict[] = [
  'stiction',
  'lost-motion',
  'tight-tuning',
  'outside-disturbance',
  'not-oscillating',
  'cannot-tell',
];
const ask = 'Ask for raw values.';

function stepsFor(verdict: Verdict): ReturnType<typeof nextSteps> {
  const cause: Cause = { verdict, confidence: null, reasons: [], ruledOut: [], also: [] };
  return nextSteps(Object.freeze(cause), ask);
}

describe('nextSteps', () => {
  it('gives each step what to do, why, and a caution of its own, in sentences', () => {
    for (const verdict of verdicts) {
      for (const step of stepsFor(verdict)) {
        for (const text of [step.do, step.why, step.caution]) expect(text).toMatch(/^[A-Z].*\.$/);
      }
    }
  });

  it('asks for nothing where the loop does not oscillate', () => {
    expect(stepsFor('not-oscillating')).toEqual([]);
  });

  it('holds the loop in manual, with consent and inside limits, before anything else is tried on it', () => {
    for (const verdict of verdicts.filter((one) => one !== 'not-oscillating' && one !== 'cannot-tell')) {
      const [first] = stepsFor(verdict);
      expect(first.do).toMatch(/manual at constant OP/);
      expect(first.do).toMatch(/consent of operations/);
      expect(first.do).toMatch(/PV limits/);
      expect(first.do).toMatch(/three to five periods/);
      expect(first.caution).toMatch(/returns it to automatic/);
    }
  });

  it('asks for a better record first where this one does not decide, and then for the deciding tests in order', () => {
    const steps = stepsFor('cannot-tell');
    expect(steps[0].do).toBe(ask);
    const manual = steps.findIndex((step) => /manual/.test(step.do));
    const gain = steps.findIndex((step) => /gain/.test(step.do));
    expect(manual).toBeGreaterThan(0);
    expect(gain).toBeGreaterThan(manual);
  });

  it('only ever reduces a gain, and under management of change', () => {
    for (const verdict of verdicts) {
      for (const step of stepsFor(verdict).filter(({ do: text }) => /controller gain/.test(text))) {
        expect(step.do).toMatch(/reduce/);
        expect(step.do).toMatch(/management of change/);
        expect(step.caution).toMatch(/never raise/);
      }
    }
  });

  it('sends people to the valve only where the valve is accused', () => {
    for (const verdict of verdicts) {
      const text = stepsFor(verdict)
        .map((step) => step.do)
        .join(' ');
      const accused = verdict === 'stiction' || verdict === 'lost-motion';
      expect(/valve test|work request|linkage/.test(text), verdict).toBe(accused);
    }
  });

  it('does not share its steps with a caller who changes them', () => {
    stepsFor('stiction').length = 0;
    expect(stepsFor('stiction').length).toBeGreaterThan(0);
  });
});
