/** Shows an audit in the cells of a notebook. Everything shown also reads where scripts and styles are taken away. */
import { auditCard } from '../audit/audit-card';
import type { AuditFindings } from '../audit/audit-findings';
import { refuseUnknownOptions } from '../errors';
import { auditCardHtml, groupsHtml } from '../report/audit-html';
import { type RankedTableLook, rankedTableHtml } from '../report/audit-table';
import { showHtml } from './kernel-display';

export interface ShowAuditOptions {
  /** What was audited, as its people call it. Default: not named. */
  readonly unit?: string;
}

/**
 * Shows the answer to the whole unit: how many loops cycle, what to look at first, what cycles together. Throws
 * WrongUse for an unknown option.
 */
export async function showAuditAnswer(
  { audit }: AuditFindings,
  options: ShowAuditOptions = {},
): Promise<void> {
  refuseUnknownOptions('showAuditAnswer', options, ['unit']);
  await showHtml(auditCardHtml(auditCard(audit), options.unit ?? ''));
}

/**
 * Shows the ranked loops, each with a picture and, folded in, its whole answer. Sortable where scripts run. Throws
 * WrongUse for an unknown option.
 */
export async function showRanking({ ranked }: AuditFindings, look: RankedTableLook = {}): Promise<void> {
  refuseUnknownOptions('showRanking', look, ['pages']);
  await showHtml(rankedTableHtml(ranked, look) || '<p>No loop was assessed.</p>');
}

/** Shows which loops share a cycle, and why one of them is its likely source, or why none can be named. */
export async function showGroups({ audit }: AuditFindings): Promise<void> {
  await showHtml(groupsHtml(audit.groups));
}
