/** `stickband merge`: the shards of an audit to the audit that one run would have given. */
import { readFileSync } from 'node:fs';
import { dirname, resolve } from 'node:path';
import type { AuditPart } from '../audit/audit';
import { mergeAudits } from '../audit/merge-audits';
import { UnreadableInput, WrongUse } from '../errors';
import { auditText } from '../report/audit-text';
import { prepareFolder, writeWhole } from '../report/write-whole';
import { readArguments } from './arguments';
import { mergeHelp } from './help';
import type { Output } from './output';

export async function merge(words: readonly string[], output: Output): Promise<void> {
  const { values, words: files } = readArguments('merge', words, { json: 'string', help: 'boolean' });
  if (values.help) {
    output.stdout.write(`${mergeHelp}\n`);
    return;
  }
  if (files.length === 0) {
    throw new WrongUse('stickband merge takes the parts of one audit; none was received.');
  }
  if (values.json === undefined)
    throw new WrongUse('stickband merge needs --json FILE, or --json - for stdout.');
  const whole = mergeAudits(files.map(readPart));
  const json = `${JSON.stringify(whole, null, 2)}\n`;
  if (values.json === '-') {
    output.stderr.write(`${auditText(whole)}\n`);
    output.stdout.write(json);
    return;
  }
  const path = resolve(values.json);
  prepareFolder(dirname(path));
  writeWhole({ [path]: json });
  output.stdout.write(`${auditText(whole)}\n\nNumbers (JSON): ${path}\n`);
}

function readPart(file: string): AuditPart {
  let text: string;
  try {
    text = readFileSync(file, 'utf8');
  } catch (error) {
    const { code, message } = error as NodeJS.ErrnoException;
    const why = code === 'ENOENT' ? 'there is no such file' : message;
    throw new UnreadableInput(`The part "${file}" cannot be read: ${why}.`);
  }
  let part: Partial<AuditPart> | null = null;
  try {
    part = JSON.parse(text);
  } catch {}
  if (part?.schema !== 'stickband/audit-part/1' || !Array.isArray(part.loops)) {
    throw new UnreadableInput(
      `"${file}" is no part of an audit. Parts are made by stickband audit with --shard i/n.`,
    );
  }
  return part as AuditPart;
}
