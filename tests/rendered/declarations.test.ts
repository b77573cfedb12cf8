/** The declarations that the build gives, as the kernel's TypeScript 5.0 reads them. */
import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';

describe('the emitted declarations', () => {
  it('name no generic typed array, which TypeScript 5.0 takes for any without a word', () => {
    const files = readdirSync('dist', { recursive: true, encoding: 'utf8' }).filter((name) =>
      name.endsWith('.d.ts'),
    );
    expect(files).toContain('index.d.ts');
    const bad = files.filter((name) =>
      readFileSync(join('dist', name), 'utf8').includes('Array<ArrayBuffer'),
    );
    expect(bad).toEqual([]);
  });

  it('stand beside the schema of the result', () => {
    const schema = JSON.parse(readFileSync('dist/assessment/assessment.schema.json', 'utf8'));
    expect(schema.properties.schema.const).toBe('stickband/assessment/1');
  });
});
