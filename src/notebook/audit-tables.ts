/** An audit as tables, to look at, filter and join in a cell. Units stand in the column names. */
import { type AuditFindings, roleOf, swingOfRange } from '../audit/audit-findings';
import { rankingRule } from '../audit/rank-loops';
import type { Table } from '../report/table';
import { tableFrom } from './tables';

/** One row a loop, in ranked order. */
export function rankingTable({ ranked }: AuditFindings): Table {
  const rows = ranked.map((loop) => {
    const { assessment, signature, place, score, group } = loop;
    const { cause, stiction, oscillation, severity } = assessment;
    return {
      place,
      loop: assessment.loop,
      service: assessment.service,
      cause: cause.verdict,
      confidence: cause.confidence,
      'S, %': stiction?.S.value ?? null,
      'S low': stiction?.S.low ?? null,
      'S high': stiction?.S.high ?? null,
      'J, %': stiction?.J?.value ?? null,
      'period, s': oscillation.period,
      'PV swing': severity.pvSwing,
      'PV unit': signature.pvUnit,
      'PV swing, % of range': swingOfRange(loop),
      'turns a day': Math.round(severity.reversalsPerDay),
      'shared cycle': roleOf(loop) ?? '',
      'likely source': group?.likelySource ?? '',
      score,
    };
  });
  const names = [
    'place',
    'loop',
    'service',
    'cause',
    'confidence',
    'S, %',
    'S low',
    'S high',
    'J, %',
    'period, s',
    'PV swing',
    'PV unit',
    'PV swing, % of range',
    'turns a day',
    'shared cycle',
    'likely source',
    'score',
  ] as const;
  return tableFrom('Loops in ranked order', names, rows);
}

/** Loops that could not be read or assessed, each with its error. */
export function failedTable({ failed }: AuditFindings): Table {
  const rows = failed.map(({ loop, file, error }) => ({ loop, file, error }));
  return tableFrom('Loops that could not be assessed', ['loop', 'file', 'error'], rows);
}

/** What was assumed, seen or left out while reading, with the loops of which it holds. */
export function auditNoteTable({ ranked }: AuditFindings): Table {
  const loops = new Map<string, string[]>();
  for (const { assessment } of ranked) {
    for (const { code } of assessment.record.notes) {
      const named = loops.get(code) ?? [];
      if (named.at(-1) !== assessment.loop) named.push(assessment.loop);
      loops.set(code, named);
    }
  }
  const textOf = (code: string): string =>
    ranked.flatMap(({ assessment }) => assessment.record.notes).find((note) => note.code === code)!.text;
  const rows = [...loops]
    .sort(([, a], [, b]) => b.length - a.length)
    .map(([code, named]) => ({
      code,
      loops: named.length,
      which: named.length === ranked.length ? 'all' : shortList(named),
      'for example': textOf(code),
    }));
  return tableFrom('Notes on the records', ['code', 'loops', 'which', 'for example'], rows);
}

/** The rule by which loops are ranked, with what was changed of it. */
export function rankingRuleTable({ audit }: AuditFindings): Table {
  const changed = (audit.provenance.options as { ranking?: Partial<typeof rankingRule> }).ranking ?? {};
  const rule = { ...rankingRule, ...changed };
  const rows: { part: string; value: number; meaning: string }[] = [];
  for (const [verdict, value] of Object.entries(rule.cause)) {
    rows.push({ part: `cause: ${verdict}`, value, meaning: 'what the cause counts, 0 to 1' });
  }
  for (const [name, { full, weight }] of Object.entries(rule.severity)) {
    const meaning = severityWords[name as keyof typeof severityWords];
    rows.push({ part: `severity: ${name}, full at`, value: full, meaning });
    rows.push({
      part: `severity: ${name}, weight`,
      value: weight,
      meaning: 'weight among the parts that are known',
    });
  }
  rows.push(
    {
      part: 'openConfidence',
      value: rule.openConfidence,
      meaning: 'confidence with which cannot-tell counts',
    },
    { part: 'leastSeverity', value: rule.leastSeverity, meaning: 'severity that a loop has at least' },
    {
      part: 'perShakenLoop',
      value: rule.perShakenLoop,
      meaning: 'added for each loop that it likely shakes, as a share',
    },
    { part: 'mostShakenLoops', value: rule.mostShakenLoops, meaning: 'so many of them count at most' },
    {
      part: 'shakenShare',
      value: rule.shakenShare,
      meaning: 'share of its source’s score that a shaken loop has at most',
    },
  );
  return tableFrom('Rule of the ranking', ['part', 'value', 'meaning'], rows);
}

const severityWords = {
  swingOfRange: 'PV swing, peak to peak, in % of the PV range',
  swingOfNoise: 'PV swing, peak to peak, in standard deviations of PV’s own fast noise',
  S: 'S, % of OP span',
  reversals: 'turns of OP a day',
} as const;

/** What the audit was made from: version, options, and the fingerprint of every record. */
export function auditProvenanceTable({ audit }: AuditFindings): Table {
  const { version, options, seed } = audit.provenance;
  const rows = [
    ['stickband version', version],
    ['options', JSON.stringify(options)],
    ['seed', String(seed)],
    ['loops', String(audit.loops.length)],
  ].map(([what, value]) => ({ what: what!, value: value! }));
  return tableFrom('Provenance of the audit', ['what', 'value'], rows);
}

/** The file of every loop and its fingerprint. */
export function recordTable({ ranked }: AuditFindings): Table {
  const rows = [...ranked]
    .sort((a, b) => (a.assessment.loop < b.assessment.loop ? -1 : 1))
    .map(({ assessment: { loop, record }, file }) => ({
      loop,
      file,
      'first sample': record.start,
      samples: record.samples,
      'seconds between samples': record.samplePeriod,
      'SHA-256': record.sha256,
    }));
  const names = ['loop', 'file', 'first sample', 'samples', 'seconds between samples', 'SHA-256'] as const;
  return tableFrom('Records', names, rows);
}

function shortList(loops: readonly string[]): string {
  const more = loops.length > 8 ? ` and ${loops.length - 8} more` : '';
  return `${loops.slice(0, 8).join(', ')}${more}`;
}
