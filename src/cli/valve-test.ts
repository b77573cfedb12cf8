/** `stickband valve-test`: reads a record of a valve test and says what it shows. */
import { dirname, resolve } from 'node:path';
import { WrongUse } from '../errors';
import { type ReadValveTestOptions, readValveTest } from '../field-test/read-valve-test';
import { readingCard } from '../field-test/reading-card';
import { testCardText } from '../report/test-card';
import { prepareFolder, writeWhole } from '../report/write-whole';
import { numberOption, readArguments, wordOption } from './arguments';
import { valveTestHelp } from './help';
import type { Output } from './output';

const optionTypes = {
  tag: 'string',
  kind: 'string',
  response: 'string',
  time: 'string',
  op: 'string',
  travel: 'string',
  pv: 'string',
  pressure: 'string',
  mode: 'string',
  'pressure-unit': 'string',
  stroke: 'string',
  area: 'string',
  period: 'string',
  swing: 'string',
  lag: 'string',
  'time-format': 'string',
  zone: 'string',
  json: 'string',
  help: 'boolean',
} as const;

type Given = ReturnType<typeof readArguments<typeof optionTypes>>['values'];

export async function valveTest(words: readonly string[], output: Output): Promise<void> {
  const { values, words: files } = readArguments('valve-test', words, optionTypes);
  if (values.help) {
    output.stdout.write(`${valveTestHelp}\n`);
    return;
  }
  if (files.length !== 1) {
    const received = files.length === 0 ? 'none was received' : `received were ${files.join(', ')}`;
    throw new WrongUse(
      `stickband valve-test takes one FILE; ${received}. "stickband valve-test --help" says more.`,
    );
  }
  const findings = readValveTest(files[0]!, optionsOf(values));
  const json = `${JSON.stringify(findings.reading, null, 2)}\n`;
  const jsonAlone = values.json === '-';
  const jsonFile = values.json === undefined || jsonAlone ? null : resolve(values.json);
  if (jsonFile) {
    prepareFolder(dirname(jsonFile));
    writeWhole({ [jsonFile]: json });
  }
  const told = jsonFile ? `\n\nNumbers (JSON): ${jsonFile}` : '';
  const summary = `${testCardText(readingCard(findings))}${told}\n`;
  (jsonAlone ? output.stderr : output.stdout).write(summary);
  if (jsonAlone) output.stdout.write(json);
}

/** Only what was stated. */
function optionsOf(values: Given): ReadValveTestOptions {
  const { tag, kind, response, time, op, travel, pv, pressure, mode, stroke, area, zone } = values;
  const number = (name: 'period' | 'swing' | 'lag'): number | undefined =>
    values[name] === undefined ? undefined : numberOption(name, values[name]);
  const all: ReadValveTestOptions = {
    tag,
    kind: kind === undefined ? kind : wordOption('kind', kind, ['hold', 'step', 'stroke'] as const),
    response:
      response === undefined
        ? response
        : wordOption('response', response, ['self-regulating', 'integrating'] as const),
    time,
    op,
    travel,
    pv,
    pressure,
    mode,
    pressureUnit: values['pressure-unit'],
    stroke,
    area,
    period: number('period'),
    swing: number('swing'),
    lag: number('lag'),
    timeFormat: values['time-format'],
    zone,
  };
  return Object.fromEntries(Object.entries(all).filter(([, value]) => value !== undefined));
}
