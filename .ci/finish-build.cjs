/** Puts into dist/ what the compiler does not: the schema, the Python script, and the right to run the program. */
const { chmodSync, copyFileSync } = require('node:fs');
const { join } = require('node:path');

const root = join(__dirname, '..');
for (const file of ['assessment/assessment.schema.json', 'report/run-notebook.py']) {
  copyFileSync(join(root, 'src', file), join(root, 'dist', file));
}
chmodSync(join(root, 'dist', 'cli', 'main.js'), 0o755);
