import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { makeValveTests } from '../../data/make/valve-tests';

describe('records of valve tests', () => {
  it('are what the files in data/ hold', () => {
    for (const { name, csv } of makeValveTests()) {
      expect(readFileSync(`data/${name}.csv`, 'utf8') === csv, name).toBe(true);
    }
  });
});
