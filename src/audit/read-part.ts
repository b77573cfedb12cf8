/** Reads what one shard of an audit left. */
import { readFileSync } from 'node:fs';
import { UnreadableInput } from '../errors';
import type { AuditPart } from './audit';

/** @throws UnreadableInput when the file is not there or holds no part of an audit */
export function readAuditPart(file: string): AuditPart {
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
