/** Options of the measuring commands. */

/** The whole number above 0 that an option was given. */
export function wholeOption(name: string, text: string): number {
  const value = Number(text);
  if (!(Number.isInteger(value) && value > 0)) {
    throw new Error(`--${name} takes whole numbers above 0. Received ${text}.`);
  }
  return value;
}
