/** `stickband assess`: one loop from a file to the answer, the numbers, the notebook and the page. */
import { basename, dirname, extname, resolve } from 'node:path';
import type { AnswerCard } from '../assessment/answer-card';
import { type AssessOptions, assessLoop } from '../assessment/assess-loop';
import { answerCard } from '../assessment/make-answer-card';
import { WrongUse } from '../errors';
import { type ReadLoopOptions, readLoop } from '../record/read-loop';
import { answerText } from '../report/answer-text';
import { ensureJupyter, type Jupyter } from '../report/jupyter';
import { bundledNotebook, defaultOutFolder } from '../report/places';
import { type Rendered, renderNotebook } from '../report/render-notebook';
import { prepareFolder, writeWhole } from '../report/write-whole';
import { numberOption, rangeOption, readArguments, stated, wordOption } from './arguments';
import { fileName } from './file-name';
import { assessHelp } from './help';
import type { Output } from './output';
import { startProgress } from './progress';

const optionTypes = {
  tag: 'string',
  service: 'string',
  response: 'string',
  'pv-range': 'string',
  'pv-unit': 'string',
  'valve-range': 'string',
  time: 'string',
  sp: 'string',
  pv: 'string',
  op: 'string',
  travel: 'string',
  mode: 'string',
  'time-format': 'string',
  zone: 'string',
  'dead-time': 'string',
  'process-gain': 'string',
  seed: 'string',
  out: 'string',
  json: 'string',
  'no-notebook': 'boolean',
  install: 'boolean',
  help: 'boolean',
} as const;

type Given = ReturnType<typeof readArguments<typeof optionTypes>>['values'];

/** Share of the whole time that the numbers take when a notebook is rendered after them. */
const numbersShare = 0.3;

export async function assess(words: readonly string[], output: Output): Promise<void> {
  const { values, words: files } = readArguments('assess', words, optionTypes);
  if (values.help) {
    output.stdout.write(`${assessHelp}\n`);
    return;
  }
  const file = oneFile(files);
  const reading = readingOptions(values);
  const assessing = assessingOptions(values);
  const jsonAlone = values.json === '-';
  const wantsNotebook = !values['no-notebook'] && (!jsonAlone || values.out !== undefined);
  const folder = resolve(values.out ?? defaultOutFolder());
  const jsonFile = values.json === undefined || jsonAlone ? null : resolve(values.json);

  const record = readLoop(file, reading);
  if (jsonFile) prepareFolder(dirname(jsonFile));
  let jupyter: Jupyter | null = null;
  if (wantsNotebook) {
    jupyter = ensureJupyter({ install: values.install, say: (line) => output.stderr.write(`${line}\n`) });
    prepareFolder(folder);
  }

  const progress = startProgress(output.stderr);
  let card: AnswerCard;
  let json: string;
  let rendered: Rendered | null = null;
  try {
    const share = jupyter ? numbersShare : 1;
    const findings = assessLoop(record, {
      ...assessing,
      onProgress: (step, done) => progress(step, share * done),
    });
    card = answerCard(findings);
    json = `${JSON.stringify(findings.assessment, null, 2)}\n`;
    if (jupyter) {
      rendered = await renderNotebook(bundledNotebook('assess-one-loop.ipynb'), {
        jupyter,
        folder,
        name: resultName(file, record.loop),
        title: `${record.loop}: what makes this loop cycle?`,
        files: { file },
        parameters: { reading, assessing },
        onProgress: (done) => progress('rendering the notebook', share + (1 - share) * done),
      });
    }
  } finally {
    progress.stop();
  }

  const lines = [answerText(card)];
  if (rendered) lines.push('', `Page to share:  ${rendered.page}`, `Notebook:       ${rendered.notebook}`);
  if (jsonFile) {
    writeWhole({ [jsonFile]: json });
    lines.push(`Numbers (JSON): ${jsonFile}`);
  }
  const summary = `${lines.join('\n')}\n`;
  (jsonAlone ? output.stderr : output.stdout).write(summary);
  if (jsonAlone) output.stdout.write(json);
}

function oneFile(files: readonly string[]): string {
  if (files.length !== 1) {
    const received = files.length === 0 ? 'none was received' : `received were ${files.join(', ')}`;
    throw new WrongUse(`stickband assess takes one FILE; ${received}. "stickband assess --help" says more.`);
  }
  return files[0]!;
}

const services = ['flow', 'pressure', 'level', 'temperature', 'other'] as const;
const responses = ['self-regulating', 'integrating'] as const;

/** Only what was stated; everything else is left to the defaults of readLoop. */
function readingOptions(values: Given): ReadLoopOptions {
  const { tag, service, response, time, sp, pv, op, travel, mode, zone } = values;
  const pvRange = values['pv-range'];
  const valveRange = values['valve-range'];
  return stated({
    tag,
    service: service === undefined ? service : wordOption('service', service, services),
    response: response === undefined ? response : wordOption('response', response, responses),
    pvRange: pvRange === undefined ? pvRange : rangeOption('pv-range', pvRange),
    pvUnit: values['pv-unit'],
    valveRange: valveRange === undefined ? valveRange : rangeOption('valve-range', valveRange),
    time,
    sp,
    pv,
    op,
    travel,
    mode,
    timeFormat: values['time-format'],
    zone,
  });
}

function assessingOptions(values: Given): AssessOptions {
  const number = (name: 'dead-time' | 'process-gain' | 'seed'): number | undefined =>
    values[name] === undefined ? undefined : numberOption(name, values[name]);
  return stated({ deadTime: number('dead-time'), processGain: number('process-gain'), seed: number('seed') });
}

/** Name of the results: that of the file, with the tag when the file is not called after it. */
function resultName(file: string, tag: string): string {
  const name = basename(file, extname(file));
  const whole = name.includes(tag) ? name : `${name}-${tag}`;
  return fileName(whole) || 'loop';
}
