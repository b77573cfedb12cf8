/** Runs one command line and gives its exit code. */
import { StickbandError, WrongUse } from '../errors';
import { version } from '../version';
import { assess } from './assess';
import { audit } from './audit';
import { generalHelp } from './help';
import { merge } from './merge';
import { openNotebook } from './notebook';
import type { Output } from './output';
import { valveTest } from './valve-test';

const commands: Readonly<Record<string, (words: string[], output: Output) => Promise<void>>> = {
  assess,
  audit,
  merge,
  notebook: openNotebook,
  'valve-test': valveTest,
};

/**
 * `words` are the arguments after the program's name. Resolves to 0 when an answer was made, 2 when the use, the
 * input, the output or a tool stands in the way (one sentence on stderr), 1 for a fault of our own.
 */
export async function run(words: readonly string[], output: Output): Promise<number> {
  const [name, ...rest] = words;
  try {
    if (name === undefined) throw new WrongUse(generalHelp);
    if (name === '--help' || name === '-h' || name === 'help') {
      output.stdout.write(`${generalHelp}\n`);
      return 0;
    }
    if (name === '--version') {
      output.stdout.write(`${version}\n`);
      return 0;
    }
    const command = Object.hasOwn(commands, name) ? commands[name]! : null;
    if (!command) {
      const known = Object.keys(commands).join(', ');
      throw new WrongUse(`There is no command "${name}". Commands are: ${known}. Try --help.`);
    }
    await command(rest, output);
    return 0;
  } catch (error) {
    if (error instanceof StickbandError) {
      output.stderr.write(`${error.message}\n`);
      return 2;
    }
    const trace = error instanceof Error ? error.stack : String(error);
    output.stderr.write(
      `A fault of stickband itself, not of your data. Please report it with this text:\n${trace}\n`,
    );
    return 1;
  }
}
