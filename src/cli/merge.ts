/** `stickband merge`: the shards of an audit to the audit that one run would have given. */
import { dirname, join, resolve } from 'node:path';
import { auditCsv } from '../audit/audit-csv';
import { auditFindings } from '../audit/audit-findings';
import { mergedRun } from '../audit/merge-audits';
import { readAuditPart } from '../audit/read-part';
import { WrongUse } from '../errors';
import { auditText } from '../report/audit-text';
import { ensureJupyter } from '../report/jupyter';
import type { Rendered } from '../report/render-notebook';
import { prepareFolder, writeWhole } from '../report/write-whole';
import { readArguments } from './arguments';
import { madeFiles, renderAuditNotebook } from './audit-pages';
import { mergeHelp } from './help';
import type { Output } from './output';
import { startProgress } from './progress';

const optionTypes = {
  json: 'string',
  out: 'string',
  'no-notebook': 'boolean',
  install: 'boolean',
  help: 'boolean',
} as const;

export async function merge(words: readonly string[], output: Output): Promise<void> {
  const { values, words: parts } = readArguments('merge', words, optionTypes);
  if (values.help) {
    output.stdout.write(`${mergeHelp}\n`);
    return;
  }
  if (parts.length === 0) {
    throw new WrongUse('stickband merge takes the parts of one audit; none was received.');
  }
  if (values.json === undefined && values.out === undefined) {
    throw new WrongUse('stickband merge needs --json FILE, or --json - for stdout, or --out DIR.');
  }
  const jsonAlone = values.json === '-';
  const jsonFile = values.json === undefined || jsonAlone ? null : resolve(values.json);
  const folder = values.out === undefined ? null : resolve(values.out);
  const findings = auditFindings(mergedRun(parts.map(readAuditPart)));
  const json = `${JSON.stringify(findings.audit, null, 2)}\n`;

  const say = (line: string): unknown => output.stderr.write(`${line}\n`);
  const jupyter = folder && !values['no-notebook'] ? ensureJupyter({ install: values.install, say }) : null;
  if (jsonFile) prepareFolder(dirname(jsonFile));
  if (folder) prepareFolder(folder);
  const numbers = [...(folder ? [join(folder, 'audit.json')] : []), ...(jsonFile ? [jsonFile] : [])];
  const sheet = folder && join(folder, 'audit.csv');
  writeWhole({
    ...Object.fromEntries(numbers.map((path) => [path, json])),
    ...(sheet ? { [sheet]: auditCsv(findings) } : {}),
  });
  let rendered: Rendered | null = null;
  if (folder && jupyter) {
    const progress = startProgress(output.stderr, 'quiet');
    try {
      rendered = await renderAuditNotebook({
        jupyter,
        folder,
        name: `${findings.audit.loops.length} loops`,
        files: { parts },
        parameters: {},
        onProgress: (share) => progress('rendering the notebook', share),
      });
    } finally {
      progress.stop();
    }
  }
  const lines = [auditText(findings.audit), ...madeFiles({ rendered, sheet, numbers })];
  (jsonAlone ? output.stderr : output.stdout).write(`${lines.join('\n')}\n`);
  if (jsonAlone) output.stdout.write(json);
}
