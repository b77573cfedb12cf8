/** The card of a valve test, read or planned, as plain text for a terminal and as HTML that reads without a style sheet. */
import type { TestCard } from '../field-test/test-card';
import { wrapped } from './answer-text';
import { escapeHtml, listHtml } from './html-text';

/** Lines of at most `width` characters, ending without a line break. */
export function testCardText(card: TestCard, width: number = 92): string {
  const wide = Math.max(...card.figures.map(({ label }) => label.length), 0);
  const figures = card.figures.flatMap(({ label, value, note }) => {
    const start = `  ${label.padEnd(wide)}  `;
    return wrapped(note ? `${value} (${note})` : value, width, start, ' '.repeat(start.length));
  });
  const bullets = (title: string, sentences: readonly string[]): string[] => [
    title,
    ...sentences.flatMap((sentence) => wrapped(sentence, width, '  - ', '    ')),
  ];
  const sections = [
    [`${card.loop}: ${card.label}`, ...wrapped(card.headline, width)],
    wrapped(card.lead, width),
    figures,
    ...card.parts.map(({ title, sentences }) => bullets(title, sentences)),
    bullets('Cautions', card.cautions),
  ];
  return sections
    .filter((lines) => lines.length > 0)
    .map((lines) => lines.join('\n'))
    .join('\n\n');
}

export function testCardHtml(card: TestCard): string {
  const tiles = card.figures.map(
    ({ label, value, note }) =>
      `<tr><th>${escapeHtml(label)}</th><td class="sb-value">${escapeHtml(value)}</td><td class="sb-note">${escapeHtml(note)}</td></tr>`,
  );
  const parts = card.parts.map(
    ({ title, sentences }) =>
      `<div class="sb-part"><h3>${escapeHtml(title)}</h3>${listHtml(sentences)}</div>`,
  );
  return [
    '<section class="sb-card">',
    `<p class="sb-kicker"><span class="sb-chip">${escapeHtml(card.label)}</span> ${escapeHtml(card.loop)}</p>`,
    `<h2>${escapeHtml(card.headline)}</h2>`,
    `<p class="sb-cause">${escapeHtml(card.lead)}</p>`,
    tiles.length > 0 ? `<table class="sb-tiles"><tbody>${tiles.join('')}</tbody></table>` : '',
    ...parts,
    `<div class="sb-part sb-cautions"><h3>Cautions</h3>${listHtml(card.cautions)}</div>`,
    '<table class="sb-signatures"><tbody><tr><th>Prepared by</th><td></td><th>Reviewed by</th><td></td></tr></tbody></table>',
    '</section>',
  ].join('\n');
}
