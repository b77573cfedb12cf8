/** The answer to a whole unit as HTML. It reads in order without any style sheet, as in a notebook that is not trusted. */

import type { LoopGroup } from '../audit/audit';
import { type AuditCard, groupSentence } from '../audit/audit-card';
import { escapeHtml, listHtml } from './html-text';

/**
 * The card. Each loop that it names first leads to its row of the ranked table, by its place.
 *
 * @param unit what was audited, as its people call it; '' to leave it out
 */
export function auditCardHtml(card: AuditCard, unit: string): string {
  const about = [unit, card.records].filter((part) => part !== '').join(': ');
  const first = card.first.map(
    ({ loop, line }, i) =>
      `<li><a href="#${loopAnchor(i + 1)}"><strong>${escapeHtml(loop)}</strong></a> ${escapeHtml(line)}</li>`,
  );
  const tiles = card.figures.map(
    ({ label, value, note }) =>
      `<tr><th>${escapeHtml(label)}</th><td class="sb-value">${escapeHtml(value)}</td><td class="sb-note">${escapeHtml(note)}</td></tr>`,
  );
  return [
    '<section class="sb-card sb-unit">',
    about === '' ? '' : `<p class="sb-kicker">${escapeHtml(about)}</p>`,
    `<h2>${escapeHtml(card.headline)}</h2>`,
    `<p class="sb-cause">${escapeHtml(card.counts)}</p>`,
    '<div class="sb-columns">',
    first.length > 0 ? `<div class="sb-part"><h3>Look first at</h3><ol>${first.join('')}</ol></div>` : '',
    `<div class="sb-part"><h3>Cycling together</h3>${listHtml(card.together) || '<p>No two loops share a cycle.</p>'}</div>`,
    '</div>',
    `<table class="sb-tiles"><tbody>${tiles.join('')}</tbody></table>`,
    `<div class="sb-part sb-cautions"><h3>Cautions</h3>${listHtml(card.cautions)}</div>`,
    '<table class="sb-signatures"><tbody><tr><th>Prepared by</th><td></td><th>Reviewed by</th><td></td></tr></tbody></table>',
    '</section>',
  ].join('\n');
}

/** With more groups than this their reasons are folded in, so that the groups can be seen at a glance. */
const mostOpen = 5;

/** Groups of loops that share a cycle, each with the reasons for its likely source, or for naming none. */
export function groupsHtml(groups: readonly LoopGroup[]): string {
  const open = groups.length > mostOpen ? '' : ' open';
  if (groups.length === 0) return '<p>No two loops share a cycle.</p>';
  return groups
    .map(
      (group) =>
        `<details class="sb-folded"${open}><summary><strong>${escapeHtml(groupSentence(group))}</strong></summary>${listHtml(group.reasons)}</details>`,
    )
    .join('\n');
}

/** Name of the place of the ranked table where a loop is told in full. */
export function loopAnchor(place: number): string {
  return `sb-loop-${place}`;
}
