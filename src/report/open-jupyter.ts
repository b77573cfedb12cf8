/** Opens Jupyter's own window on a folder, with our kernel ready. */
import { spawn, spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { MissingTool } from '../errors';
import { type Jupyter, kernelEnvironment } from './jupyter';

/** Programs that show notebooks, the wanted one first. */
const programs = ['notebook', 'jupyterlab'];

/**
 * Runs until Jupyter is closed. No browser is opened where there is no display to open it on. Throws
 * {@link MissingTool} when this Jupyter can run notebooks but not show them.
 */
export async function openJupyter(jupyter: Jupyter, folder: string): Promise<void> {
  const program = programs.find((name) => spawnSync(jupyter.python, ['-c', `import ${name}`]).status === 0);
  if (!program) {
    throw new MissingTool(
      `The Jupyter of ${jupyter.python} can run notebooks but has no window for them: ` +
        `"${jupyter.python} -m pip install notebook" adds it.`,
    );
  }
  const scratch = mkdtempSync(join(tmpdir(), 'stickband-'));
  const words = ['-m', program, ...startOptions(process.env, process.platform, process.getuid?.() === 0)];
  const ignore = (): void => {}; // Ctrl-C goes to Jupyter, which asks and then ends; we wait for that.
  process.on('SIGINT', ignore);
  try {
    await new Promise<void>((resolve, reject) => {
      const child = spawn(jupyter.python, words, {
        cwd: folder,
        env: kernelEnvironment(scratch),
        stdio: 'inherit',
      });
      child.on('error', reject);
      child.on('close', () => resolve());
    });
  } finally {
    process.off('SIGINT', ignore);
    rmSync(scratch, { recursive: true, force: true });
  }
}

/** Root must say that it is root; without a display there is no browser to open. */
export function startOptions(
  environment: NodeJS.ProcessEnv,
  platform: NodeJS.Platform,
  root: boolean,
): string[] {
  const display = platform !== 'linux' || Boolean(environment.DISPLAY || environment.WAYLAND_DISPLAY);
  return [...(display ? [] : ['--no-browser']), ...(root ? ['--allow-root'] : [])];
}
