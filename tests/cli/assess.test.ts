import { readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import Ajv from 'ajv';
import { beforeAll, describe, expect, it } from 'vitest';
import type { Assessment } from '../../src/assessment/assessment';
import schema from '../../src/assessment/assessment.schema.json';
import { cautions } from '../../src/assessment/cautions';
import { scratchFolder } from '../scratch-folder';
import { type Captured, captured } from './captured';

const sticky = 'data/31-FC-104.csv';
const [head, ...rows] = readFileSync(sticky, 'utf8').trim().split('\n');
const folder = scratchFolder();

/** A file made from the rows of the sticky demo loop. */
function fileOf(
  name: string,
  change: (fields: string[], row: number) => string[],
  keep = rows.length,
): string {
  const path = join(folder, name);
  const lines = rows.slice(0, keep).map((line, row) => change(line.split(','), row).join(','));
  writeFileSync(path, `${[head, ...lines].join('\n')}\n`);
  return path;
}

const column = (name: string): number => head!.split(',').findIndex((title) => title.endsWith(name));
const withField = (name: string, value: string) => (fields: string[]) =>
  fields.map((field, place) => (place === column(name) ? value : field));

describe('assess --json -', () => {
  let answer: Captured;
  beforeAll(async () => {
    answer = await captured('assess', sticky, '--json', '-');
  });

  it('puts JSON alone on stdout, in the shape of the schema that ships', () => {
    expect(answer.code).toBe(0);
    const validate = new Ajv({ allErrors: true, strict: true, allowUnionTypes: true }).compile(schema);
    const valid = validate(JSON.parse(answer.stdout));
    expect(validate.errors ?? []).toEqual([]);
    expect(valid).toBe(true);
  });

  it('tells the rest on stderr: progress, the summary, every caution', () => {
    const said = answer.stderr.replace(/\s+/g, ' ');
    expect(said).toContain('fitting the valve ...');
    expect(said).toContain('31-FC-104: Repair');
    for (const caution of cautions) expect(said).toContain(caution);
  });

  it('accuses the sticky loop and gives an interval that holds its true dead band', () => {
    const { cause, stiction, cautions: told } = JSON.parse(answer.stdout) as Assessment;
    expect(cause.verdict).toBe('stiction');
    // data/README.md: S of the two-parameter element that comes closest to the true travel.
    const truth = Number(
      /31-FC-104\.csv \|(?:[^|]*\|){4} ([\d.]+) \|/.exec(readFileSync('data/README.md', 'utf8'))![1],
    );
    expect(stiction!.S.low).toBeLessThan(truth);
    expect(stiction!.S.high).toBeGreaterThan(truth);
    expect(told).toEqual(cautions);
  });

  it('gives the same bytes again, with no path and no time of this run in them', async () => {
    const again = await captured('assess', join(process.cwd(), sticky), '--json', '-');
    expect(again.stdout).toBe(answer.stdout);
    expect(answer.stdout).not.toContain(process.cwd());
  });
});

describe('assess without a notebook', () => {
  it('prints the summary on stdout, writes the JSON whole, and makes nothing else', async () => {
    const out = scratchFolder();
    const json = join(out, 'deeper', 'result.json');
    const { code, stdout } = await captured('assess', sticky, '--no-notebook', '--json', json);
    expect(code).toBe(0);
    expect(stdout).toContain(cautions[0]);
    expect(stdout).toContain(json);
    expect(JSON.parse(readFileSync(json, 'utf8')).loop).toBe('31-FC-104');
    expect(readdirSync(join(out, 'deeper'))).toEqual(['result.json']);
  });

  const verdictOf = async (file: string): Promise<string> =>
    (JSON.parse((await captured('assess', file, '--json', '-')).stdout) as Assessment).cause.verdict;

  it('accuses the sticky valve whose travel was logged', async () => {
    expect(await verdictOf('data/31-FC-104-with-travel.csv')).toBe('stiction');
  });

  it('names what was built into the loops that do not stick, and cannot tell of one at most', async () => {
    const built = {
      'data/31-PC-122.csv': 'tight-tuning',
      'data/31-FC-131.csv': 'outside-disturbance',
      'data/31-LC-140.csv': 'lost-motion',
    };
    const wrong: string[] = [];
    for (const [file, cause] of Object.entries(built)) {
      const verdict = await verdictOf(file);
      if (verdict !== cause) wrong.push(verdict);
    }
    expect([[], ['cannot-tell']]).toContainEqual(wrong);
  });
});

describe('input that cannot be read', () => {
  it.each([
    ['no file of that name', () => join(folder, 'nowhere.csv'), /nowhere\.csv/],
    [
      'an empty file',
      () => {
        writeFileSync(join(folder, 'empty.csv'), '');
        return join(folder, 'empty.csv');
      },
      /empty/,
    ],
    [
      'a missing column',
      () => {
        const path = join(folder, 'no-op.csv');
        writeFileSync(path, `${[head!.replace('.OP', '.XX'), ...rows].join('\n')}\n`);
        return path;
      },
      /OP/,
    ],
    [
      'text in a number column',
      () =>
        fileOf('text.csv', (fields, row) =>
          row > 1000 && row < 3000 ? withField('.PV', 'abc')(fields) : fields,
        ),
      /PV|abc/,
    ],
    [
      'time going backwards',
      () =>
        fileOf('backwards.csv', (fields, row) =>
          row === 2000 ? [rows[10]!.split(',')[0]!, ...fields.slice(1)] : fields,
        ),
      /back/,
    ],
  ])('%s: exit code 2, a sentence, and nothing written', async (_, make, sentence) => {
    const out = join(scratchFolder(), 'out');
    const { code, stdout, stderr } = await captured('assess', make(), '--out', out);
    expect(code).toBe(2);
    expect(stdout).toBe('');
    expect(stderr).toMatch(sentence);
    expect(stderr.trim().split('\n')).toHaveLength(1);
    expect(() => readdirSync(out)).toThrow();
  });
});

describe('a record that answers nothing', () => {
  it.each([
    ['a constant OP', () => fileOf('constant.csv', withField('.OP', '50.00'))],
    ['twenty samples', () => fileOf('short.csv', (fields) => fields, 20)],
    ['a loop in manual', () => fileOf('manual.csv', withField('.MODE', 'MAN'))],
  ])('%s: exit code 0, cannot-tell, and the record to ask for', async (_, make) => {
    const { code, stdout, stderr } = await captured('assess', make(), '--json', '-');
    expect(stderr).toMatch(/cannot tell/i);
    expect(stderr.replace(/\s+/g, ' ')).toMatch(/20 samples in a cycle and at least 20 cycles/);
    expect(code).toBe(0);
    const assessment = JSON.parse(stdout) as Assessment;
    expect(assessment.cause).toMatchObject({ verdict: 'cannot-tell', confidence: null });
    expect(assessment.stiction).toBeNull();
    expect(JSON.stringify(assessment.next)).toMatch(/20 samples in a cycle and at least 20 cycles/);
  });
});

describe('output that cannot be written', () => {
  it('is said before anything is computed', async () => {
    const { code, stderr } = await captured('assess', sticky, '--out', join('package.json', 'out'));
    expect(code).toBe(2);
    expect(stderr).toMatch(/cannot be written to \(a part of the path is a file\)/);
    expect(stderr).not.toContain('fitting');
  });
});
