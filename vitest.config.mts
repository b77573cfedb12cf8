import { defineConfig } from 'vitest/config';

/** Tests of what the program renders; they need Jupyter and a browser, which the set-up provides. */
const rendered = 'tests/rendered/**/*.test.ts';

export default defineConfig({
  test: {
    testTimeout: 60_000,
    hookTimeout: 600_000,
    reporters: ['default', 'json'],
    outputFile: { json: '.cache/tests.json' },
    projects: [
      { extends: true, test: { name: 'inside', include: ['tests/**/*.test.ts'], exclude: [rendered] } },
      {
        extends: true,
        test: {
          name: 'rendered',
          include: [rendered],
          globalSetup: 'tests/rendered/outside-tools.ts',
          testTimeout: 300_000,
        },
      },
    ],
  },
});
