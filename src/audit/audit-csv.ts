/** An audit as CSV for a spreadsheet: one row a loop, in ranked order, the loops that failed at the end. */
import { unparse } from 'papaparse';
import type { Estimate } from '../estimate/stiction-fit';
import { type AuditFindings, type RankedFindings, roleOf, swingOfRange } from './audit-findings';

type Cell = string | number | null;

const columns: readonly { readonly name: string; readonly of: (loop: RankedFindings) => Cell }[] = [
  { name: 'place', of: ({ place }) => place },
  { name: 'score', of: ({ score }) => score },
  { name: 'loop', of: ({ assessment }) => assessment.loop },
  { name: 'file', of: ({ file }) => file },
  { name: 'service', of: ({ assessment }) => assessment.service },
  { name: 'response', of: ({ assessment }) => assessment.response },
  { name: 'cause', of: ({ assessment }) => assessment.cause.verdict },
  { name: 'confidence', of: ({ assessment }) => assessment.cause.confidence },
  ...estimateColumns('S', ({ assessment }) => assessment.stiction?.S ?? null),
  ...estimateColumns('J', ({ assessment }) => assessment.stiction?.J ?? null),
  { name: 'size', of: ({ assessment }) => assessment.severity.size },
  { name: 'period, s', of: ({ assessment }) => rounded(assessment.oscillation.period) },
  { name: 'regularity', of: ({ assessment }) => rounded(assessment.oscillation.regularity) },
  { name: 'PV swing', of: ({ assessment }) => rounded(assessment.severity.pvSwing) },
  { name: 'PV unit', of: ({ signature }) => signature.pvUnit },
  { name: 'PV swing, % of range', of: (loop) => rounded(swingOfRange(loop)) },
  { name: 'OP swing, %', of: ({ assessment }) => rounded(assessment.severity.opSwing) },
  { name: 'reversals a day', of: ({ assessment }) => Math.round(assessment.severity.reversalsPerDay) },
  {
    name: 'cycles with',
    of: ({ assessment, group }) => group?.loops.filter((loop) => loop !== assessment.loop).join(', ') ?? '',
  },
  { name: 'in that cycle', of: (loop) => roleOf(loop) ?? '' },
  { name: 'likely source', of: ({ group }) => group?.likelySource ?? '' },
  { name: 'why here', of: ({ reasons }) => reasons.join(' ') },
  { name: 'why no numbers', of: ({ assessment }) => assessment.stictionRefused.join(' ') },
  { name: 'do next', of: ({ assessment }) => assessment.next[0]?.do ?? '' },
  { name: 'caution', of: ({ assessment }) => assessment.next[0]?.caution ?? '' },
  { name: 'record from', of: ({ assessment }) => assessment.record.start },
  { name: 'samples', of: ({ assessment }) => assessment.record.samples },
  { name: 'seconds between samples', of: ({ assessment }) => assessment.record.samplePeriod },
  { name: 'notes on the record', of: ({ assessment }) => joined(assessment.record.notes) },
];

/**
 * What a spreadsheet may take for a formula, unless it is a plain number: a cell that begins with = + - @ or their wide
 * forms, blanks before them or not, or with a tab or a line end. Such a cell gets an apostrophe in front.
 */
const formulaLike: RegExp = /^(?![+-]?\d+(\.\d+)?$)(\s*[=+\-@\uFF1D\uFF0B\uFF0D\uFF20]|[\t\r\n])/;

/**
 * Comma-separated text as RFC 4180 describes it (lines end with CR LF, a header line), with the mark that makes
 * spreadsheets read it as UTF-8. Each row carries the cautions in its last column, so that a sorted or filtered sheet
 * keeps them. Empty where there is no value.
 */
export function auditCsv({ audit, ranked, failed }: AuditFindings): string {
  const cautions = audit.cautions.join(' ');
  const fields = [...columns.map(({ name }) => name), 'error', 'cautions'];
  const data = [
    ...ranked.map((loop) => [...columns.map(({ of }) => of(loop)), null, cautions]),
    ...failed.map(({ loop, file, error }) => {
      const known: Record<string, Cell> = { loop, file, error, cautions };
      return fields.map((name) => known[name] ?? null);
    }),
  ];
  return `\uFEFF${unparse({ fields, data }, { escapeFormulae: formulaLike, newline: '\r\n' })}\r\n`;
}

function estimateColumns(
  what: 'S' | 'J',
  of: (loop: RankedFindings) => Estimate | null,
): { name: string; of: (loop: RankedFindings) => Cell }[] {
  const part = (name: string, key: 'value' | 'low' | 'high'): (typeof columns)[number] => ({
    name,
    of: (loop) => rounded(of(loop)?.[key] ?? null),
  });
  return [part(`${what}, % of OP span`, 'value'), part(`${what} low`, 'low'), part(`${what} high`, 'high')];
}

/** Four digits, as in the tables; the JSON has all. */
function rounded(value: number | null): number | null {
  return value === null ? null : Number(value.toPrecision(4));
}

function joined(notes: readonly { readonly text: string }[]): string {
  return notes.map(({ text }) => text).join(' ');
}
