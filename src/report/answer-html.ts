/**
 * The answer card as HTML. It reads in order without any style sheet, as in a notebook that is not trusted, where
 * styles are taken away.
 */
import type { AnswerCard } from '../assessment/answer-card';
import type { NextStep } from '../assessment/assessment';
import { decisionWords } from './answer-text';
import { escapeHtml, listHtml } from './html-text';

export function answerHtml(card: AnswerCard): string {
  const head = [
    `<p class="sb-kicker"><span class="sb-chip">${decisionWords[card.decision]}</span> ${escapeHtml(card.loop)}</p>`,
    `<h2>${escapeHtml(card.decisionLine)}</h2>`,
    `<p class="sb-cause">${escapeHtml(card.cause)}</p>`,
  ];
  const reasons = [part('Why', listHtml(card.reasons)), part('Ruled out', listHtml(card.ruledOut))];
  const parts = [
    ...head,
    figuresTable(card),
    `<div class="sb-columns">${reasons.join('')}</div>`,
    part('The test that decides', card.decidingTest ? stepBody(card.decidingTest) : ''),
    part(
      'Work request, to copy',
      card.workRequest ? `<blockquote>${escapeHtml(card.workRequest)}</blockquote>` : '',
    ),
    part('The record', `<p>${escapeHtml(card.record)}</p>`),
    part('Cautions', listHtml(card.cautions), 'sb-cautions'),
    '<table class="sb-signatures"><tbody><tr><th>Prepared by</th><td></td><th>Reviewed by</th><td></td></tr></tbody></table>',
  ];
  return `<section class="sb-card sb-${card.decision}">${parts.join('\n')}</section>`;
}

function figuresTable(card: AnswerCard): string {
  const rows = card.figures.map(({ label, value, note }) => {
    const remark = note ? `<td class="sb-note">${escapeHtml(note)}</td>` : '<td></td>';
    return `<tr><th>${escapeHtml(label)}</th><td class="sb-value">${escapeHtml(value)}</td>${remark}</tr>`;
  });
  return rows.length > 0 ? `<table class="sb-tiles"><tbody>${rows.join('')}</tbody></table>` : '';
}

/** One thing to do, why, and its caution. */
function stepBody(step: NextStep): string {
  const caution = step.caution
    ? `<p class="sb-caution"><strong>Caution:</strong> ${escapeHtml(step.caution)}</p>`
    : '';
  return `<p><strong>${escapeHtml(step.do)}</strong> ${escapeHtml(step.why)}</p>${caution}`;
}

export function stepHtml(step: NextStep): string {
  return `<li>${stepBody(step)}</li>`;
}

/** A headed part; '' when it has no content. */
function part(title: string, content: string, look = ''): string {
  return content ? `<div class="sb-part ${look}"><h3>${title}</h3>${content}</div>` : '';
}
