import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import Ajv from 'ajv';
import { describe, expect, it } from 'vitest';
import { valveTestCautions } from '../../src/assessment/cautions';
import type { ValveTestReading } from '../../src/field-test/valve-test-reading';
import { scratchFolder } from '../scratch-folder';
import { captured } from './captured';

const folder = scratchFolder();
const schema = JSON.parse(readFileSync('src/field-test/valve-test.schema.json', 'utf8'));
const validate = new Ajv({ allErrors: true, strict: false }).compile(schema);
const size = ['--area', '645 cm2', '--stroke', '101.6 mm'];

const json = async (...words: string[]): Promise<ValveTestReading> => {
  const { code, stdout, stderr } = await captured('valve-test', ...words, '--json', '-');
  expect(code, stderr).toBe(0);
  return JSON.parse(stdout);
};

/** Every number within a value. */
function numbersIn(value: unknown): number[] {
  if (typeof value === 'number') return [value];
  return value && typeof value === 'object' ? Object.values(value).flatMap(numbersIn) : [];
}

describe('stickband valve-test', () => {
  it.each([
    ['hold', 'data/31-FC-104-hold-test.csv'],
    ['step', 'data/31-FC-104-step-test.csv'],
    ['stroke', 'data/31-FC-104-stroke.csv'],
    ['stroke', 'data/31-FC-104-strokes-at-seven-speeds.csv'],
  ])('gives a %s test as JSON of the shipped schema: %s', async (kind, file) => {
    const reading = await json(file, ...size);
    expect(validate(reading), JSON.stringify(validate.errors)).toBe(true);
    expect(Object.keys(reading)).toEqual([
      'schema',
      'kind',
      'deadBand',
      'resolution',
      'hysteresis',
      'steps',
      'S',
      'J',
      'notes',
      'cautions',
    ]);
    expect(reading.kind).toBe(kind);
    expect(reading.cautions).toEqual(valveTestCautions);
    expect(numbersIn(reading).every(Number.isFinite)).toBe(true);
  });

  it('reads the demo valve as it was built: S 3.4 %, J 1.6 %', async () => {
    for (const file of ['data/31-FC-104-step-test.csv', 'data/31-FC-104-stroke.csv']) {
      const { deadBand, resolution } = await json(file);
      for (const [one, truth] of [
        [deadBand!, 3.4],
        [resolution!, 1.6],
      ] as const) {
        expect(one.low).toBeLessThanOrEqual(truth);
        expect(one.high).toBeGreaterThanOrEqual(truth);
      }
    }
    const held = await json('data/31-FC-104-hold-test.csv');
    expect(held.notes.map(({ code }) => code)).toContain('cycle-died');
  });

  it('gives equal bytes twice, and writes them to a file beside a summary with cautions', async () => {
    const file = join(folder, 'reading.json');
    const words = ['valve-test', 'data/31-FC-104-stroke.csv', ...size];
    const first = await captured(...words, '--json', '-');
    const { code, stdout, stderr } = await captured(...words, '--json', file);
    expect([code, stderr]).toEqual([0, '']);
    expect(readFileSync(file, 'utf8')).toBe(first.stdout);
    expect(stdout).toContain('Spring rate');
    expect(stdout).toContain('Cautions');
    // With JSON on stdout the summary goes to stderr.
    expect(first.stderr).toContain('Cautions');
    expect(first.stdout).not.toContain('Numbers (JSON)');
  });

  it('says what it takes', async () => {
    const { stdout } = await captured('valve-test', '--help');
    for (const option of ['--kind', '--pressure', '--area', '--stroke', '--json'])
      expect(stdout).toContain(option);
    expect((await captured('--help')).stdout).toContain('stickband valve-test FILE');
  });

  it.each([
    [['valve-test'], /takes one FILE; none was received/],
    [['valve-test', 'none.csv'], /no file "none\.csv"/],
    [['valve-test', 'data/31-FC-104.csv'], /record of a loop and no valve test/],
    [['valve-test', 'data/31-FC-104-stroke.csv', '--kind', 'ramp'], /--kind takes one of hold, step, stroke/],
    [
      ['valve-test', 'data/31-FC-104-stroke.csv', '--area', '645'],
      /"area" needs a number above 0 with its unit/,
    ],
    [['valve-test', 'data/31-FC-104-stroke.csv', '--area', '3 bar'], /different things/],
    [['valve-test', 'data/31-FC-104-hold-test.csv', '--period', 'long'], /--period takes a number/],
  ])('answers wrong use %j with exit code 2 and a sentence on stderr', async (words, sentence) => {
    const { code, stdout, stderr } = await captured(...words);
    expect([code, stdout]).toEqual([2, '']);
    expect(stderr).toMatch(sentence);
  });
});
