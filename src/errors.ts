/**
 * The ways in which stickband fails on purpose. Every message is a sentence (or several) that says what was
 * wrong, what was received and what to do. Anything else that is thrown is a fault of our own.
 */
export class StickbandError extends Error {
  override name = 'StickbandError';
}

/** A function, option or command was used wrongly: unknown option, size that does not fit, value out of range. */
export class WrongUse extends StickbandError {
  override name = 'WrongUse';
}

/** A file or data frame cannot be read as a loop record. */
export class UnreadableInput extends StickbandError {
  override name = 'UnreadableInput';
}

/** A result cannot be written where it was asked for. */
export class UnwritableOutput extends StickbandError {
  override name = 'UnwritableOutput';
}

/** A program that stands outside the package (Jupyter, a browser for the tests) is missing. */
export class MissingTool extends StickbandError {
  override name = 'MissingTool';
}

/** Throws {@link WrongUse} when `options` has a key that is not among `known`. */
export function refuseUnknownOptions(where: string, options: object, known: readonly string[]): void {
  for (const key of Object.keys(options)) {
    if (!known.includes(key)) {
      throw new WrongUse(`${where} has no option "${key}". Its options are: ${known.join(', ')}.`);
    }
  }
}
