import { describe, expect, it } from 'vitest';
import { fitCaveats, recordCaveats } from '../../src/figures/caveats';
import type { FitnessCheck } from '../../src/record/fitness';
import { fixtureFindings } from './findings-fixture';

const check = (code: string, passed: boolean, forbids: FitnessCheck['forbids']): FitnessCheck => ({
  code,
  title: code,
  value: 1,
  unit: '',
  limit: '',
  source: '',
  passed,
  forbids,
  text: `${code} said.`,
});

describe('recordCaveats', () => {
  it('has none for a fit record and a clear verdict', () => {
    expect(recordCaveats(fixtureFindings())).toEqual([]);
  });

  it('says cannot-tell with its reason, checks that forbid something, and what changes the picture', () => {
    const found = recordCaveats(
      fixtureFindings({
        verdict: 'cannot-tell',
        checks: [check('a', false, ['numbers']), check('b', false, []), check('c', true, ['cause'])],
        notes: [
          { code: 'valve-range', text: 'OP was scaled.' },
          { code: 'rows-left-out', text: 'Three rows left out.' },
        ],
      }),
    );
    expect(found).toEqual([
      'cannot-tell: The record was compressed before it was stored, and its straight pieces imitate stiction.',
      'a said.',
      'OP was scaled.',
    ]);
  });

  it('stamps no more than three and says how many are left', () => {
    const checks = ['a', 'b', 'c', 'd', 'e'].map((code) => check(code, false, ['cause']));
    expect(recordCaveats(fixtureFindings({ checks }))).toEqual([
      'a said.',
      'b said.',
      '3 more caveats stand in the text.',
    ]);
  });
});

describe('fitCaveats', () => {
  it('forbids quoting a fit whose numbers are refused', () => {
    expect(fitCaveats(fixtureFindings())).toEqual([]);
    expect(fitCaveats(fixtureFindings({ fit: 'refused' }))).toEqual([
      'No numbers to quote from this fit: the element explains less than half of the travel.',
    ]);
  });

  it('says that the response was not stated', () => {
    const findings = fixtureFindings();
    const unknown = { ...findings, record: { ...findings.record, response: 'unknown' as const } };
    expect(fitCaveats(unknown)).toEqual([
      'Whether the process is self-regulating or integrating was not stated; the better fit is shown.',
    ]);
  });
});
