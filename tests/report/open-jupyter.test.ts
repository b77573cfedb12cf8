import { describe, expect, it } from 'vitest';
import { startOptions } from '../../src/report/open-jupyter';

describe('how Jupyter is opened', () => {
  it.each([
    [{ DISPLAY: ':0' }, 'linux', false, []],
    [{ WAYLAND_DISPLAY: 'wayland-0' }, 'linux', false, []],
    [{}, 'linux', false, ['--no-browser']],
    [{}, 'darwin', false, []],
    [{}, 'linux', true, ['--no-browser', '--allow-root']],
  ] as const)('with %j on %s (root: %s): %j', (environment, platform, root, options) => {
    expect(startOptions(environment, platform, root)).toEqual(options);
  });
});
