/** Text made safe to stand inside HTML, in elements and in quoted attributes. */

const entities: Readonly<Record<string, string>> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};

export function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, (sign) => entities[sign]!);
}

/** JSON that may stand inside a script element: no `<`, so nothing in it can end the element. */
export function scriptJson(value: unknown): string {
  return JSON.stringify(value).replace(/</g, '\\u003c');
}

/** An unordered list of plain sentences; '' for none. */
export function listHtml(sentences: readonly string[]): string {
  if (sentences.length === 0) return '';
  return `<ul>${sentences.map((sentence) => `<li>${escapeHtml(sentence)}</li>`).join('')}</ul>`;
}
