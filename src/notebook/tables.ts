/** Findings as tables, with the columns an engineer asks for and units in the column names. */
import type { Findings } from '../assessment/findings';
import type { Estimate } from '../estimate/stiction-fit';
import type { Table } from '../report/table';

/** A table from rows with the same keys. */
export function tableFrom<Key extends string>(
  title: string,
  names: readonly Key[],
  rows: readonly Readonly<Record<Key, string | number | boolean | null>>[],
): Table {
  return { title, columns: names.map((name) => ({ name, values: rows.map((row) => row[name]) })) };
}

/** Every check of the record: what was found, the limit, where the limit is from. */
export function fitnessTable(findings: Findings): Table {
  const rows = findings.fitness.checks.map((check) => ({
    check: check.title,
    found: check.text,
    limit: check.limit,
    passed: check.passed,
    'source of the limit': check.source,
  }));
  const names = ['check', 'found', 'limit', 'passed', 'source of the limit'] as const;
  return tableFrom('All checks, with their limits and where these are from', names, rows);
}

/** Dead band and slip jump with the ends of their 90 % intervals, and the process that was found with them. */
export function estimateTable(findings: Findings): Table {
  const fit = findings.stiction.fit;
  const rows: Record<'what' | 'value' | 'low' | 'high' | 'unit', string | number | null>[] = [];
  const add = (what: string, { value, low, high, unit }: Estimate): number =>
    rows.push({ what, value, low, high, unit });
  const addBare = (what: string, value: number | null, unit: string): number =>
    rows.push({ what, value, low: null, high: null, unit });
  if (fit) {
    add('S, dead band as tested on reversal', fit.S);
    if (fit.J) add('J, slip jump (resolution)', fit.J);
    else addBare('J, slip jump (resolution): not resolved', null, fit.S.unit);
    const pvUnit = findings.record.pvUnit || 'PV unit';
    if (fit.process) {
      const { gain, lag, deadTime, response } = fit.process;
      addBare('process gain', gain, response === 'integrating' ? `${pvUnit} per % and s` : `${pvUnit} per %`);
      if (lag !== null) addBare('process lag', lag, 's');
      addBare('process dead time', deadTime, 's');
    }
  }
  return tableFrom('What was estimated, with 90 % intervals', ['what', 'value', 'low', 'high', 'unit'], rows);
}

/** The single cycles of OP: when, how long, how large. */
export function cycleTable(findings: Findings): Table {
  const rows = findings.opCycle.single.map((cycle) => ({
    'from, s': cycle.from,
    'to, s': cycle.to,
    'length, s': cycle.to - cycle.from,
    'OP half swing, %': cycle.amplitude,
  }));
  return tableFrom('Single cycles of OP', ['from, s', 'to, s', 'length, s', 'OP half swing, %'], rows);
}

/** The moments at which the valve broke loose, as reconstructed. */
export function slipTable(findings: Findings): Table {
  const slips = findings.stiction.fit?.slips ?? [];
  const rows = slips.map((slip) => ({
    'time, s': slip.time,
    'size, %': Math.abs(slip.size),
    direction: slip.size > 0 ? 'up' : 'down',
  }));
  return tableFrom('Slips of the valve', ['time, s', 'size, %', 'direction'], rows);
}

/** The published indicators beside the fit: what each says, against which threshold, from which paper. */
export function evidenceTable(findings: Findings): Table {
  const rows = findings.assessment.evidence.map(({ indicator, value, threshold, says, why, source }) => ({
    indicator,
    value,
    threshold,
    says,
    why,
    source,
  }));
  return tableFrom(
    'Every indicator, with its threshold and paper',
    ['indicator', 'value', 'threshold', 'says', 'why', 'source'],
    rows,
  );
}

/** What the result was made from: file, fingerprint, version, options. */
export function provenanceTable(findings: Findings): Table {
  const { record, provenance, loop } = findings.assessment;
  const rows = [
    ['loop', loop],
    ['source', record.source],
    ['SHA-256 of the source', record.sha256],
    ['first sample', record.start],
    ['samples', String(record.samples)],
    ['seconds between samples', String(record.samplePeriod)],
    ['stickband version', provenance.version],
    ['options', JSON.stringify(provenance.options)],
    ['seed', String(provenance.seed)],
  ].map(([what, value]) => ({ what: what!, value: value! }));
  return tableFrom('Provenance', ['what', 'value'], rows);
}

/** Everything that was assumed, seen or left out while reading. */
export function noteTable(findings: Findings): Table {
  const rows = findings.assessment.record.notes.map(({ code, text }) => ({ note: text, code }));
  return tableFrom('Notes on the record', ['note', 'code'], rows);
}
