/** The answer card as plain text for a terminal. */
import type { AnswerCard, Decision } from '../assessment/answer-card';
import type { NextStep } from '../assessment/assessment';

/** The decision in a word or three, as a label beside the sentence. */
export const decisionWords: Readonly<Record<Decision, string>> = {
  repair: 'Repair',
  retune: 'Retune',
  'look-outside': 'Look outside the loop',
  'get-better-data': 'Get better data',
  'nothing-to-do': 'Nothing to do',
};

/** Lines of at most `width` characters, ending without a line break. */
export function answerText(card: AnswerCard, width: number = 92): string {
  const wide = Math.max(...card.figures.map((figure) => figure.label.length), 0);
  const figures = card.figures.flatMap(({ label, value, note }) => {
    const start = `  ${label.padEnd(wide)}  `;
    const remark = note.endsWith('.') ? `. ${note}` : ` (${note})`;
    return wrapped(note ? value + remark : value, width, start, ' '.repeat(start.length));
  });
  const test = card.decidingTest;
  const sections: string[][] = [
    [`${card.loop}: ${decisionWords[card.decision]}`, ...wrapped(card.decisionLine, width)],
    wrapped(card.cause, width),
    figures,
    bullets('Why', card.reasons, width),
    bullets('Ruled out', card.ruledOut, width),
    test ? testLines(test, width) : [],
    card.workRequest ? ['Work request, to copy', ...wrapped(card.workRequest, width, '  ')] : [],
    ['The record', ...wrapped(card.record, width, '  ')],
    bullets('Cautions', card.cautions, width),
  ];
  return sections
    .filter((lines) => lines.length > 0)
    .map((lines) => lines.join('\n'))
    .join('\n\n');
}

function testLines(test: NextStep, width: number): string[] {
  const caution = test.caution ? wrapped(`Caution: ${test.caution}`, width, '  ') : [];
  return ['The test that decides', ...wrapped(`${test.do} ${test.why}`, width, '  '), ...caution];
}

export function bullets(title: string, sentences: readonly string[], width: number): string[] {
  if (sentences.length === 0) return [];
  return [title, ...sentences.flatMap((sentence) => wrapped(sentence, width, '  - ', '    '))];
}

/** Breaks `text` at spaces; `first` stands before the first line, `rest` before the others. */
export function wrapped(text: string, width: number, first: string = '', rest: string = first): string[] {
  const lines: string[] = [];
  let line = first;
  let empty = true;
  for (const word of text.split(/\s+/).filter(Boolean)) {
    if (!empty && line.length + 1 + word.length > width) {
      lines.push(line);
      line = rest;
      empty = true;
    }
    line += empty ? word : ` ${word}`;
    empty = false;
  }
  return empty ? lines : [...lines, line];
}
