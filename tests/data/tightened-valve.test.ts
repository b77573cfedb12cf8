import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { toCsv } from '../../data/make/export';
import { makeTightenedValve, TIGHTENED_VALVE } from '../../data/make/tightened-valve';

it('the record of the tightened valve is what the file in data/ holds', () => {
  const file = readFileSync(join(__dirname, '../../data', `${TIGHTENED_VALVE.name}.csv`), 'utf8');
  expect(toCsv(makeTightenedValve(), TIGHTENED_VALVE.seed) === file).toBe(true);
});
