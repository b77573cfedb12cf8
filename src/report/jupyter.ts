/**
 * Finds a Jupyter that can run notebooks, or sets one up: first with pip in the checkout's `.venv`, then with
 * Debian's packages. The kernel is described in a folder of our own on JUPYTER_PATH, so the user's own Jupyter
 * stays as it is.
 */
import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { delimiter, dirname, join } from 'node:path';
import { MissingTool } from '../errors';
import { canInstallDebianPackages, installDebianPackages } from './debian-packages';
import { inCheckout, packageFolder } from './places';

export interface Jupyter {
  /** Absolute path of the Python interpreter that has Jupyter. */
  readonly python: string;
}

export interface JupyterSetUp {
  /** Whether system packages may be installed (by root on Debian). Default: only when the variable CI is set. */
  readonly install?: boolean;
  /** Receives one line for every step of the set-up. Default: silence. */
  readonly say?: (line: string) => void;
}

const windows = process.platform === 'win32';
const pipPackages = ['notebook', 'nbclient', 'jupyter-client'];
const debianPackages = ['jupyter-notebook', 'jupyter-client', 'python3-nbclient'];

/** The Jupyter that is there: the installed `jupyter`, a `.venv`, or a Python on the PATH that has it; else null. */
export function findJupyter(): Jupyter | null {
  const environments = [...new Set([packageFolder, process.cwd()])].map((folder) => join(folder, '.venv'));
  const candidates = [...pythonsOfJupyterOnPath(), ...environments.map(pythonOf), 'python3', 'python'];
  for (const candidate of new Set(candidates)) {
    const python = probe(candidate);
    if (python) return { python };
  }
  return null;
}

/**
 * The Jupyter that is there, else one that is set up now.
 *
 * pip is tried only in a checkout of the repository, or when `install` is true, so that nothing is downloaded
 * unasked into the folder of someone who installed the package. Throws {@link MissingTool} with the ways to get
 * Jupyter when all of that fails.
 */
export function ensureJupyter(options: JupyterSetUp = {}): Jupyter {
  const found = findJupyter();
  if (found) return found;
  const say = options.say ?? ((): void => {});
  const install = options.install ?? Boolean(process.env.CI);
  const failures: string[] = [];

  if (inCheckout || install) {
    const folder = join(inCheckout ? packageFolder : process.cwd(), '.venv');
    const failure = setUpWithPip(folder, say);
    if (failure) failures.push(`pip could not set it up: ${failure}`);
  }
  if (!findJupyter() && install && canInstallDebianPackages()) {
    say('Installing Jupyter from Debian. This takes about two minutes.');
    const failure = installDebianPackages(debianPackages, say);
    if (failure) failures.push(`apt-get could not set it up: ${failure}`);
  }
  const setUp = findJupyter();
  if (setUp) return setUp;
  throw new MissingTool(
    [
      'Jupyter was not found, and the guided notebook needs it.',
      ...failures.map((failure) => `${failure.replace(/[.\s]*$/, '')}.`),
      'Any one of these gives it:',
      `"python3 -m venv .venv && .venv/bin/pip install ${pipPackages.join(' ')}" in this folder;`,
      `"apt-get install ${debianPackages.join(' ')}" as root on Debian or Ubuntu;`,
      'or the option --install, which tries both.',
      'Without Jupyter, --no-notebook still gives the summary and --json the numbers.',
    ].join(' '),
  );
}

/** Environment in which Jupyter finds our kernel and keeps its run-time files in `folder`, which is ours to write in. */
export function kernelEnvironment(folder: string): NodeJS.ProcessEnv {
  const data = join(folder, 'share', 'jupyter');
  const kernel = join(data, 'kernels', 'tslab');
  mkdirSync(kernel, { recursive: true });
  const script = join(dirname(require.resolve('tslab/package.json')), 'bin', 'tslab');
  const description = {
    argv: [process.execPath, script, 'kernel', '--config-path', '{connection_file}'],
    display_name: 'TypeScript',
    language: 'typescript',
  };
  writeFileSync(join(kernel, 'kernel.json'), JSON.stringify(description));
  const path = [data, process.env.JUPYTER_PATH].filter(Boolean).join(delimiter);
  return {
    ...process.env,
    JUPYTER_PATH: path,
    JUPYTER_RUNTIME_DIR: join(folder, 'runtime'),
    IPYTHONDIR: join(folder, 'ipython'),
  };
}

function pythonOf(environment: string): string {
  return windows ? join(environment, 'Scripts', 'python.exe') : join(environment, 'bin', 'python');
}

/** Interpreters named by the first line of every `jupyter` on the PATH (beside it, on Windows). */
function pythonsOfJupyterOnPath(): string[] {
  const pythons: string[] = [];
  for (const folder of (process.env.PATH ?? '').split(delimiter)) {
    const script = join(folder, windows ? 'jupyter.exe' : 'jupyter');
    if (!existsSync(script)) continue;
    if (windows) {
      pythons.push(join(folder, 'python.exe'), join(folder, '..', 'python.exe'));
      continue;
    }
    const words = readFileSync(script, 'utf8')
      .split('\n', 1)[0]!
      .replace(/^#!\s*/, '')
      .split(/\s+/);
    const interpreter = words[0]!.endsWith('/env') ? words[1] : words[0];
    if (interpreter && /python|pypy/.test(interpreter)) pythons.push(interpreter);
  }
  return pythons;
}

/** Absolute path of the interpreter when it has what running a notebook takes, else ''. */
function probe(python: string): string {
  // Looked for, not imported: that would take a second.
  const code = [
    'import sys; from importlib.util import find_spec',
    "sys.exit(1) if None in map(find_spec, ('jupyter_client', 'nbclient', 'nbformat')) else print(sys.executable)",
  ].join('\n');
  const run = spawnSync(python, ['-c', code], { encoding: 'utf8', timeout: 60_000 });
  return run.status === 0 ? run.stdout.trim() : '';
}

/** Returns '' when all went well, else why not. An environment that could not be filled is taken away again. */
function setUpWithPip(folder: string, say: (line: string) => void): string {
  if (existsSync(folder)) return `${folder} is there already, without Jupyter`;
  const base = ['python3', 'python'].find((name) => spawnSync(name, ['--version']).status === 0);
  if (!base) return 'there is no Python 3 on the PATH';
  const pip = [
    '-m',
    'pip',
    'install',
    '--quiet',
    '--disable-pip-version-check',
    '--timeout',
    '20',
    '--retries',
    '0',
  ];
  const steps: [string, string[]][] = [
    [base, ['-m', 'venv', folder]],
    [pythonOf(folder), [...pip, ...pipPackages]],
  ];
  for (const [command, words] of steps) {
    say([command, ...words].join(' '));
    const run = spawnSync(command, words, { encoding: 'utf8', stdio: ['ignore', 'pipe', 'pipe'] });
    if (run.status === 0) continue;
    rmSync(folder, { recursive: true, force: true });
    const printed = `${run.stderr ?? ''}${run.error?.message ?? ''}`.trim();
    return printed.split('\n').at(-1) || 'it failed without a word';
  }
  return '';
}
