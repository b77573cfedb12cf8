/** Reads the words of one command: its options and its one FILE, with sentences for what is wrong. */
import { type ParseArgsConfig, parseArgs } from 'node:util';
import { WrongUse } from '../errors';

type OptionTypes = Readonly<Record<string, 'string' | 'boolean'>>;
type Values<Types extends OptionTypes> = {
  [Name in keyof Types]?: Types[Name] extends 'boolean' ? boolean : string;
};

export interface Arguments<Types extends OptionTypes> {
  readonly values: Values<Types>;
  /** Words that are not options. */
  readonly words: string[];
}

/** Throws {@link WrongUse} for an unknown option, one without its value, or one given twice. */
export function readArguments<Types extends OptionTypes>(
  command: string,
  words: readonly string[],
  types: Types,
): Arguments<Types> {
  const options: NonNullable<ParseArgsConfig['options']> = {};
  for (const [name, type] of Object.entries(types)) options[name] = { type, multiple: false };
  const advice = `"stickband ${command} --help" lists the options.`;
  try {
    const { values, positionals, tokens } = parseArgs({
      args: [...words],
      options,
      allowPositionals: true,
      tokens: true,
    });
    const seen = new Set<string>();
    for (const token of tokens) {
      if (token.kind !== 'option') continue;
      if (seen.has(token.name)) throw new WrongUse(`--${token.name} was given twice. ${advice}`);
      seen.add(token.name);
    }
    return { values: values as Values<Types>, words: positionals };
  } catch (error) {
    if (error instanceof WrongUse) throw error;
    throw new WrongUse(`${(error as Error).message.split('\n')[0]!.replace(/\.?$/, '.')} ${advice}`);
  }
}

/** A number from the text of an option. Throws {@link WrongUse}. */
export function numberOption(name: string, text: string): number {
  const value = Number(text);
  if (text.trim() === '' || !Number.isFinite(value)) {
    throw new WrongUse(`--${name} takes a number, with a point for decimals; "${text}" was received.`);
  }
  return value;
}

/** A whole number from 0 on. Throws {@link WrongUse}. */
export function wholeOption(name: string, text: string): number {
  const value = numberOption(name, text);
  if (!(Number.isInteger(value) && value >= 0)) {
    throw new WrongUse(`--${name} takes a whole number from 0 on; "${text}" was received.`);
  }
  return value;
}

/** `LOW:HIGH` as a range. Throws {@link WrongUse}. */
export function rangeOption(name: string, text: string): { low: number; high: number } {
  const [low, high, ...more] = text
    .split(':')
    .map((part) => (part.trim() === '' ? Number.NaN : Number(part)));
  if (more.length > 0 || !Number.isFinite(low) || !Number.isFinite(high) || low! >= high!) {
    throw new WrongUse(
      `--${name} takes LOW:HIGH with LOW below HIGH, e.g. --${name}=0:120; "${text}" was received.`,
    );
  }
  return { low: low!, high: high! };
}

/** One of the words allowed. Throws {@link WrongUse}. */
export function wordOption<Word extends string>(name: string, text: string, allowed: readonly Word[]): Word {
  if (!(allowed as readonly string[]).includes(text)) {
    throw new WrongUse(`--${name} takes one of ${allowed.join(', ')}; "${text}" was received.`);
  }
  return text as Word;
}

/** Without the keys that have no value. */
export function stated<Options extends object>(options: Options): Options {
  return Object.fromEntries(Object.entries(options).filter(([, value]) => value !== undefined)) as Options;
}
