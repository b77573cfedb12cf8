/** `stickband notebook`: opens Jupyter with the guided notebook and its kernel ready. */
import { WrongUse } from '../errors';
import { ensureJupyter } from '../report/jupyter';
import { openJupyter } from '../report/open-jupyter';
import { workFolder } from '../report/places';
import { readArguments } from './arguments';
import { notebookHelp } from './help';
import type { Output } from './output';

export async function openNotebook(words: readonly string[], output: Output): Promise<void> {
  const given = readArguments('notebook', words, { install: 'boolean', help: 'boolean' });
  if (given.values.help) {
    output.stdout.write(`${notebookHelp}\n`);
    return;
  }
  if (given.words.length > 0) {
    throw new WrongUse(`stickband notebook takes no file; "${given.words.join(' ')}" was received.`);
  }
  const jupyter = ensureJupyter({
    install: given.values.install,
    say: (line) => output.stderr.write(`${line}\n`),
  });
  await openJupyter(jupyter, workFolder('assess-one-loop.ipynb'));
}
