import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { expect, it } from 'vitest';

it('stickband notebook opens Jupyter on the guided notebook, with the TypeScript kernel there', async () => {
  // In a group of its own, so that Jupyter and its parent can be ended together.
  const child = spawn(process.execPath, [join('dist', 'cli', 'main.js'), 'notebook'], {
    detached: true,
    env: { ...process.env, DISPLAY: '', WAYLAND_DISPLAY: '' },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  try {
    const address = await new Promise<URL>((resolve, reject) => {
      let said = '';
      const listen = (piece: Buffer): void => {
        said += piece.toString();
        const found = /http:\/\/(?:localhost|127\.0\.0\.1):\d+\/\S*\?token=\w+/.exec(said);
        if (found) resolve(new URL(found[0]));
      };
      child.stdout.on('data', listen);
      child.stderr.on('data', listen);
      child.on('close', () => reject(new Error(`Jupyter ended early:\n${said}`)));
    });
    const ask = async (path: string): Promise<unknown> =>
      (await fetch(`${address.origin}/api/${path}${address.search}`)).json();
    expect(await ask('kernelspecs')).toMatchObject({
      kernelspecs: { tslab: { spec: { language: 'typescript' } } },
    });
    expect(await ask('contents/assess-one-loop.ipynb')).toMatchObject({ type: 'notebook' });
  } finally {
    process.kill(-child.pid!, 'SIGTERM');
  }
});
