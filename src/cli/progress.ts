/** Progress on stderr: a moving bar on a terminal, else one plain line a step, or nothing. */
import { Presets, SingleBar } from 'cli-progress';
import type { Output } from './output';

export interface Progress {
  /** `step` is what is being done now, `share` how much of the whole is done, 0..1. */
  (step: string, share: number): void;
  /** Takes the bar away; further output starts on a fresh line. */
  stop(): void;
}

/** @param elsewhere what is written where no terminal is: a line for each step, or nothing when steps are many */
export function startProgress(stderr: Output['stderr'], elsewhere: 'lines' | 'quiet' = 'lines'): Progress {
  if (stderr.isTTY) return movingBar(stderr as NodeJS.WriteStream);
  return elsewhere === 'lines' ? plainLines(stderr) : Object.assign(() => {}, { stop: () => {} });
}

function movingBar(stream: NodeJS.WriteStream): Progress {
  const bar = new SingleBar(
    { format: '{bar} {percentage} %  {step}', stream, hideCursor: true, clearOnComplete: true, barsize: 30 },
    Presets.rect,
  );
  bar.start(100, 0, { step: '' });
  const show = (step: string, share: number): void => bar.update(Math.round(100 * share), { step });
  return Object.assign(show, { stop: () => bar.stop() });
}

function plainLines(stderr: Output['stderr']): Progress {
  let last = '';
  const show = (step: string): void => {
    if (step !== last && step !== 'done') stderr.write(`${step} ...\n`);
    last = step;
  };
  return Object.assign(show, { stop: () => {} });
}
