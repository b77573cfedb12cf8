/**
 * Builds dist/ afresh: what the compiler makes, the schema, the Python script, and the right to run the program.
 * Does nothing when dist/ is newer than everything that it is made from.
 */
const { spawnSync } = require('node:child_process');
const {
  chmodSync,
  copyFileSync,
  existsSync,
  readdirSync,
  rmSync,
  statSync,
  writeFileSync,
} = require('node:fs');
const { join } = require('node:path');

const root = join(__dirname, '..');
const dist = join(root, 'dist');
const stamp = join(dist, '.built');

const sources = readdirSync(join(root, 'src'), { recursive: true }).map((name) => join(root, 'src', name));
const inputs = [...sources, join(root, 'tsconfig.json'), join(root, 'package-lock.json'), __filename];
const builtAt = existsSync(stamp) ? statSync(stamp).mtimeMs : 0;
if (inputs.every((path) => statSync(path).mtimeMs < builtAt)) process.exit(0);

rmSync(dist, { recursive: true, force: true });
const compiler = join(root, 'node_modules', 'typescript', 'bin', 'tsc');
const { status } = spawnSync(process.execPath, [compiler, '-p', root], { stdio: 'inherit' });
if (status !== 0) process.exit(status ?? 1);
for (const file of [
  'assessment/assessment.schema.json',
  'audit/audit.schema.json',
  'field-test/valve-test.schema.json',
  'report/run-notebook.py',
]) {
  copyFileSync(join(root, 'src', file), join(dist, file));
}
chmodSync(join(dist, 'cli', 'main.js'), 0o755);
writeFileSync(stamp, '');
